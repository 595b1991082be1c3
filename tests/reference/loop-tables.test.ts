/** The hand-checkable tables of the loop's semantics, and a test for each mistake that is easily made. */
import { describe, expect, it } from "vitest";
import type { ScenarioInput } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { type Acknowledgement, ALL_STATES, atBoundaries, type OnLoss, PLANT_F, run, scalar, withLoop } from "./plant-f.ts";

const GAMMA = [1, 0, 1, 0, 0, 1, 1, 1] as (0 | 1)[];
const NU = [1, 0, 1, 0, 0, 1, 0, 1] as (0 | 1)[];
const HOLD: OnLoss = { policy: "hold" };
const ZERO: OnLoss = { policy: "zero" };
const plan = (length: number, end: "zero" | "hold" = "zero"): OnLoss => ({ policy: "plan", length, end });

const states = (result: RunResult) => atBoundaries(result, "x1").slice(1, 9);
const table = (onLoss: OnLoss, acknowledgement: Acknowledgement = "none", d: 0 | 1 = 0, latencyS: number | null = null) =>
  states(run(scalar({ measurement: GAMMA, command: NU, onLoss, acknowledgement, d, latencyS })));

function expectAll(found: number[], wanted: number[], tolerance: number) {
  expect(found).toHaveLength(wanted.length);
  wanted.forEach((value, k) => {
    expect(Math.abs(found[k] - value), `x_${k + 1} is ${found[k]}, the table has ${value}`).toBeLessThan(tolerance);
  });
}

describe("table 1: scalar plant, x_1 to x_8, computed twice by hand", () => {
  it.each([
    ["act t_{k+1}, hold", HOLD, "none", 0, [1.2, 0.6, -0.12, -0.354, -0.6348, -0.97176, -0.59613, -0.145374]],
    ["act t_{k+1}, hold, reported", HOLD, "reported", 0, [1.2, 0.6, -0.12, -0.06, 0.012, 0.0984, 0.0492, -0.00984]],
    ["act t_{k+1}, zero", ZERO, "none", 0, [1.2, 0.6, 0.72, 0.654, 0.7848, 0.94176, 0.50763, 0.609156]],
    ["act t_{k+1}, zero, reported", ZERO, "reported", 0, [1.2, 0.6, 0.72, 0.36, 0.432, 0.5184, 0.2592, 0.31104]],
    ["plan of 2, then zero", plan(2), "none", 0, [1.2, 0.6, 0.3, 0.15, 0.075, 0.09, 0.08175, 0.084975]],
    ["plan of 2, then hold", plan(2, "hold"), "none", 0, [1.2, 0.6, 0.3, 0.15, 0.075, -0.015, -0.04425, -0.066225]],
    ["plan of 3", plan(3), "none", 0, [1.2, 0.6, 0.3, 0.15, 0.075, 0.0375, 0.01875, 0.009375]],
    ["act t_{k+2}, hold", HOLD, "none", 1, [1.2, 1.44, 0.72, -0.144, -0.4248, -0.76176, -1.166112, -0.821196]],
    ["act t_{k+2}, hold, reported", HOLD, "reported", 1, [1.2, 1.44, 0.72, -0.144, -0.4248, -0.76176, -1.166112, -0.715356]],
    ["act t_{k+2}, zero", ZERO, "none", 1, [1.2, 1.44, 0.72, 0.864, 0.7848, 0.94176, 1.130112, 0.714996]],
  ] as const)("%s", (_, onLoss, acknowledgement, d, wanted) => {
    expectAll(table(onLoss, acknowledgement, d), [...wanted], 1e-12);
  });
});

describe("table 2: the same with a latency of 0.6 s", () => {
  it.each([
    ["hold", HOLD, [0.90460218, 0.30460218, -0.15021952, -0.26015243, -0.39207193, -0.40128189, -0.16728047, 0.01556096]],
    ["zero", ZERO, [0.90460218, 0.6, 0.60252061, 0.52993291, 0.6359195, 0.58713727, 0.41534277, 0.41708763]],
  ] as const)("%s", (_, onLoss, wanted) => {
    expectAll(table(onLoss, "none", 0, 0.6), [...wanted], 5.1e-9);
  });
});

