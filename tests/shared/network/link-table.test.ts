import { describe, expect, it } from "vitest";
import { NOT_RECEIVED } from "#shared/network/flood.ts";
import { FloodProcess } from "#shared/network/floods.ts";
import { type LinkRow, meanLinks, ricianWeights } from "#shared/network/link-table.ts";
import { receptionRatio } from "#shared/network/reception.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { at, type FloorInput, floorOf, scenarioOn, timingOf, within } from "./floors.ts";

const links = { type: "budget" as const, pathLoss: { type: "log-distance" as const, exponent: 3, lossAt1mDb: 40 }, noiseFigureDb: 6 };
const of = (rows: LinkRow[], from: number, to: number): LinkRow => {
  const row = rows.find((one) => one.from === from && one.to === to);
  if (!row) throw new Error(`no link ${from} to ${to}`);
  return row;
};
const db = (ratio: number) => 10 * Math.log10(ratio);

describe("the table of links", () => {
  it("says how far, through what and how strong every ordered pair is", () => {
    const walls = [30, 60].map((xM) => ({ type: "wall" as const, fromXM: xM, fromYM: 0, toXM: xM, toYM: 40, lossDb: 4 }));
    const scenario = scenarioOn({ floor: floorOf(at([0, 10], [100, 10], [100, 80]), { links, obstacles: walls }), radio: { txPowerDbm: 4 } });
    const rows = meanLinks(scenario, 0, 20);
    expect(rows.map(({ from, to }) => `${from}-${to}`)).toEqual(["1-2", "1-3", "2-1", "2-3", "3-1", "3-2"]);
    const row = of(rows, 1, 2);
    expect(row).toMatchObject({ distanceM: 100, obstacles: 2 });
    const { budget } = row;
    expect(budget?.pathLossDb).toBeCloseTo(100, 9);
    expect(budget?.obstaclesDb).toBe(8);
    expect(budget?.signalDbm).toBeCloseTo(4 - 108, 9);
    expect(budget?.snrDb).toBeCloseTo(-104 + 104.989700043, 8);
    expect(budget?.sinrDb).toBeCloseTo(budget?.snrDb ?? 0, 12);
    // 4 bytes of header, 20 of payload, 2 of FCS at 0.99 dB.
    expect(row.prr).toBeCloseTo(receptionRatio("ieee802154", scenario.radio.reception, 24, 10 ** 0.0989700043), 4);
    expect(of(rows, 1, 3).obstacles).toBe(1);
  });

  it("follows moving nodes", () => {
    const floor = floorOf([{ id: 1, xM: 0, yM: 0, wayPoints: [{ atS: 10, xM: 100, yM: 0 }] }, ...(at([0, 0], [0, 50], [100, 50]) ?? []).slice(1)], {
      links,
    });
    const scenario = scenarioOn({ floor });
    expect(of(meanLinks(scenario, 0, 20), 1, 2).distanceM).toBe(50);
    expect(of(meanLinks(scenario, 10, 20), 1, 3).distanceM).toBe(50);
  });

  it("gives measured ratios as they are, and is empty without a floor", () => {
    const prr = [
      [0, 0.9, 0.5],
      [0.8, 0, 1],
      [0.4, 1, 0],
    ];
    const scenario = scenarioOn({ floor: floorOf(at([0, 0], [3, 4], [0, 9]), { links: { type: "matrix", prr } }) });
    expect(of(meanLinks(scenario, 0, 20), 1, 2)).toEqual({ from: 1, to: 2, distanceM: 5, obstacles: 0, budget: null, prr: 0.9 });
    expect(of(meanLinks(scenario, 0, 20), 2, 1).prr).toBe(0.8);
    expect(meanLinks({ ...scenario, floor: null }, 0, 20)).toEqual([]);
  });

  it("adds interferers with their mean power over time and channels to the noise", () => {
    const interferer = {
      xM: 0,
      yM: 20,
      powerDbm: 0,
      centreMHz: 2480,
      bandwidthMHz: 20,
      activity: { type: "periodic" as const, onS: 0.004, offS: 0.016 },
    };
    const floor = floorOf(at([0, 0], [0, 10], [20, 0]), { links, interferers: [interferer] });
    const scenario = scenarioOn({ floor, radio: { channels: { list: [26, 11], hopping: "per-slot" }, turnaroundS: 0.000192 } });
    const row = of(meanLinks(scenario, 0, 20), 1, 2);
    // -70 dBm at node 2, a tenth of it in channel 26; (4 ms + step of 1.216 ms) of 20 ms; half of the slots on channel 26.
    const step = 0.001024 + 0.000192;
    const noise = 10 ** -10.4989700043 + 0.5 * ((0.004 + step) / 0.02) * 10 ** -8;
    expect(row.budget?.sinrDb).toBeCloseTo(-70 - db(noise), 8);
    const later = { ...interferer, fromS: 5, untilS: 6 };
    const timed = scenarioOn({ floor: floorOf(at([0, 0], [0, 10], [20, 0]), { links, interferers: [later] }) });
    expect(of(meanLinks(timed, 4, 20), 1, 2).budget?.sinrDb).toBe(of(meanLinks(timed, 4, 20), 1, 2).budget?.snrDb);
    expect(of(meanLinks(timed, 5, 20), 1, 2).budget?.sinrDb).toBeLessThan(of(meanLinks(timed, 4, 20), 1, 2).budget?.sinrDb ?? 0);
  });

  // SciPy 1.17, ncx2.cdf(2 (1 + K) 10^(x/10), 2, 2 K): probability of a gain below x dB.
  it.each([
    [-30, { "-30": 0.00099949966770755, "-10": 0.0951625390158177, "-3": 0.3941888929408539, "2": 0.7950302821356626 }],
    [0, { "-30": 0.0007357586372533648, "-10": 0.07334638735963499, "-3": 0.34647811872344497, "2": 0.796325326023 }],
    [8, { "-30": 1.3553686974852373e-5, "-10": 0.004873688255989097, "-3": 0.15641123442666466, "2": 0.8727613664440851 }],
  ])("averages over fading of K = %d dB with Rice's probabilities and moments", (kDb, below) => {
    const weights = ricianWeights(kDb);
    const levels = Array.from(weights, (_, i) => -70 + i / 8);
    for (const [level, p] of Object.entries(below)) {
      // Half of the level itself lies below it.
      const sum = levels.reduce((total, x, i) => total + (weights[i] ?? 0) * (x < Number(level) ? 1 : x === Number(level) ? 0.5 : 0), 0);
      expect(Math.abs(sum / p - 1)).toBeLessThan(2e-3);
    }
    const k = 10 ** (kDb / 10);
    const moment = (of: (g: number) => number) => levels.reduce((total, x, i) => total + (weights[i] ?? 0) * of(10 ** (x / 10)), 0);
    expect(Math.abs(moment((g) => g) - 1)).toBeLessThan(1e-5);
    expect(Math.abs(moment((g) => (g - 1) ** 2) / ((1 + 2 * k) / (1 + k) ** 2) - 1)).toBeLessThan(1e-4);
  });
});

