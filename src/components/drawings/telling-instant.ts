import type { RunResult } from "#shared/simulation/result.ts";

/** Where a still picture tells most: the decisive instant of the limit that was used most, else the first push. */
export function tellingInstant(result: RunResult): number {
  const first = result.events[0]?.atS ?? 0;
  const told = result.limits.flatMap(({ atS, used, unit }) => (atS !== null && unit !== "s" ? [{ atS, used }] : [])).sort((a, b) => b.used - a.used);
  // The largest excursion, not the end of a settling. What happened after something was done to the machine tells more than how it began.
  const decisive = told.find(({ atS }) => atS > first) ?? told[0];
  return decisive?.atS ?? result.events.find(({ kind }) => kind === "push")?.atS ?? 0;
}
