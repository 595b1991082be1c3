/** How much of a run's planned time the plots show. */
import type { RunResult } from "#shared/simulation/result.ts";
import { niceStep } from "./units.ts";

/** Shortly past the end of a run that ended early: the rest of the planned time would be empty. Seconds. */
export function drawnExtentS({ durationS, endedAtS, ended, rounds }: Pick<RunResult, "durationS" | "endedAtS" | "ended" | "rounds">): number {
  if (ended === "complete") return durationS;
  const step = niceStep(Math.max(endedAtS * 0.05, rounds.periodS));
  return Math.min(durationS, Math.ceil((endedAtS * 1.12) / step + 1e-9) * step);
}
