import type { Ref } from "react";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";

export interface PlotStackHandle {
  /** The whole stack as it is zoomed now, in light colours, at twice the size. */
  toPng(title: string): Promise<Blob>;
}

export interface PlotStackProps {
  scenario: Scenario;
  result: RunResult;
  /** A second run, dashed: "B". */
  second?: RunResult;
  /** Column names in the order of the plots; default: what has a limit or a reference, then the inputs. */
  signals?: readonly string[];
  /** Last good result: colours are taken out. */
  stale?: boolean;
  ref?: Ref<PlotStackHandle>;
}

/** Events, signals, loss tapes and time on one axis. Needs a PlotCursorContext above. */
export function PlotStack(_: PlotStackProps) {
  return null;
}
