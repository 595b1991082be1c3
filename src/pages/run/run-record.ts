/** A kept run as the engine gives it back: what the server keeps in parts, joined again. */
import type { RunDetail } from "#shared/api/runs.ts";
import type { SeriesRecord } from "#shared/api/series.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";

export function resultOf(run: RunDetail, record: SeriesRecord): RunResult {
  const { state } = run.verdict;
  return {
    engine: run.engine,
    seed: run.seed,
    durationS: run.durationS,
    endedAtS: run.endedAtS,
    ended: run.ended,
    series: record.series,
    rounds: record.rounds,
    events: run.events,
    figures: run.figures,
    limits: run.limits,
    verdict: state === "does-not-fit" ? "not-decided" : state,
  };
}

/** Of a very long run the server keeps every second, third, ... point, or no measurements and commands. */
export const isWhole = ({ keptEvery, detailed }: SeriesRecord): boolean => keptEvery === 1 && detailed;

/** Everything of a run in plain JSON: numbers in SI units, one array per column. */
export function runJson(scenario: Scenario, result: RunResult, digest: string): string {
  const plain = (_: string, value: unknown) => (ArrayBuffer.isView(value) ? Array.from(value as Float64Array) : value);
  return `${JSON.stringify({ format: "holdfast-run", version: 1, digest, scenario, result }, plain)}\n`;
}