/** Plant F of table 3 with every measurement delivered but k mod 7 in {3, 4}, every command but j mod 5 = 2. */
const plantF = (change: Partial<ScenarioInput["loops"][number]> = {}, durationS = 2.02): ScenarioInput => ({
  format: "holdfast-scenario",
  version: 1,
  name: "Plant F",
  run: { durationS, absoluteTolerance: 1e-12, relativeTolerance: 1e-12 },
  loops: [
    {
      name: "F",
      plant: PLANT_F,
      start: { state: [0, 0.08, 0, 0] },
      sensor: { signals: ALL_STATES },
      controller: { law: { type: "gain", gain: [[-5, -45, -7, -9]] } },
      actuator: { inputs: [{ lo: -1e6, hi: 1e6 }] },
      ...change,
    },
  ],
  radio: { phy: "le-2m" },
  round: { periodS: 0.02 },
  losses: { process: { type: "given", measurement: [1, 1, 1, 0, 0, 1, 1], command: [1, 1, 0, 1, 1], then: "repeat" } },
});

describe("table 3: plant F, nonlinear, at 1 s and 2 s", () => {
  const law = { law: { type: "gain" as const, gain: [[-5, -45, -7, -9]] } };
  const at = (result: RunResult, k: number) => ALL_STATES.map(({ signal }) => atBoundaries(result, signal)[k]);
  it.each([
    [
      "A hold",
      {},
      [0.095724477526, -0.0123968807621, -0.111205001625, 0.0856593416122],
      [0.0233715379168, 0.00492438195721, -0.033482814071, -0.00629736707328],
    ],
    [
      "A2 hold, reported",
      { controller: { ...law, acknowledgement: "reported" as const } },
      [0.0960979039719, -0.0125852766773, -0.111125456213, 0.0856874218113],
      [0.0233918453899, 0.00497240194655, -0.0335837632949, -0.00637026132045],
    ],
    [
      "B hold, latency 12 ms",
      { timing: { actAfterSampleS: 0.012 } },
      [0.0912619747879, -0.0112438097596, -0.107286367692, 0.0806274496495],
      [0.0221811258073, 0.00470211849654, -0.0318325515248, -0.00603615831663],
    ],
    [
      "D zero",
      { actuator: { inputs: [{ lo: -1e6, hi: 1e6 }], onLoss: ZERO } },
      [0.117836867131, -0.0294954043043, -0.181913976925, 0.149877002794],
      [0.0114313764954, 0.0084613647533, 0.00796566056837, -0.0406261698048],
    ],
    [
      "F hold, sampling at 3 ms",
      { timing: { sampleAtS: 0.003 } },
      [0.0957736772685, -0.0124230512169, -0.111181388563, 0.0856485554129],
      [0.0233732726972, 0.00493133552846, -0.0334962702343, -0.00630765386374],
    ],
  ] as const)("%s", (_, change, first, second) => {
    const result = run(plantF(change as Partial<ScenarioInput["loops"][number]>));
    for (const [k, wanted] of [
      [50, first],
      [100, second],
    ] as const) {
      const found = at(result, k);
      wanted.forEach((value, i) => {
        expect(Math.abs(found[i] - value)).toBeLessThan(1e-10);
      });
    }
  });
});

const DOUBLE_INTEGRATOR: ScenarioInput["loops"][number]["plant"] = {
  type: "state-space",
  a: [
    [0, 1],
    [0, 0],
  ],
  b: [[0], [1]],
};

