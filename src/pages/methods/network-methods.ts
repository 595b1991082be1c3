/** Floor, links, floods, survey and energy: kept beside the docstrings of shared/network. */
import type { MethodGroup } from "./methods.ts";

export const NETWORK_METHODS: readonly MethodGroup[] = [
  {
    id: "links",
    title: "Floor and links",
    methods: [
      {
        title: "Link budget",
        text: "Received power of every pair of nodes, in dB. Distances are three-dimensional and count from 1 m; an obstacle whose outline the straight line crosses on the plan weakens it once. Path loss is computed in the middle of the band, 2440 MHz.",
        formulas: ["P_r = P_t - path loss - obstacles - shadowing + fading", "noise = -174 dBm + 10 log_{10}(B / Hz) + noise figure"],
        source: "Link budget and thermal noise at 290 K: Rappaport, Wireless Communications, 2nd ed., 2002, app. B",
      },
      {
        title: "Free space",
        text: "Also the loss at 1 m of the log-distance model, unless one is typed.",
        formulas: ["L = 20 log_{10}(4 π d f / c)"],
        source: "Friis, Proc. IRE 34, 1946; ITU-R P.525",
      },
      {
        title: "Log-distance",
        text: "With an exponent $n$ of one’s own.",
        formulas: ["L = L_{1m} + 10 n log_{10} d"],
        source: "Rappaport, Wireless Communications, 2nd ed., 2002, 4.9",
      },
      {
        title: "Indoors, by environment, before 2019",
        text: "$f$ in MHz, $d$ in m, one floor. $N$ is 28 in homes, 30 in offices, 22 in commercial rooms (measured at 1.8 to 2 GHz).",
        formulas: ["L = 20 log_{10} f + N log_{10} d - 28"],
        source: "ITU-R P.1238-8, 2015, tables 2 and 5",
      },
      {
        title: "Indoors, industrial, since 2019",
        text: "$f$ in GHz, $d$ in m. With line of sight $α$ = 2.34, $β$ = 24.26, $γ$ = 2.06; without 3.66, 22.42, 2.34 (coefficients from memory).",
        formulas: ["L = 10 α log_{10} d + β + 10 γ log_{10} f"],
        source: "ITU-R P.1238-10, 2019",
      },
      {
        title: "Indoor factory",
        text: "$f$ in GHz, $d$ in m. Sparse or dense clutter, low or high antenna; never less than with line of sight, and dense low never less than sparse low.",
        formulas: [
          "LOS: 31.84 + 21.50 log_{10} d + 19.00 log_{10} f",
          "SL: 33 + 25.5 log_{10} d + 20 log_{10} f",
          "DL: 18.6 + 35.7 log_{10} d + 20 log_{10} f",
          "SH: 32.4 + 23.0 log_{10} d + 20 log_{10} f",
          "DH: 33.63 + 21.9 log_{10} d + 20 log_{10} f",
        ],
        source: "3GPP TR 38.901, table 7.4.1-1",
      },
      {
        title: "Shadowing",
        text: "Normal in dB, one value for every pair of nodes, from the hall’s own seed, so that the hall is the same in every run. For nodes that move it changes along their ways $s$, with correlation distance $D$.",
        formulas: ["correlation = e^{-s / D}"],
        source: "Gudmundson, Electron. Lett. 27(23), 1991",
      },
      {
        title: "Fading",
        text: "Rician with factor $K$ and unit mean power, constant over a slot, for every pair of nodes and channel; $z$ goes on from round to round with correlation $ρ$, by the faster node’s Doppler frequency $f_d = v f / c$ or by a coherence time $T_c$. Within a round, slots in the same coherence time ($0.423 / f_d$ or $T_c$) meet the same fading.",
        formulas: ["h = sqrt(K / (K + 1)) + z / sqrt(K + 1)", "z' = ρ z + sqrt(1 - ρ^2) w", "ρ = J_0(2 π f_d T) or e^{-T / T_c}"],
        source: "Clarke, Bell Syst. Tech. J. 47, 1968; coherence time: Rappaport, 2002, 5.40c",
      },
      {
        title: "Interferers",
        text: "Power spread evenly over the interferer’s band; what falls into the receiver’s band counts as noise in every step that overlaps an on-time at all. Random ones are on and off for exponentially distributed times and start stationary.",
        formulas: ["SINR = signal / (noise + sum of interference in the band)"],
        source: null,
      },
      {
        title: "Packet reception, IEEE 802.15.4",
        text: "SINR is linear and in the receiver’s 2 MHz; $n$ counts the bytes after the length, check sum included. Bit errors are independent.",
        formulas: ["BER = (8 / 15) (1 / 16) Σ_{k=2}^{16} (-1)^k C(16, k) e^{20 SINR (1/k - 1)}", "PRR = (1 - BER)^{8 n}"],
        source: "IEEE Std 802.15.4-2006, annex E.4.1.8 (clause from memory); packets: common practice",
      },
      {
        title: "Packet reception, Bluetooth LE",
        text: "Non-coherent binary FSK at rate $R$ in bandwidth $B$. Coded PHYs as LE 1M with an editable gain in dB. $n$ counts PDU header, payload and check sum. A measured table of PRR over SNR replaces all of it.",
        formulas: ["E_b / N_0 = SINR · B / R", "BER = e^{-E_b / (2 N_0)} / 2", "PRR = (1 - BER)^{8 n}"],
        source: "Proakis, Digital Communications, 4th ed., 2001, 5.4; its use for LE is common practice",
      },
    ],
  },
  {
    id: "floods",
    title: "Floods",
    methods: [
      {
        title: "Wave",
        text: "In a step a node sends or listens. After its first reception in step $s$ it sends $N$ times, whatever it hears in between; the source as if $s$ = 0. No step begins after the slot’s last. A listener receives with the PRR of what sends at once in that step.",
        formulas: ["alternating relay: sends in s + 1, s + 3, ...", "back-to-back relay: sends in s + 1, s + 2, ..."],
        source: "Ferrari, Zimmerling, Thiele and Saukh, IPSN 2011; Jacob et al., DATE 2018",
      },
      {
        title: "Several senders at once",
        text: "They send the same packet within half a microsecond, so their mean powers add. Where the strongest is not above the sum of the others by the capture threshold, a penalty is taken off. With measured ratios several senders are independent tries.",
        formulas: ["signal = Σ P_i, less the penalty unless max P_i ≥ capture · (Σ P_i - max P_i)"],
        source:
          "Capture of about 3 dB: Leentvaar and Flint, IEEE Trans. Commun. 24(5), 1976; Wilhelm, Lenders and Schmitt, IEEE Trans. Wirel. Commun., 2014; the penalty is ours",
      },
      {
        title: "Channels",
        text: "Everybody knows the channel without a message: a slot begins at a place of the list that goes by its name; from there it goes on by one with every time the slot comes again, and with hopping per step with every step.",
        formulas: ["place = (occurrence + slot + step - 1) mod channels"],
        source: null,
      },
      {
        title: "What it is worth in delivery",
        text: "On a line of $H$ hops whose packets arrive with probability $q$, without a slot’s end, a node at the end has the message with probability $P$; the wave is held to it, and to enumeration on lines, stars, rings and a grid.",
        formulas: ["P = (1 - (1 - q)^N)^H"],
        source: "Derived; checked in tests/reference",
      },
      {
        title: "Random numbers of floods",
        text: "The number for a node, step and round is a function of the seed and these alone: a node, slot or transmission more changes none of the others, and better links only add receptions.",
        source: "Threefry-2x32: Salmon, Moraes, Dror and Shaw, SC 2011",
      },
      {
        title: "Slot table",
        text: "Beacon, commands of the round before, measurements as they are ready, commands as computing ends, then other messages, each at the earliest time at which no slot of a common round is in its way. Two rhythms meet unless their first rounds differ by no multiple of the greatest common divisor of their lengths.",
        formulas: ["rounds r_1 + i n_1 and r_2 + j n_2 meet ⇔ gcd(n_1, n_2) divides r_1 - r_2"],
        source: "List scheduling: Graham, SIAM J. Appl. Math. 17(2), 1969; congruences: Bézout",
      },
    ],
  },
  {
    id: "survey",
    title: "Survey",
    methods: [
      {
        title: "Delivery and depth",
        text: "Each node’s share of received floods with its exact interval, from floods at the instants of a run, without the nodes’ scripted outages. A node is deeper than the hop bound when half of some message’s floods reach it in a later step.",
        formulas: ["lower = B(α/2; k, n - k + 1)", "upper = B(1 - α/2; k + 1, n - k)"],
        source: "Clopper and Pearson, Biometrika 26(4), 1934",
      },
      {
        title: "Floods that depend on each other",
        text: "Twenty successive batches: where their delivered floods vary more than independent ones would, the intervals are too narrow, and the survey says by how much. Both messages of a loop lost in one sampling are compared with the product of their shares.",
        formulas: ["spread = Σ (k_i - n_i p)^2 / (n_i p (1 - p)) / 19", "19 · spread: chi-square with 19 degrees of freedom"],
        source: "Index of dispersion: Cochran, Biometrics 10(4), 1954",
      },
      {
        title: "What would help",
        text: "Changes are simulated with the same random numbers for the weakest node, and offered when they take away at least a quarter of its losses, with the time that they cost in the round. A node is a single point of failure when without it another one has less than half of what it had.",
        source: "Common random numbers: Glasserman and Yao, Manage. Sci. 38(6), 1992",
      },
      {
        title: "Contours of the wave",
        text: "The step by which half of the floods have arrived, at points over the plan that only listen, without shadowing and fading of their own. Who sends is drawn flood by flood; the probability that a point has received is computed. Foul ground: on the channels that interferers reach and while they send, more than half of the receptions are lost.",
        formulas: ["P(received by step s) = 1 - Π_{i≤s} (1 - PRR_i)"],
        source: "Lines by marching squares, after Lorensen and Cline, SIGGRAPH 1987",
      },
    ],
  },
  {
    id: "energy",
    title: "Energy",
    methods: [
      {
        title: "Radio-on time",
        text: "A node listens from its wake-up on and sleeps after its last transmission, or at the slot’s end. No node is on for longer than each slot’s wake-up and whole flood, on any floor.",
        formulas: ["alternating relay: at most (H + 2 N - 1 + slack) · step", "back-to-back relay: at most (H + N + slack) · step"],
        source: "Jacob et al., DATE 2018, for alternating relay",
      },
      {
        title: "Charge and battery life",
        text: "Waking up counts at the current of receiving. The battery’s usable share is spent by the radio alone; processor and sensor come on top. The defaults name their data sheets.",
        formulas: ["Q = I_{send} t_{send} + I_{receive} t_{listen} + I_{sleep} t_{rest}", "E = Q U", "life = usable capacity · T / Q"],
        source: "Currents: Nordic nRF52840 product specification; Texas Instruments data sheets of CC2340R5, CC2538 and CC2652R",
      },
      {
        title: "Use of the medium",
        text: "A hint only, for equipment that does not listen before it sends, above 10 %. Local spectrum rules decide.",
        formulas: ["MU = P / 100 mW · share of the time on the air"],
        source: "ETSI EN 300 328 V2.2.2 (formula from memory)",
      },
    ],
  },
];
