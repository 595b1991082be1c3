/** The door to the engine: a scenario as any JSON and a seed in, a result or issues out. */
import { checkScenario } from "#shared/scenario/check.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { RunOutcome } from "./result.ts";
import { Run } from "./run.ts";

export type Prepared = { ok: true; run: Run } | { ok: false; issues: Issue[] };

/** Checks a scenario and readies its run; seed null or left out: the scenario's own. */
export function prepareRun(input: unknown, seed?: number | null): Prepared {
  const parsed = parseScenario(input);
  if (!parsed.ok) return parsed;
  const scenario = parsed.value;
  const { issues, timing, design } = checkScenario(scenario);
  if (!design) return { ok: false, issues };
  return { ok: true, run: new Run(scenario, timing, design, seed ?? scenario.run.seed) };
}

/** Simulates a scenario to its end in one go. */
export function simulate(input: unknown, seed?: number | null): RunOutcome {
  const prepared = prepareRun(input, seed);
  if (!prepared.ok) return prepared;
  prepared.run.advance(Number.POSITIVE_INFINITY);
  return { ok: true, result: prepared.run.result() };
}