describe("likely mistakes", () => {
  it("1: a push after a long rest moves the machine", () => {
    const scenario: ScenarioInput = {
      ...plantF(),
      run: { durationS: 1.2 + 0.02 },
      loops: [
        {
          name: "Double integrator",
          plant: DOUBLE_INTEGRATOR,
          sensor: { signals: [{ signal: "x1" }, { signal: "x2" }] },
          controller: { law: { type: "gain", gain: [[0, 0]] } },
          actuator: { inputs: [{ lo: -10, hi: 10 }] },
        },
      ],
      pushes: [{ type: "step", channel: "u1", fromS: 1, untilS: 1.2, size: 1 }],
    };
    const result = run(scenario);
    expect(atBoundaries(result, "x1")[60]).toBeCloseTo(0.02, 12);
    expect(result.series.t[600]).toBeCloseTo(1.2, 12);
    expect(result.endedAtS).toBeCloseTo(1.22, 12);
  });

  it("11: a friction that the design left out does not let the pendulum fall", () => {
    const scenario = plantF(
      {
        plant: { ...PLANT_F, coulombFrictionN: 0.5, coulombSpeedMps: 0.01 },
        controller: { law: { type: "lqr", stateWeights: [5, 20, 0.5, 0.5], inputWeights: [0.1] } },
      },
      6,
    );
    const result = run({ ...scenario, losses: { process: { type: "none" } } });
    expect(result.ended).toBe("complete");
    expect(Math.max(...atBoundaries(result, "angle").map(Math.abs))).toBeLessThan(0.3);
  });

  it("18: zero lies on the encoding's grid", () => {
    const scenario = plantF({
      start: { state: [0, 0, 0, 0] },
      sensor: { signals: ALL_STATES.map((signal) => ({ ...signal, encoding: { bits: 8, lo: -10, hi: 10 } })) },
      actuator: { inputs: [{ lo: -10, hi: 10, encoding: { bits: 8, lo: -10, hi: 10 } }] },
    });
    const result = run(scenario);
    expect(result.rounds.measurement.every((value) => value === 0)).toBe(true);
    expect(result.rounds.command.every((value) => value === 0)).toBe(true);
  });

  it("19: 1 N s on the cart of the published pendulum makes the published jump", () => {
    const scenario: ScenarioInput = {
      ...plantF({
        plant: { type: "pendulum-on-cart", cartMassKg: 0.5, rodMassKg: 0.2, rodLengthM: 0.3, rodInertiaKgM2: 0.006, gravityMps2: 9.8 },
        start: { state: [0, 0, 0, 0] },
        controller: { law: { type: "gain", gain: [[0, 0, 0, 0]] } },
      }),
      run: { durationS: 0.1 },
      pushes: [{ type: "impulse", channel: "cart", atS: 0.02, size: 1 }],
    };
    const result = run(scenario);
    // the series keeps the value just after an event
    expect(atBoundaries(result, "velocity")[1]).toBeCloseTo(1.8181818, 7);
    expect(atBoundaries(result, "angularVelocity")[1]).toBeCloseTo(-4.5454545, 7);
  });

  it("20: a plan of one command that ends in zero is zero, one that ends in hold is hold, bit for bit", () => {
    const lossy = (onLoss: OnLoss): ScenarioInput => ({
      ...plantF({ actuator: { inputs: [{ lo: -12, hi: 12 }], onLoss } }),
      losses: { process: { type: "bernoulli", measurement: 0.2, command: 0.25 } },
    });
    for (const [one, other] of [
      [plan(1), ZERO],
      [plan(1, "hold"), HOLD],
    ]) {
      for (const seed of [1, 2, 3]) {
        const [a, b] = [run(lossy(one), seed), run(lossy(other), seed)];
        expect(a.series.values).toEqual(b.series.values);
        expect(a.rounds.command).toEqual(b.rounds.command);
      }
    }
  });

  it("22: another message, an outage, noise or a higher loss leaves the losses of the other message as they were", () => {
    const base: ScenarioInput = {
      ...plantF(),
      losses: { process: { type: "bernoulli", measurement: 0.2, command: 0.2 } },
    };
    const delivered = (scenario: ScenarioInput) => {
      const { rounds } = run(scenario, 7);
      return { measurement: Array.from(rounds.measurementDelivered), command: Array.from(rounds.commandDelivered) };
    };
    const plain = delivered(base);
    expect(plain.measurement).toContain(0);
    expect(plain.command).toContain(0);

    const outage = delivered({ ...base, losses: { ...base.losses, outages: [{ fromS: 0.5, untilS: 0.7, messages: ["measurement"] }] } });
    expect(outage.command).toEqual(plain.command);
    outage.measurement.forEach((bit, k) => {
      if (k < 24 || k > 36) expect(bit).toBe(plain.measurement[k]);
    });
    expect(outage.measurement.slice(26, 34)).toEqual(Array(8).fill(0));

    const noisy = delivered(withLoop(base, { sensor: { signals: ALL_STATES.map((signal) => ({ ...signal, noiseStd: 0.001 })) } }));
    expect(noisy).toEqual(plain);

    // with the controller at the sensor there is no measurement message; the command's losses stay
    const fewer = delivered(withLoop(base, { controller: { ...base.loops[0].controller, placement: "sensor" } }));
    expect(fewer.command).toEqual(plain.command);
    expect(fewer.measurement.every((bit) => bit === 1)).toBe(true);

    const worse = delivered({ ...base, losses: { process: { type: "bernoulli", measurement: 0.2, command: 0.4 } } });
    expect(worse.measurement).toEqual(plain.measurement);
    worse.command.forEach((bit, k) => {
      expect(bit).toBeLessThanOrEqual(plain.command[k]);
    });
  });

  it("2: any burst shorter than the plan leaves a noise-free linear loop as if nothing had been lost (checks.md 6.5)", () => {
    const ones = Array.from({ length: 8 }, () => 1 as const);
    const whole = states(run(scalar({ measurement: ones, command: ones, onLoss: plan(4) })));
    const lossy = states(run(scalar({ measurement: ones, command: [1, 0, 0, 0, 1, 1, 0, 0], onLoss: plan(4) })));
    expectAll(lossy, whole, 1e-13);
  });
});

