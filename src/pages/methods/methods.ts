/** What the engine computes, formula by formula, with the published source. Kept beside the docstrings of shared/. */
import { NETWORK_METHODS } from "./network-methods.ts";
import { RECEPTION_METHODS } from "./reception-methods.ts";

interface Method {
  title: string;
  text: string;
  formulas?: readonly string[];
  /** Author, year, where; null where it is our own definition. */
  source: string | null;
}
export interface MethodGroup {
  id: string;
  title: string;
  methods: readonly Method[];
}

export const METHODS: readonly MethodGroup[] = [
  {
    id: "round",
    title: "Round",
    methods: [
      {
        title: "Airtime, IEEE 802.15.4",
        text: "O-QPSK at 2.4 GHz takes 32 µs a byte: 6 bytes of preamble, delimiter and length, header and payload of $n$ bytes together, 2 bytes of check sum; at most 127 bytes after the length. Turnaround 192 µs.",
        formulas: ["airtime = (6 + n + 2) · 32 µs"],
        source: "IEEE Std 802.15.4-2011, 8.1.2 and 10.3.4",
      },
      {
        title: "Airtime, Bluetooth LE",
        text: "Preamble, access address 4, PDU header 2, header and payload of $n$ bytes together up to 255, check sum 3. Coded PHYs send the first block always at $S$ = 8, then PDU, check sum and 3 closing bits at $S$. Turnaround 150 µs.",
        formulas: [
          "1M: airtime = (1 + 4 + 2 + n + 3) · 8 µs",
          "2M: airtime = (2 + 4 + 2 + n + 3) · 4 µs",
          "coded: airtime = 376 µs + (8 (2 + n) + 24 + 3) · S µs",
        ],
        source: "Bluetooth Core Specification 5.x, Vol 6 Part B, 2.1, 2.2 and 4.1.1",
      },
      {
        title: "Steps of a flood",
        text: "Counted from 1, the source sends in step 1; $H$ is the hop bound, $N$ the transmissions per node. Both counts include the farthest node’s own relaying. Slack steps are added.",
        formulas: ["alternating relay: H + 2 N - 1", "back-to-back relay: H + N"],
        source: "Jacob et al., DATE 2018, for alternating relay",
      },
      {
        title: "Slot and fit",
        text: "A slot is wake-up, steps and gap. The round fits when the end of its last slot and the guard for the clocks’ drift lie within the period $T$.",
        formulas: [
          "step = airtime + turnaround",
          "slot = wake-up + steps · step + gap",
          "guard = 2 · ppm · 10^{-6} · T",
          "reserve = T - end of last slot - guard ≥ 0",
        ],
        source: null,
      },
      {
        title: "Encoding",
        text: "A signal on $b$ bits over [lo, hi). The operating point lies on the grid. The controller uses its command as encoded.",
        formulas: ["q = (hi - lo) / 2^b", "code = clamp(floor((v - lo) / q + 0.5), 0, 2^b - 1)", "value = lo + code · q"],
        source: null,
      },
    ],
  },
  {
    id: "delivery",
    title: "Delivery",
    methods: [
      {
        title: "Independent losses",
        text: "One uniform number $u$ is drawn for every message and round, also when the outcome is overridden. A message is delivered when u is at least its loss probability $p$, so that raising $p$ only adds losses.",
        formulas: ["delivered ⇔ u ≥ p"],
        source: "Bernoulli process",
      },
      {
        title: "Bursts of losses",
        text: "A channel is good or bad and has a loss probability in each. The state of round $k$ decides round $k$, then it moves; the run starts in the stationary distribution. $g$ is the probability from good to bad, $b$ from bad to good in each round.",
        formulas: ["share of bad rounds = g / (g + b)", "loss ratio = (b p_{good} + g p_{bad}) / (g + b)"],
        source: "Gilbert, Bell Syst. Tech. J. 39, 1960; Elliott, Bell Syst. Tech. J. 42, 1963",
      },
      {
        title: "A recording played back",
        text: "One packet of a reception log a round, as run lengths that the scenario carries itself, so that it stays the same when the log is gone.",
        source: null,
      },
      {
        title: "Random numbers",
        text: "Every stream is named by the scenario’s seed and its use, so that changing the noise leaves the losses as they were, and two designs with the same seed meet the same losses round by round.",
        source: "Generator Alea, Baagøe, 2010",
      },
      {
        title: "Normal variates",
        text: "Sensor noise and noise pushes, from two uniform numbers $u$ and $v$.",
        formulas: ["z = sqrt(-2 ln(1 - u)) cos(2 π v)"],
        source: "Box and Muller, Ann. Math. Stat. 29, 1958",
      },
    ],
  },
  ...NETWORK_METHODS,
  ...RECEPTION_METHODS,
  {
    id: "machine",
    title: "Machine",
    methods: [
      {
        title: "Pendulum on cart, overhead crane",
        text: "Cart $M$, rod $m$, pivot to mass centre $l$, inertia $I$ about it, viscous friction $b$ at the cart and $c$ at the pivot, Coulomb friction $F_c$ smoothed over the speed $v_s$. The angle $θ$ counts from upright; the crane rests at $θ = π$.",
        formulas: [
          "(M + m) x'' + m l cos(θ) θ'' - m l sin(θ) θ'^2 + b x' + F_c tanh(x' / v_s) = F",
          "(I + m l^2) θ'' + m l cos(θ) x'' - m g l sin(θ) + c θ' = 0",
        ],
        source: "Lagrange’s equations; in this form, with other signs, Åström and Murray, Feedback Systems, 2008, example 2.1",
      },
      {
        title: "Linear model",
        text: "Design and prediction use the machine linearised at its operating point, without Coulomb friction: its smoothed slope at rest would act as a huge damper.",
        formulas: ["x' = A x + B u", "y = C x + D u"],
        source: null,
      },
      {
        title: "Integration",
        text: "The nonlinear machine between events, with an embedded pair of orders 5 and 4 and an error scaled by absolute and relative tolerance. Steps are the largest one times a power of one half. No value that is not finite is ever kept: a run that diverges ends, and says when.",
        source: "Cash and Karp, ACM Trans. Math. Softw. 16(3), 1990",
      },
    ],
  },
  {
    id: "loop",
    title: "Loop",
    methods: [
      {
        title: "Exact discretisation",
        text: "Inputs are constant between instants; over one period $h$ the input changes at $τ$.",
        formulas: ["Φ = e^{A h}", "x(h) = Φ x + Γ_1 u_{before} + Γ_0 u_{after}"],
        source: "Åström and Wittenmark, Computer-Controlled Systems, 3rd ed., 1997, ch. 2",
      },
      {
        title: "Matrix exponential",
        text: "[13/13] Padé approximant with scaling and squaring.",
        source: "Higham, SIAM J. Matrix Anal. Appl. 26(4), 2005",
      },
      {
        title: "Estimate",
        text: "Also when the measurement is lost: $γ$ is 1 when it was delivered, else 0. With all states measured the estimate is the measurement itself when it arrives. $L$ is the stationary filter gain, or follows a covariance that shrinks only when a measurement arrives.",
        formulas: ["x_k = prior + γ_k L (y_k - C prior)", "L = P C' (C P C' + R)^{-1}"],
        source: "Kalman, J. Basic Eng. 82, 1960; time-varying: Sinopoli et al., IEEE Trans. Autom. Control 49(9), 2004",
      },
      {
        title: "Process noise over a period",
        text: "Covariance of white noise of intensity $Q$ gathered over $h$.",
        formulas: ["W = ∫_0^h e^{A s} Q e^{A' s} ds"],
        source: "Van Loan, IEEE Trans. Autom. Control 23(3), 1978",
      },
      {
        title: "State feedback by weights",
        text: "The gain that minimises the sum of $x' Q x + u' R u$ at sampling instants, with the latency predicted over; $X$ solves the discrete Riccati equation by structure-preserving doubling.",
        formulas: ["K = (R + B' X B)^{-1} B' X A", "X = A' X A - A' X B (R + B' X B)^{-1} B' X A + Q"],
        source: "Åström and Wittenmark, 1997, ch. 11; doubling: Chu, Fan, Lin and Wang, Int. J. Control 77(8), 2004",
      },
      {
        title: "Command",
        text: "On the state predicted to the instant of acting, with references known ahead; then limits, rate and encoding. The integrator stands still while the command is limited and the step would push it further.",
        formulas: ["v = u_{ff} - K (x - x_{ref}) - K_I q", "u = encode(rate(sat(v)))", "q_{k+1} = q_k + T (C_I x_k - r_k)"],
        source: null,
      },
      {
        title: "PID",
        text: "On one measured signal, with the last value received; integral and derivative advance every round.",
        formulas: ["e = r - y", "u = K_p e + I + D", "I_{k+1} = I_k + K_i T e_k", "D_k = (T_f D_{k-1} - K_d (y_k - y_{k-1})) / (T_f + T)"],
        source: "Åström and Wittenmark, 1997, ch. 8",
      },
      {
        title: "Actuator",
        text: "A command that arrives acts at its instant, the same in every round. A lost one: the value in force is held, the operating point’s input is taken, or the next entry of the last plan. After too many in a row the drive ramps to zero, brakes or powers off. Then come the drive’s own dead time, saturation, rate limit and lag.",
        source: null,
      },
    ],
  },
  {
    id: "figures",
    title: "Figures and verdicts",
    methods: [
      {
        title: "Grid",
        text: "Figures and limits are taken on 10 points a round and on every event. RMS and integral squared error use the grid alone.",
        formulas: ["RMS = sqrt(mean of s^2)", "ISE = mean of (s - r)^2 · duration"],
        source: null,
      },
      {
        title: "Use of a limit",
        text: "Decisive figure over permitted figure: above 1 the limit is crossed, above 0.9 it is near. A limit around a centre is measured from that centre. A run that diverges crosses every limit.",
        source: null,
      },
      {
        title: "Cost",
        text: "The same sum that the weights minimise, as its mean over the rounds at sampling instants.",
        formulas: ["J = mean of x' Q x + u' R u"],
        source: null,
      },
      {
        title: "The same run everywhere",
        text: "The same revision, seed and engine give the same run bit for bit in every browser, worker and server: the engine uses only arithmetic that is exact everywhere, and brings its own elementary functions. The digest of a run is a SHA-256 over its series and rounds, from which figures, events and verdicts follow.",
        source: "IEEE Std 754-2019; FIPS PUB 180-4",
      },
    ],
  },
];
