import { describe, expect, it } from "vitest";
import { digestRun } from "#shared/simulation/digest.ts";
import { explicitScenario } from "#shared/simulation/explicit.ts";
import { prepareRun } from "#shared/simulation/simulate.ts";
import { column, ran, scalar, template } from "../helpers/scenarios.ts";

describe("a run", () => {
  it("is the same whether it is advanced at once or round by round", () => {
    const whole = ran(template(0));
    const prepared = prepareRun(template(0));
    if (!prepared.ok) throw new Error("does not run");
    let calls = 0;
    while (!prepared.run.advance(1)) calls++;
    expect(calls).toBeGreaterThan(300);
    expect(digestRun(prepared.run.result())).toBe(digestRun(whole));
  });

  it("differs in its digest for another seed", () => {
    expect(digestRun(ran(template(0), 1))).not.toBe(digestRun(ran(template(0), 2)));
  });

  it("comes out the same when its losses, noise and noise pushes are written out", () => {
    const scenario = template(0);
    scenario.pushes.push({ type: "noise", channel: "cart", fromS: 1, untilS: 3, std: 1, intervalS: 0.05 });
    const result = ran(scenario, 77);
    const explicit = explicitScenario(scenario, result);
    expect(digestRun(ran(JSON.parse(JSON.stringify(explicit)), 77))).toBe(digestRun(result));
    expect(explicit.losses.outages).toEqual([]);
  });

  it("comes out the same when a noise push ended within the time of one of its values", () => {
    const scenario = template(0);
    scenario.pushes.push({ type: "noise", channel: "cart", fromS: 1, untilS: 1.27, std: 3, intervalS: 0.1 });
    scenario.pushes.push({ type: "noise", channel: "pivot", fromS: 2, untilS: 2.03, std: 0.05, intervalS: 0.1 });
    const result = ran(scenario);
    expect(digestRun(ran(explicitScenario(scenario, result)))).toBe(digestRun(result));
  });

  it("ends as diverged when the estimate grows until it is no number any more", () => {
    const result = ran(
      scalar((s) => {
        s.run.durationS = 40;
        s.round.periodS = 1;
        s.loops[0].plant = {
          type: "state-space",
          a: [
            [0, 0],
            [0, 20],
          ],
          b: [[1], [0]],
        };
        // The plant stays at rest, the controller believes otherwise, and nothing tells it: e^(20 t) overflows before 36 s.
        s.loops[0].start = { state: [0, 0], estimate: [0, 1] };
        s.loops[0].sensor.signals = [{ signal: "x1" }, { signal: "x2" }];
        s.loops[0].controller.law = { type: "gain", gain: [[0, 1]] };
        s.losses.process = { type: "bernoulli", measurement: 1, command: 1 };
      }),
    );
    expect(result.ended).toBe("diverged");
    expect(result.endedAtS).toBe(36);
    expect(result.series.t.at(-1)).toBe(36);
    expect(result.rounds.count).toBe(36);
    for (const values of [result.rounds.estimate, result.rounds.command, ...result.series.values]) expect(values.every(Number.isFinite)).toBe(true);
  });

  it("keeps the last command of a controller with the actuator that acts before the round in which it would travel", () => {
    const result = ran(
      scalar((s) => {
        s.run.durationS = 3;
        s.loops[0].controller.placement = "actuator";
        s.loops[0].controller.law = { type: "gain", gain: [[2]] };
        s.loops[0].actuator.onLoss = { policy: "zero" };
        s.loops[0].timing = { commandTravels: "next-round", actAfterSampleS: 0.5 };
      }),
    );
    const u = column(result, "u1");
    expect(u[25]).toBe(result.rounds.command[2]);
    expect(u[25]).not.toBe(0);
  });

  it("that falls ends as such, without a value that cannot be plotted", () => {
    const scenario = template(0);
    scenario.loops[0].controller.law = { type: "gain", gain: [[0, 0, 0, 0]], integral: [] };
    scenario.loops[0].start.state = [0, 0.1, 0, 0];
    scenario.loops[0].plant = { ...scenario.loops[0].plant, halfTrackM: 0.05 } as never;
    const result = ran(scenario);
    expect(result.ended).toBe("track-end");
    expect(result.verdict).toBe("crosses");
    expect(result.endedAtS).toBeLessThan(scenario.run.durationS);
    const position = column(result, "position");
    // The end is found to a nanosecond: the last grid point is inside, the last event at the track's end.
    expect(Math.abs(position[position.length - 1])).toBeLessThan(0.05);
    expect(Math.max(result.figures.signals[0].max, -result.figures.signals[0].min)).toBeCloseTo(0.05, 6);
    for (const values of result.series.values) expect(values.every(Number.isFinite)).toBe(true);
  });

  it("that diverges ends with its time, crosses every limit and never hangs", () => {
    const scenario = scalar((s) => {
      s.loops[0].plant = { type: "state-space", a: [[40]], b: [[1]] };
      s.limits = [
        { type: "within", signal: "x1", lo: -5, hi: 5 },
        { type: "rms", signal: "x1", below: 3 },
        { type: "saturation", below: 0.5 },
      ];
    });
    const result = ran(scenario);
    expect(result.ended).toBe("diverged");
    // e^(40 t) passes 1e9 at 0.518 s.
    expect(result.endedAtS).toBeGreaterThan(0.4);
    expect(result.endedAtS).toBeLessThan(0.6);
    expect(result.limits.map(({ state }) => state)).toEqual(["crosses", "crosses", "crosses"]);
    for (const values of result.series.values) expect(values.every(Number.isFinite)).toBe(true);
  });

  it("shorter than a round still has its points", () => {
    const scenario = scalar((s) => {
      s.run.durationS = 0.35;
    });
    const result = ran(scenario);
    expect(Array.from(result.series.t)).toEqual([0, 0.1, 0.2, 0.3]);
    expect(column(result, "x1")[3]).toBeCloseTo(Math.exp(-0.3), 8);
  });
});

