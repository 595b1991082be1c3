/** Claims that the trade makes for flooding. Common practice, no source: each is held to the product's own simulation. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { roundTiming } from "#shared/network/round.ts";
import { type FloodSurvey, surveyFloods } from "#shared/network/survey.ts";
import type { Scenario, ScenarioInput } from "#shared/scenario/schema.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import { flooded, line } from "../helpers/floors.ts";
import { column, ran } from "../helpers/scenarios.ts";

/** A loop whose input changes with every command that acts. */
const moving = (input: ScenarioInput): void => {
  input.run = { durationS: 3, seed: 4 };
  input.round = { periodS: 0.05, hops: 3, transmissions: 2 };
  input.loops[0].plant = { type: "state-space", a: [[0.4]], b: [[1]] };
  input.loops[0].sensor.signals = [{ signal: "x1", noiseStd: 0.01 }];
  input.loops[0].controller.law = { type: "gain", gain: [[1.2]] };
};

const floorWith = (prr: number[][]): Scenario =>
  flooded((input) => {
    moving(input);
    const nodes = prr.map((_, i) => ({ id: i + 1, xM: i, yM: 1 }));
    input.floor = { widthM: 50, depthM: 10, nodes, links: { type: "matrix", prr } };
    input.loops[0].nodes = { sensor: 1, controller: prr.length, actuator: 2 };
  });

const topology = fc
  .integer({ min: 3, max: 9 })
  .chain((n) => fc.array(fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: n, maxLength: n }), { minLength: n, maxLength: n }));

describe("common practice, no source: for a fixed hop bound, latency is the same constant whatever the topology", () => {
  it("in the round", () => {
    const wanted = roundTiming(
      floorWith([
        [0, 1, 1],
        [1, 0, 1],
        [1, 1, 0],
      ]),
    );
    fc.assert(
      fc.property(topology, (prr) => {
        expect(roundTiming(floorWith(prr))).toEqual({
          ...wanted,
          slots: wanted.slots.map((slot) => ({ ...slot, ...ends(slot.message, prr.length) })),
        });
      }),
      { numRuns: 40, seed: 3 },
    );
  });

  it("in a run: no command acts at any other instant than sampling plus latency, on any floor, however much is lost", () => {
    let acted = 0;
    fc.assert(
      fc.property(topology, (prr) => {
        const result = ran(floorWith(prr));
        const { sampleAtS, latencyS, periodS } = result.rounds;
        expect(latencyS).toBe(0.05);
        const input = column(result, "u1");
        const t = result.series.t;
        for (let i = 1; i < t.length; i++) {
          if (input[i] === input[i - 1]) continue;
          const rounds = (t[i] - sampleAtS - latencyS) / periodS;
          expect(Math.abs(rounds - Math.round(rounds))).toBeLessThan(1e-6);
          acted++;
        }
      }),
      { numRuns: 15, seed: 5 },
    );
    expect(acted).toBeGreaterThan(200);
  });
});

/** Who speaks and who needs what depends on the number of nodes here, not the timing. */
const ends = (message: string, n: number) => (message === "beacon" ? { from: n } : message === "measurement" ? { to: [n] } : { from: n });

describe("common practice, no source: a moved node changes nothing while it stays covered", () => {
  const walk = (wayPoints: { atS: number; xM: number; yM: number }[]): Scenario =>
    flooded((input) => {
      moving(input);
      input.radio = { phy: "le-2m" };
      const places = [
        [10, 10],
        [30, 12],
        [50, 10],
        [35, 25],
      ] as const;
      const nodes = places.map(([xM, yM], i) => ({ id: i + 1, xM, yM, wayPoints: i === 1 ? wayPoints : [] }));
      input.floor = { widthM: 200, depthM: 200, nodes, links: { type: "budget", pathLoss: { type: "log-distance", exponent: 3 } } };
      input.loops[0].nodes = { sensor: 1, controller: 3, actuator: 2 };
    });

  it("the run is the same, bit for bit, with the actuator's node driving about", () => {
    const still = ran(walk([]));
    const driven = ran(
      walk([
        { atS: 1, xM: 20, yM: 30 },
        { atS: 2, xM: 45, yM: 20 },
      ]),
    );
    expect(still.figures.messages.every(({ lost }) => lost === 0)).toBe(true);
    expect(digestRun(driven)).toBe(digestRun(still));
  });

  it("and it is another run when the node leaves the covered ground", () => {
    const away = ran(walk([{ atS: 1, xM: 199, yM: 199 }]));
    expect(away.figures.messages.some(({ lost }) => lost > 0)).toBe(true);
  });
});

describe("common practice, no source: an interferer hurts near itself only", () => {
  const street = (interferer: boolean): FloodSurvey =>
    surveyFloods(
      flooded((input) => {
        input.radio = { phy: "ieee802154", txPowerDbm: -10 };
        input.round = { periodS: 0.05, hops: 2, transmissions: 2 };
        const nodes = [50, 30, 70, 20, 80].map((xM, i) => ({ id: i + 1, xM, yM: 20 }));
        const dryer = { name: "Dryer", xM: 18, yM: 22, powerDbm: -12, centreMHz: 2480, bandwidthMHz: 4 };
        input.floor = {
          ...{ widthM: 100, depthM: 40, nodes, interferers: interferer ? [dryer] : [] },
          links: { type: "budget", pathLoss: { type: "log-distance", exponent: 3.5 }, shadowing: { sigmaDb: 2, seed: 2 } },
        };
        input.loops[0].nodes = { sensor: 1, controller: 5, actuator: 4 };
      }),
      { rounds: 400, seed: 1, withoutAdvice: true },
    );

  it("the node beside it loses floods, the node at the other end receives the very same ones in the same steps", () => {
    const [without, with_] = [street(false), street(true)];
    const of = (survey: FloodSurvey, node: number) =>
      survey.slots.find(({ id }) => id === "main/measurement")?.nodes.find((entry) => entry.node === node);
    expect(of(without, 4)?.ratio).toBeGreaterThan(0.99);
    expect(of(with_, 4)?.ratio).toBeLessThan(0.5);
    expect(of(with_, 5)).toEqual(of(without, 5));
    expect(of(with_, 3)).toEqual(of(without, 3));
  });
});

describe("common practice, no source: more transmissions buy reliability with time and energy", () => {
  const floods = (transmissions: number) => {
    const scenario = line(4, 0.6, (input) => {
      input.round = { periodS: 0.1, hops: 3, transmissions };
    });
    const survey = surveyFloods(scenario, { rounds: 2000, seed: 1, withoutAdvice: true });
    const slots = roundTiming(scenario).slots;
    return {
      delivered: survey.loops[0].both.ratio,
      slotS: slots[1].endS - slots[1].startS,
      chargeC: survey.nodes.reduce((sum, { chargeC }) => sum + chargeC, 0),
    };
  };

  it("each further transmission per node delivers more, and takes a longer slot and more charge", () => {
    const rows = [1, 2, 3, 4].map(floods);
    for (let i = 1; i < rows.length; i++) {
      expect(rows[i].delivered).toBeGreaterThan(rows[i - 1].delivered);
      expect(rows[i].slotS).toBeGreaterThan(rows[i - 1].slotS);
      expect(rows[i].chargeC).toBeGreaterThan(rows[i - 1].chargeC);
    }
  });
});
