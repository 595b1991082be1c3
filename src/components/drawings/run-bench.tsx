import type { ReactNode, Ref } from "react";
import type { RoundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import type { PlotCursor } from "#src/components/plots/plot-cursor.ts";
import type { PlotStackHandle } from "../plots/plot-stack.tsx";

export interface RunBenchProps {
  /** The scenario that gave the result (not the one being edited, when that has an error). */
  scenario: Scenario;
  timing: RoundTiming;
  result: RunResult;
  /** The last good result while the set-up has an error: colours are taken out. */
  stale?: boolean;
  /** To move the cursor from outside; else the bench has its own. */
  cursor?: PlotCursor;
  /** Buttons at the right of the transport line of the plots. */
  actions?: ReactNode;
  stackRef?: Ref<PlotStackHandle>;
}

/** Limits, machine, values at the cursor, plots, tapes, time axis and round ribbon: all that stands below the verdict line. */
export function RunBench(_: RunBenchProps) {
  return null;
}
