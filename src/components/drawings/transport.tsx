import type { RunResult } from "#shared/simulation/result.ts";

export interface TransportProps {
  result: RunResult;
}

/** To the start, play or pause, speed. Drives the cursor of its PlotCursorContext. */
export function Transport(_: TransportProps) {
  return null;
}