describe("the table's reception ratio", () => {
  /** Share of the floods of one hop and one transmission that arrive. */
  function measured(scenario: Scenario, floods: number): number {
    const process = new FloodProcess(scenario, timingOf(scenario), 1);
    const slot = timingOf(scenario).slots.findIndex(({ id }) => id === "main/measurement");
    let arrived = 0;
    for (let i = 0; i < floods; i++) {
      process.next();
      if (process.firstStep[slot * process.nodes.length + 1] !== NOT_RECEIVED) arrived++;
    }
    return arrived / floods;
  }
  const interferer = {
    xM: 0,
    yM: 120,
    powerDbm: 10,
    centreMHz: 2478,
    bandwidthMHz: 20,
    activity: { type: "random" as const, onShare: 0.3, meanOnS: 0.003 },
  };
  const faded = { ...links, fading: { kDb: 2, coherence: { type: "time" as const, coherenceS: 0.0005 } } };
  const weak = at([0, 0], [0, 145], [190, 190]);
  const cases: [string, FloorInput, Parameters<typeof scenarioOn>[0]["radio"]][] = [
    ["over noise alone", floorOf(weak, { links }), {}],
    ["with an interferer that comes and goes", floorOf(at([0, 0], [0, 60], [190, 190]), { links, interferers: [interferer] }), {}],
    [
      "with hopping out of the interferer's band",
      floorOf(at([0, 0], [0, 60], [190, 190]), { links, interferers: [interferer] }),
      { channels: { list: [11, 26], hopping: "per-step" } },
    ],
    ["with fading", floorOf(at([0, 0], [0, 70], [190, 190]), { links: faded }), {}],
    ["with fading and interferer", floorOf(at([0, 0], [0, 50], [190, 190]), { links: faded, interferers: [interferer] }), {}],
  ];

  it.each(cases)("is what single transmissions achieve in the wave: %s", (_, floor, radio) => {
    const scenario = scenarioOn({ floor, radio: { txPowerDbm: 0, ...radio }, round: { beacon: null, hops: 1, transmissions: 1, periodS: 0.1 } });
    const { payloadBytes = 0 } = timingOf(scenario).slots.find(({ id }) => id === "main/measurement") ?? {};
    const { prr } = of(meanLinks(scenario, 0, payloadBytes), 1, 2);
    expect(prr).toBeGreaterThan(0.1);
    expect(prr).toBeLessThan(0.995);
    const floods = 20_000;
    expect(Math.abs(measured(scenario, floods) - prr)).toBeLessThan(within(prr, floods));
  });
});
