import { useState } from "react";
import type { RunResult } from "#shared/simulation/result.ts";
import { tellingInstant } from "#src/components/drawings/telling-instant.ts";
import { drawnExtentS } from "#src/components/plots/drawn-extent.ts";
import { createPlotCursor, type PlotCursor } from "#src/components/plots/plot-cursor.ts";

/** One cursor for bench and floor, from the first run on: an instant that was chosen on one is the round shown on the other. */
export function useBenchCursor(result: RunResult | null): PlotCursor | null {
  const [cursor, setCursor] = useState<PlotCursor | null>(null);
  if (cursor || !result) return cursor;
  const made = createPlotCursor(drawnExtentS(result), tellingInstant(result));
  setCursor(made);
  return made;
}
