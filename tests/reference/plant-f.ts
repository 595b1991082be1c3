/** Scenarios of loop-tables.md: the scalar plant of tables 1 and 2, and plant F of table 3. */
import type { ScenarioInput } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { simulate } from "#shared/simulation/simulate.ts";

type LoopInput = ScenarioInput["loops"][number];
export type OnLoss = NonNullable<LoopInput["actuator"]["onLoss"]>;
export type Acknowledgement = NonNullable<LoopInput["controller"]["acknowledgement"]>;

export const PLANT_F = {
  type: "pendulum-on-cart",
  cartMassKg: 1.2,
  rodMassKg: 0.15,
  rodLengthM: 0.35,
  rodInertiaKgM2: 0.006,
  cartFrictionNsPerM: 0.4,
  pivotFrictionNmsPerRad: 0.002,
} as const;
export const ALL_STATES = ["position", "angle", "velocity", "angularVelocity"].map((signal) => ({ signal }));

/** x+ = 1.2 x + u at a period of 1 s: a = ln 1.2, b = 5 ln 1.2; K = 0.7, from x = 1. */
export function scalar(options: {
  measurement: (0 | 1)[];
  /** Of the command *computed* in round k. */
  command: (0 | 1)[];
  onLoss?: OnLoss;
  acknowledgement?: Acknowledgement;
  /** Rounds between computing and travelling. */
  d?: 0 | 1;
  latencyS?: number | null;
}): ScenarioInput {
  const { measurement, command, onLoss = { policy: "hold" }, acknowledgement = "none", d = 0, latencyS = null } = options;
  return {
    format: "holdfast-scenario",
    version: 1,
    name: "Scalar plant",
    run: { durationS: 9, absoluteTolerance: 1e-14, relativeTolerance: 1e-13 },
    loops: [
      {
        name: "Scalar",
        plant: { type: "state-space", a: [[Math.log(1.2)]], b: [[5 * Math.log(1.2)]] },
        start: { state: [1] },
        timing: { commandTravels: d === 0 ? "same-round" : "next-round", actAfterSampleS: latencyS },
        sensor: { signals: [{ signal: "x1" }] },
        controller: { law: { type: "gain", gain: [[0.7]] }, acknowledgement },
        actuator: { inputs: [{ lo: -1000, hi: 1000 }], onLoss },
      },
    ],
    radio: { phy: "le-2m" },
    round: { periodS: 1 },
    losses: { process: { type: "given", measurement, command: d === 0 ? command : [1, ...command], then: "delivered" } },
  };
}

export function run(scenario: ScenarioInput, seed?: number): RunResult {
  const outcome = simulate(scenario, seed);
  if (!outcome.ok) throw new Error(outcome.issues.map(({ path, message }) => `${path}: ${message}`).join("\n"));
  return outcome.result;
}

/** A column of the series at the round boundaries 0, 1, 2, ... */
export function atBoundaries(result: RunResult, name: string): number[] {
  const index = result.series.columns.findIndex((column) => column.name === name);
  return Array.from(result.series.values[index].filter((_, i) => i % 10 === 0));
}

/** A copy with the given parts of its only loop replaced. */
export function withLoop(scenario: ScenarioInput, change: Partial<LoopInput>): ScenarioInput {
  return { ...scenario, loops: [{ ...scenario.loops[0], ...change }] };
}
