import { describe, expect, it } from "vitest";
import type { Scenario } from "#shared/scenario/schema.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import { explicitScenario } from "#shared/simulation/explicit.ts";
import { prepareRun } from "#shared/simulation/simulate.ts";
import { column, ran, template } from "../helpers/scenarios.ts";

/** The template at rounds of 60 ms / every, sampling in every so-manieth round, with 40 ms from sampling to acting. */
function slowed(everyRounds: number, firstRound: number, change?: (scenario: Scenario) => void): Scenario {
  const scenario = template(0);
  const [loop] = scenario.loops;
  scenario.radio.phy = "le-2m";
  scenario.run.durationS = 6;
  // Smooth and without codes, between which an unstable machine is left to itself: two ways of stepping through it agree closely.
  loop.actuator.inputs = loop.actuator.inputs.map((input) => ({ ...input, encoding: null }));
  if (loop.plant.type === "pendulum-on-cart") loop.plant.coulombFrictionN = 0;
  scenario.run.relativeTolerance = 1e-12;
  scenario.run.absoluteTolerance = 1e-13;
  scenario.round.periodS = 0.06 / everyRounds;
  loop.timing = { ...loop.timing, everyRounds, firstRound, sampleAtS: 0, actAfterSampleS: 0.0125 };
  loop.sensor.signals = loop.sensor.signals.map((signal) => ({ ...signal, noiseStd: 0, encoding: null }));
  scenario.losses = { process: { type: "none" }, streams: "own", outages: [] };
  change?.(scenario);
  return scenario;
}

describe("a loop that runs every n-th round", () => {
  it("moves the machine as a loop in rounds n times as long does, with the same losses", () => {
    const lost = [3, 4, 11, 12, 13, 30];
    const bits = (every: number, first: number) => {
      const sequence = new Array<0 | 1>(100 * every).fill(1);
      for (const k of lost) sequence[first + k * every] = 0;
      return sequence;
    };
    const given = (every: number, first: number) => (scenario: Scenario) => {
      scenario.losses.process = { type: "given", measurement: bits(every, first), command: bits(every, first), then: "error" };
    };
    const slow = ran(slowed(1, 0, given(1, 0)));
    const nth = ran(slowed(3, 0, given(3, 0)));
    expect(nth.rounds.count).toBe(slow.rounds.count);
    expect(nth.rounds.periodS).toBe(slow.rounds.periodS);
    expect(Array.from(nth.rounds.commandDelivered)).toEqual(Array.from(slow.rounds.commandDelivered));
    expect(nth.figures.messages).toEqual(slow.figures.messages);
    expect(slow.figures.messages[0].lost).toBe(lost.length);
    const [a, b] = [column(slow, "angle"), column(nth, "angle")];
    const scale = Math.max(...a.map(Math.abs));
    expect(scale).toBeGreaterThan(0.01);
    // Every grid point of the slow rounds is every third of the fast ones; between steps of up to T/2 the grid is interpolated.
    for (let i = 0; i < a.length; i++) expect(Math.abs(b[3 * i] - a[i])).toBeLessThan(1e-6 * scale);
  });

  it("starts in its first round: until then nothing is measured and nothing acts", () => {
    const result = ran(
      slowed(3, 2, (s) => {
        s.loops[0].start.state = [0, 0.01, 0, 0];
      }),
    );
    expect(result.rounds.sampleAtS).toBeCloseTo(0.04, 12);
    const { t } = result.series;
    const force = column(result, "force");
    const firstMove = t.findIndex((_, i) => force[i] !== 0);
    expect(t[firstMove - 1]).toBeLessThan(0.04 + 0.0125);
    expect(t[firstMove]).toBeGreaterThanOrEqual(0.04 + 0.0125);
  });

  it("lets commands travel in the round after, in a slot of that round", () => {
    const scenario = slowed(3, 2, (s) => {
      s.loops[0].timing.commandTravels = "next-round";
      s.loops[0].timing.actAfterSampleS = null;
    });
    const result = ran(scenario);
    expect(result.rounds.latencyS).toBeCloseTo(0.04, 12);
    expect(result.rounds.commandDelay).toBe(0);
    const lossy = structuredClone(scenario);
    const command = new Array<0 | 1>(300).fill(1);
    // The command computed in round 5 travels in round 6.
    command[6] = 0;
    lossy.losses.process = { type: "given", measurement: new Array<0 | 1>(300).fill(1), command, then: "delivered" };
    expect(Array.from(ran(lossy).rounds.commandDelivered).indexOf(0)).toBe(1);
  });

  it("comes out the same when its losses and noise are written out", () => {
    for (const [every, first, travels] of [
      [3, 1, "same-round"],
      [2, 1, "next-round"],
    ] as const) {
      const scenario = slowed(every, first, (s) => {
        s.losses.process = { type: "bernoulli", measurement: 0.2, command: 0.2 };
        s.loops[0].sensor.signals[0].noiseStd = 0.001;
        s.loops[0].timing.commandTravels = travels;
        s.loops[0].timing.actAfterSampleS = null;
      });
      const result = ran(scenario, 5);
      expect(digestRun(ran(explicitScenario(scenario, result), 5)), travels).toBe(digestRun(result));
    }
  });

  it("counts commands towards silence from the time on at which its network joins, by the network's rounds", () => {
    const result = ran(
      slowed(3, 0, (s) => {
        s.pushes = [];
        s.losses.process = { type: "bernoulli", measurement: 0, command: 1 };
        s.loops[0].start.networkJoinsAtS = 0.5;
        s.loops[0].actuator.silence = { afterLost: 3, reaction: "power-off", rampS: 0.2, brakeN: 0, resumeAfter: null };
      }),
    );
    // Commands travel each 60 ms; those of 0.54, 0.60 and 0.66 s count, and act 12.5 ms later.
    expect(result.events.find(({ kind }) => kind === "silence")?.atS).toBeCloseTo(0.6725, 9);
  });

  it("refuses a first round that does not come", () => {
    const refused = prepareRun(slowed(3, 3));
    expect(refused.ok ? [] : refused.issues.map(({ path }) => path)).toEqual(["loops[0].timing.firstRound"]);
  });
});
