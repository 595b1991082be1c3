/** Airtime and step counts against the standards and published figures (checks.md 1 to 3). */
import { describe, expect, it } from "vitest";
import { phyTiming } from "#shared/network/phy.ts";
import { roundTiming } from "#shared/network/round.ts";
import { floodSteps } from "#shared/network/schedule.ts";
import { type Phy, type ScenarioInput, scenarioSchema } from "#shared/scenario/schema.ts";

const US = 1000;
const airtimesUs = (phy: Phy, bytes: number[]) => bytes.map((count) => phyTiming(phy).airtimeNs(count) / US);

describe("airtime", () => {
  // IEEE Std 802.15.4-2011, 8.1.2 and 10.3.4: 32 us an octet, 6 octets before a PSDU of which 2 are the FCS.
  it("of IEEE 802.15.4 at 2.4 GHz, from PSDUs of 5 to 127 octets", () => {
    const psdu = [5, 20, 30, 64, 127];
    expect(
      airtimesUs(
        "ieee802154",
        psdu.map((octets) => octets - 2),
      ),
    ).toEqual([352, 832, 1152, 2240, 4256]);
    expect(phyTiming("ieee802154").maxBytes + 2).toBe(127);
    // aTurnaroundTime, 12 symbols of 16 us
    expect(phyTiming("ieee802154").turnaroundNs).toBe(192 * US);
  });

  // Bluetooth Core Specification v5.x, Vol 6 Part B, 2.1, 2.2 and 4.1.1.
  it.each([
    ["le-1m", [80, 240, 376, 592, 2088, 2120]],
    ["le-2m", [44, 124, 192, 300, 1048, 1064]],
    ["le-coded-s8", [720, 2000, 3088, 4816, 16784, 17040]],
    ["le-coded-s2", [462, 782, 1054, 1486, 4478, 4542]],
  ] as const)("of %s, from payloads of 0 to 255 bytes", (phy, wanted) => {
    expect(airtimesUs(phy, [0, 20, 37, 64, 251, 255])).toEqual(wanted);
    expect(phyTiming(phy).maxBytes).toBe(255);
    // T_IFS
    expect(phyTiming(phy).turnaroundNs).toBe(150 * US);
  });
});

describe("steps of a flood", () => {
  // Jacob et al., "TTW: A Time-Triggered-Wireless Design for CPS", DATE 2018: T_flood = (H + 2N - 1) T_hop.
  it("with alternating relay are H + 2N - 1", () => {
    const pairs = [
      [1, 1],
      [2, 2],
      [3, 2],
      [4, 3],
      [6, 3],
      [5, 1],
    ];
    expect(pairs.map(([h, n]) => floodSteps("alternating", h, n))).toEqual([2, 5, 6, 9, 11, 6]);
  });

  /** Direct counting on a lossless line: node 0 is the source, each node hears its neighbours only. */
  function counted(relay: "alternating" | "back-to-back", h: number, n: number): number {
    const first: (number | null)[] = Array.from({ length: h + 1 }, (_, i) => (i === 0 ? 0 : null));
    const sends = (node: number, step: number) => {
      const since = first[node];
      if (since === null) return false;
      const nth = step - since - 1;
      return relay === "alternating" ? nth >= 0 && nth % 2 === 0 && nth / 2 < n : nth >= 0 && nth < n;
    };
    let last = 0;
    for (let step = 1; step < 100; step++) {
      const sending = first.map((_, node) => sends(node, step));
      if (sending.some((yes) => yes)) last = step;
      for (let node = 1; node <= h; node++) {
        if (first[node] === null && !sending[node] && (sending[node - 1] || sending[node + 1])) first[node] = step;
      }
    }
    return last;
  }

  it("are what counting on a lossless line gives, for both ways of relaying", () => {
    for (const relay of ["alternating", "back-to-back"] as const) {
      for (let h = 1; h <= 6; h++)
        for (let n = 1; n <= 4; n++) expect(floodSteps(relay, h, n), `${relay}, H ${h}, N ${n}`).toBe(counted(relay, h, n));
    }
  });

  it("are the same for both ways of relaying at N = 1", () => {
    for (let h = 1; h <= 8; h++) expect(floodSteps("back-to-back", h, 1)).toBe(floodSteps("alternating", h, 1));
  });

  // checks.md 3, flood.time: PSDU of 30 octets, turnaround 192 us.
  it("take the published time", () => {
    const step = phyTiming("ieee802154").airtimeNs(28) + 192 * US;
    const pairs = [
      [1, 1],
      [3, 2],
      [4, 3],
      [6, 3],
    ];
    expect(pairs.map(([h, n]) => (floodSteps("alternating", h, n) * step) / US)).toEqual([2688, 8064, 12096, 14784]);
  });
});