describe("energy", () => {
  it("of a frictionless pendulum is conserved for 10 s", () => {
    const p = { cartMassKg: 1.2, rodMassKg: 0.4, rodLengthM: 0.35, rodInertiaKgM2: 0.006, gravityMps2: 9.81 };
    const scenario: ScenarioInput = {
      ...plantF({
        plant: { type: "pendulum-on-cart", ...p },
        start: { state: [0, 0.01, 0, 0] },
        controller: { law: { type: "gain", gain: [[0, 0, 0, 0]] } },
      }),
      run: { durationS: 10, absoluteTolerance: 1e-11, relativeTolerance: 1e-11 },
    };
    const result = run(scenario);
    const [, angle, velocity, rate] = ALL_STATES.map(({ signal }) => atBoundaries(result, signal));
    const { cartMassKg: M, rodMassKg: m, rodLengthM: l, rodInertiaKgM2: I, gravityMps2: g } = p;
    const energy = angle.map(
      (theta, k) =>
        ((M + m) * velocity[k] ** 2) / 2 +
        m * l * Math.cos(theta) * velocity[k] * rate[k] +
        ((I + m * l * l) * rate[k] ** 2) / 2 +
        m * g * l * Math.cos(theta),
    );
    // it swings all the way through, over and over
    expect(Math.max(...angle)).toBeGreaterThan(6);
    const largest = 2 * m * g * l;
    for (const value of energy) expect(Math.abs(value - energy[0]) / largest).toBeLessThan(1e-8);
    // momentum of cart and rod along the track is conserved as well
    for (let k = 0; k < angle.length; k++) expect(Math.abs((M + m) * velocity[k] + m * l * Math.cos(angle[k]) * rate[k])).toBeLessThan(1e-8);
  });
});