describe("the drive", () => {
  /** u = 4 from the first acting instant (1 s) on, through what the actuator does to it. */
  const driven = (actuator: object, hold = 5) =>
    ran(
      scalar((s) => {
        s.run.durationS = hold;
        s.loops[0].start = { state: [0] };
        s.loops[0].feedforward = [{ signal: "u1", profile: { type: "steps", points: [{ atS: 0, value: 4 }] } }];
        Object.assign(s.loops[0].actuator, actuator);
        s.loops[0].controller.limits = [{ lo: -10, hi: 10 }];
      }),
    );
  const at = (result: ReturnType<typeof ran>, t: number) => column(result, "u1")[Math.round(t * 10)];

  it("clips at its own limits and tells the share of the time", () => {
    const result = driven({ inputs: [{ lo: -3, hi: 3 }] });
    expect(at(result, 0.9)).toBe(0);
    expect(at(result, 1)).toBe(3);
    expect(result.figures.saturatedShare).toBeCloseTo(4 / 5, 12);
  });

  it("slews at its own rate", () => {
    const result = driven({ inputs: [{ lo: -10, hi: 10, ratePerS: 2 }] });
    expect(at(result, 1.5)).toBeCloseTo(1, 9);
    expect(at(result, 3)).toBeCloseTo(4, 9);
    expect(at(result, 4)).toBe(4);
  });

  it("waits its dead time", () => {
    const result = driven({ inputs: [{ lo: -10, hi: 10 }], deadTimeS: 0.25 });
    expect(at(result, 1.2)).toBe(0);
    expect(at(result, 1.3)).toBe(4);
  });

  it("lags as a first-order system", () => {
    const result = driven({ inputs: [{ lo: -10, hi: 10 }], lagS: 0.5 });
    expect(at(result, 2)).toBeCloseTo(4 * (1 - Math.exp(-2)), 8);
  });
});

describe("the reaction to silence", () => {
  const silent = (silence: object, command: (0 | 1)[]) =>
    ran(
      scalar((s) => {
        s.run.durationS = 10;
        s.loops[0].feedforward = [{ signal: "u1", profile: { type: "steps", points: [{ atS: 0, value: 4 }] } }];
        s.loops[0].actuator.silence = { afterLost: 2, reaction: "power-off", ...silence };
        s.losses.process = { type: "given", measurement: [1], command, then: "delivered" };
        if (s.losses.process.type === "given") s.losses.process.measurement = new Array(10).fill(1);
      }),
    );

  it("begins with the last of so many lost commands in a row and stays", () => {
    const result = silent({}, [1, 0, 0, 1, 1, 1, 1, 1, 1, 1]);
    const u = column(result, "u1");
    expect([u[10], u[20], u[29], u[30], u[99]]).toEqual([4, 4, 4, 0, 0]);
    expect(result.events).toContainEqual(expect.objectContaining({ atS: 3, kind: "silence" }));
    expect(result.figures.silentReactions).toBe(1);
  });

  it("ends after so many delivered ones in a row, when it may", () => {
    const result = silent({ resumeAfter: 2 }, [1, 0, 0, 1, 0, 1, 1, 1, 1, 1]);
    const u = column(result, "u1");
    // Commands 3, then 5 and 6 are delivered: commands act again at 7 s.
    expect([u[30], u[69], u[70]]).toEqual([0, 0, 4]);
  });

  it("ramps within the time given", () => {
    const result = silent({ reaction: "ramp", rampS: 0.5 }, [1, 0, 0, 1, 1, 1, 1, 1, 1, 1]);
    const u = column(result, "u1");
    expect(u[30]).toBe(4);
    expect(u[32]).toBeCloseTo(2.4, 6);
    expect(u[35]).toBeCloseTo(0, 6);
    expect(u[36]).toBe(0);
  });

  it("does not count rounds before the network has joined", () => {
    const scenario = scalar((s) => {
      s.loops[0].start = { state: [1], networkJoinsAtS: 5 };
      s.loops[0].actuator.silence = { afterLost: 2, reaction: "power-off" };
    });
    const result = ran(scenario);
    expect(Array.from(result.rounds.commandDelivered)).toEqual([0, 0, 0, 0, 0, 1, 1, 1]);
    expect(result.figures.silentReactions).toBe(0);
  });
});