describe("a round", () => {
  /** Three messages of 20 bytes: five signals and five inputs that are not encoded. */
  const twenty = (phy: Phy, change: Partial<ScenarioInput["round"]> = {}, headerBytes = 0) => {
    const five = [1, 2, 3, 4, 5];
    const eye = five.map((i) => five.map((j) => (i === j ? -1 : 0)));
    return roundTiming(
      scenarioSchema.parse({
        format: "holdfast-scenario",
        version: 1,
        name: "Twenty bytes a message",
        run: { durationS: 1 },
        loops: [
          {
            name: "Five",
            plant: { type: "state-space", a: eye, b: eye },
            sensor: { signals: five.map((i) => ({ signal: `x${i}` })) },
            controller: { law: { type: "gain", gain: eye }, computeS: 0 },
            actuator: { inputs: five.map(() => ({ lo: -1, hi: 1 })) },
          },
        ],
        radio: { phy, headerBytes },
        round: { periodS: 0.02, hops: 3, transmissions: 2, wakeUpS: 0, gapS: 0, beacon: { payloadBytes: 20 }, ...change },
        losses: { process: { type: "none" } },
      } satisfies ScenarioInput),
    );
  };

  // model.md 1: three slots of 20 bytes, H = 3, N = 2.
  it("of three slots takes 19.6 ms on IEEE 802.15.4 and 4.9 ms on LE 2M, as in the model's example", () => {
    for (const [phy, ms] of [
      ["ieee802154", 3 * 6 * (0.896 + 0.192)],
      ["le-2m", 3 * 6 * (0.124 + 0.15)],
    ] as const) {
      const timing = twenty(phy);
      expect(timing.slots.map(({ payloadBytes }) => payloadBytes)).toEqual([20, 20, 20]);
      expect(timing.slots[2].endS * 1000).toBeCloseTo(ms, 9);
      expect(timing.fits).toBe(true);
    }
    expect(twenty("ieee802154").slots[2].endS).toBeCloseTo(0.0196, 4);
    expect(twenty("le-2m").slots[2].endS).toBeCloseTo(0.0049, 4);
  });

  it("needs 80 us of guard after 1 s at 40 ppm", () => {
    expect(twenty("le-2m", { periodS: 1 }).guardS).toBeCloseTo(80e-6, 9);
  });

  it("that does not fit says what would save how much, largest first", () => {
    const timing = twenty("ieee802154", { wakeUpS: 0.0002 });
    // 19.584 ms and three wake-ups
    expect(timing.fits).toBe(false);
    expect(timing.reserveS).toBeCloseTo(0.02 - 0.020184 - timing.guardS, 12);
    const saved = Object.fromEntries(timing.savings.map(({ change, savesS }) => [change, savesS * 1000]));
    expect(saved.transmissions).toBeCloseTo(3 * 2 * 1.088, 9);
    expect(saved.hops).toBeCloseTo(3 * 1.088, 9);
    expect(saved.bytes).toBeCloseTo(3 * 6 * 0.032, 9);
    expect(saved.phy).toBeCloseTo(3 * 6 * (1.088 - (0.24 + 0.15)), 9);
    const order = timing.savings.map(({ savesS }) => savesS);
    expect(order).toEqual([...order].sort((a, b) => b - a));
    expect(twenty("ieee802154", { wakeUpS: 0.0002, periodS: timing.shortestPeriodS }).fits).toBe(true);
    expect(twenty("ieee802154", { wakeUpS: 0.0002, periodS: timing.shortestPeriodS - 1e-9 }).fits).toBe(false);
  });

  it("names no period that is too short, also where it rounds what it names", () => {
    for (const wakeUpS of [0.0002, 0.000201, 0.000202, 0.000203, 0.000204]) {
      const message = twenty("ieee802154", { wakeUpS })
        .issues.map((issue) => issue.message)
        .join();
      const said = Number(/that fits is (\d+\.\d+) ms/.exec(message)?.[1]);
      expect(twenty("ieee802154", { wakeUpS, periodS: said / 1000 }).fits, message).toBe(true);
      expect(said).toBeCloseTo(20.18, 1);
    }
  });

  it("whose payload is too long for the PHY says by how many bytes", () => {
    const timing = twenty("ieee802154", { periodS: 1, beacon: { payloadBytes: 130 } }, 5);
    expect(timing.issues.map(({ code }) => code)).toContain("payload-too-long");
    expect(timing.issues[0].message).toMatch(/\b10 B more\b/);
  });
});
