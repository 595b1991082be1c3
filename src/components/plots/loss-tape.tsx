import type { Rounds } from "#shared/simulation/result.ts";

export interface LossTapeProps {
  rounds: Rounds;
  message: "measurement" | "command";
}

/** One piece of tape per round, lost ones cut out. Alone, without the plots; follows the zoom of its PlotCursorContext. */
export function LossTape(_: LossTapeProps) {
  return null;
}
