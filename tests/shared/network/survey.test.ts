/** Many floods, counted: against closed forms and by their own rules. */
import { describe, expect, it } from "vitest";
import { roundTiming } from "#shared/network/round.ts";
import { Survey, surveyFloods } from "#shared/network/survey.ts";
import { FloodTally, spreadOf } from "#shared/network/tally.ts";
import type { ScenarioInput } from "#shared/scenario/schema.ts";
import { flooded, hall, line } from "../../helpers/floors.ts";

const counted = (rounds: number, seed = 1) => ({ rounds, seed, withoutAdvice: true });

describe("a survey", () => {
  it("is the same for the same seed, however it is cut into chunks, and another for another seed", () => {
    const whole = surveyFloods(hall(), counted(300));
    const pieces = new Survey(hall(), counted(300));
    for (let chunk = 1; !pieces.finished; chunk += 3) pieces.advance(chunk);
    expect(pieces.result()).toEqual(whole);
    expect(surveyFloods(hall(), counted(300, 2))).not.toEqual(whole);
  });

  it("finds on a lossless line every node in the step that is its distance", () => {
    const { slots } = surveyFloods(line(5, 1), counted(100));
    const [beacon] = slots;
    expect(beacon.from).toBe(5);
    expect(beacon.nodes.map(({ node, medianStep, ratio }) => [node, medianStep, ratio])).toEqual([
      [1, 4, 1],
      [2, 3, 1],
      [3, 2, 1],
      [4, 1, 1],
    ]);
    expect(beacon.reachedShare.slice(0, 5)).toEqual([0.4, 0.6, 0.8, 1, 1]);
    expect(beacon.nodes[0].hops.slice(0, 5)).toEqual([0, 0, 0, 100, 0]);
  });

  // Each hop is one geometric try of N, and the slot is long enough: (1 - (1 - q)^N)^H (checks.md 3.2).
  it("has the closed form of a line within its interval", () => {
    const q = 0.7;
    const scenario = line(4, q, (input) => {
      input.round = { periodS: 0.05, hops: 3, transmissions: 2, slackSteps: 12, relay: "alternating" };
    });
    const rounds = 4000;
    const survey = surveyFloods(scenario, counted(rounds));
    const wanted = (hops: number) => (1 - (1 - q) ** 2) ** hops;
    const measurement = survey.slots.find(({ id }) => id === "main/measurement");
    for (const { node, ratio } of measurement?.nodes ?? []) {
      const p = wanted(node - 1);
      expect(Math.abs(ratio - p), `node ${node}`).toBeLessThan(4 * Math.sqrt((p * (1 - p)) / rounds));
    }
    expect(measurement?.delivered.ratio).toBe(measurement?.nodes.find(({ node }) => node === 4)?.ratio);
  });

  it("draws the receivers of one flood together: behind one bad link they lose together", () => {
    // 1 - 2 is bad; 3, 4 and 5 hang on 2 by perfect links.
    const scenario = flooded((input) => {
      const q = 0.5;
      const prr = [
        [0, q, 0, 0, 0],
        [q, 0, 1, 1, 1],
        [0, 1, 0, 0, 0],
        [0, 1, 0, 0, 0],
        [0, 1, 0, 0, 0],
      ];
      const nodes = prr.map((_, i) => ({ id: i + 1, xM: 5 * i, yM: 1 }));
      input.floor = { widthM: 50, depthM: 10, nodes, links: { type: "matrix", prr }, beaconNode: 2 };
      input.loops[0].nodes = { sensor: 1, controller: 2, actuator: 2 };
      input.round.messages = [{ id: "news", name: "News", from: 1, to: [3, 4, 5], payloadBytes: 4 }];
    });
    const news = surveyFloods(scenario, counted(1000)).slots.find(({ id }) => id === "other/news");
    const [three] = news?.nodes.filter(({ node }) => node === 3) ?? [];
    expect(three.ratio).toBeGreaterThan(0.6);
    expect(three.ratio).toBeLessThan(0.9);
    expect(news?.delivered.ratio).toBe(three.ratio);
    expect(news?.deliveredIfIndependent).toBeCloseTo(three.ratio ** 3, 12);
  });

  it("counts both messages of a loop, together and apart", () => {
    const { loops } = surveyFloods(line(3, 0.6), counted(2000));
    const [{ samplings, measurement, command, both, lostTogether }] = loops;
    expect(samplings).toBe(2000);
    const lost = [2000 - (measurement?.count ?? 0), 2000 - (command?.count ?? 0)];
    expect(both.count).toBe(2000 - lost[0] - lost[1] + (lostTogether?.count ?? 0));
    expect(lostTogether?.ifIndependent).toBeCloseTo((lost[0] * lost[1]) / 2000, 9);
  });

  it("counts a message with two slots as delivered when one of them was", () => {
    const single = surveyFloods(line(3, 0.6), counted(2000)).loops[0].measurement?.ratio ?? 0;
    const twice = surveyFloods(
      line(3, 0.6, ({ loops }) => {
        loops[0].sensor.copies = 2;
      }),
      counted(2000),
    );
    expect(twice.slots.map(({ id }) => id)).toContain("main/measurement/2");
    const wanted = 1 - (1 - single) ** 2;
    expect(Math.abs((twice.loops[0].measurement?.ratio ?? 0) - wanted)).toBeLessThan(0.03);
  });

  it("pairs a command that travels a round later with its own measurement", () => {
    const { loops } = surveyFloods(
      line(3, 0.6, (input) => {
        input.loops[0].timing = { commandTravels: "next-round" };
      }),
      counted(500),
    );
    // The last sampling's command would have travelled in round 500.
    expect(loops[0].samplings).toBe(499);
  });

  it("needs no measurement where the controller sits with the sensor", () => {
    const { loops } = surveyFloods(
      line(3, 0.6, ({ loops: [loop] }) => {
        loop.controller.placement = "sensor";
      }),
      counted(200),
    );
    expect(loops[0].measurement).toBeNull();
    expect(loops[0].lostTogether).toBeNull();
    expect(loops[0].both).toEqual(loops[0].command);
  });

  it("leaves scripted outages out and names their nodes", () => {
    const out = (input: ScenarioInput) => {
      if (input.floor?.nodes) input.floor.nodes[1].outages = [{ fromS: 0 }];
    };
    const survey = surveyFloods(line(3, 1, out), counted(100));
    expect(survey.outagesLeftOut).toEqual([2]);
    expect(survey.loops[0].both.ratio).toBe(1);
  });

  it("counts what a missed beacon takes away, where it is needed", () => {
    const needed = (yes: boolean) =>
      surveyFloods(
        line(2, 0.5, (input) => {
          input.round = { periodS: 0.05, hops: 1, transmissions: 1, beacon: { payloadBytes: 4, needed: yes } };
        }),
        counted(4000),
      );
    const free = needed(false).loops[0].measurement?.ratio ?? 0;
    const bound = needed(true);
    expect(free).toBeGreaterThan(0.47);
    expect(free).toBeLessThan(0.53);
    expect(bound.loops[0].measurement?.ratio).toBeGreaterThan(0.22);
    expect(bound.loops[0].measurement?.ratio).toBeLessThan(0.28);
    expect(bound.nodes[0].beaconRatio).toBeCloseTo(0.5, 1);
    // The sensor needs the beacon to send at all: both arrive in 1/8, both are lost in 5/8, not 9/16 of the rounds.
    const together = bound.loops[0].lostTogether;
    expect((together?.count ?? 0) / 4000).toBeCloseTo(0.625, 1);
    expect(together?.count).toBeGreaterThan(1.05 * (together?.ifIndependent ?? 0));
  });

  it("goes through the time of the whole run where something moves", () => {
    // Node 2 joins 1 and 3 for the second half of the run only.
    const scenario = flooded((input) => {
      const at = (id: number, xM: number, rest = {}) => ({ id, xM, yM: 5, ...rest });
      input.radio = { phy: "le-1m" };
      input.floor = {
        widthM: 200,
        depthM: 150,
        nodes: [
          at(1, 0),
          at(2, 40, {
            yM: 150,
            wayPoints: [
              { atS: 2.5, xM: 40, yM: 150 },
              { atS: 2.501, xM: 40, yM: 5 },
            ],
          }),
          at(3, 80),
        ],
        links: { type: "budget", pathLoss: { type: "log-distance", exponent: 3.2 } },
      };
      input.loops[0].nodes = { sensor: 1, controller: 3, actuator: 1 };
    });
    for (const rounds of [200, 1000]) {
      const { ratio } = surveyFloods(scenario, counted(rounds)).loops[0].both;
      expect(ratio, `${rounds} rounds`).toBeGreaterThan(0.4);
      expect(ratio, `${rounds} rounds`).toBeLessThan(0.6);
    }
  });

  it("spends radio time per round as the drawn floods do", () => {
    const scenario = line(4, 0.8);
    const { nodes } = surveyFloods(scenario, counted(300));
    const tally = new FloodTally(scenario, roundTiming(scenario), { rounds: 300, seed: 1 });
    tally.advance(300);
    nodes.forEach(({ sendS, listenS }, i) => {
      expect(sendS).toBeCloseTo(tally.txNs[i] / 300e9, 12);
      expect(listenS).toBeCloseTo(tally.rxNs[i] / 300e9, 12);
    });
  });
});

describe("the spread between batches", () => {
  const slot = (batchDelivered: number[]) => ({
    floods: 20 * 50,
    delivered: batchDelivered.reduce((sum, count) => sum + count, 0),
    batchFloods: new Uint32Array(20).fill(50),
    batchDelivered: Uint32Array.from(batchDelivered),
    needed: [],
    source: 0,
    steps: 1,
    firstStep: new Uint32Array(2),
  });
  it("is far above 1 when floods come in good and bad spells", () => {
    expect(spreadOf(slot(Array.from({ length: 20 }, (_, i) => (i < 10 ? 50 : 10))))).toBeGreaterThan(10);
  });
  it("is 1 by definition when nothing or everything arrives", () => {
    expect(spreadOf(slot(new Array(20).fill(50)))).toBe(1);
  });
});
