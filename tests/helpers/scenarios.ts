import type { Scenario, ScenarioInput } from "#shared/scenario/schema.ts";
import { scenarioSchema } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { simulate } from "#shared/simulation/simulate.ts";

/** A fresh copy of a template: 0 the pendulum, 1 the crane. */
export const template = (index: 0 | 1): Scenario => structuredClone(TEMPLATES[index].scenario);

/** x' = a x + b u with T = 1 s, measured whole, no noise, no losses unless changed. */
export function scalar(change?: (scenario: ScenarioInput) => void): Scenario {
  const scenario: ScenarioInput = {
    format: "holdfast-scenario",
    version: 1,
    name: "Scalar",
    run: { durationS: 8, seed: 1 },
    loops: [
      {
        name: "Scalar",
        plant: { type: "state-space", a: [[-1]], b: [[1]] },
        start: { state: [1] },
        sensor: { signals: [{ signal: "x1" }] },
        controller: { computeS: 0.001, law: { type: "gain", gain: [[0]] } },
        actuator: { inputs: [{ lo: -10, hi: 10 }] },
      },
    ],
    radio: { phy: "le-2m" },
    round: { periodS: 1 },
    losses: { process: { type: "none" } },
  };
  change?.(scenario);
  return scenarioSchema.parse(scenario);
}

/** Runs a scenario that has to run; throws its issues otherwise. */
export function ran(scenario: unknown, seed?: number): RunResult {
  const outcome = simulate(scenario, seed);
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues));
  return outcome.result;
}

export function column(result: RunResult, name: string): Float64Array {
  const index = result.series.columns.findIndex((candidate) => candidate.name === name);
  if (index < 0) throw new Error(`no column ${name}`);
  return result.series.values[index];
}
