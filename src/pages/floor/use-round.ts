import { useCallback, useEffect, useState, useSyncExternalStore } from "react";
import type { RoundTiming } from "#shared/network/round.ts";
import type { PlotCursor } from "#src/components/plots/plot-cursor.ts";

const still = () => () => {};

/**
 * The round that is looked at. It is the one at the cursor of the bench's plots, so that bench and floor show the same
 * instant; without a run it is the floor's own.
 */
export function useRound(cursor: PlotCursor | null, timing: RoundTiming | null, rounds: number, durationS: number | null) {
  const [own, setOwn] = useState(0);
  const periodS = timing?.periodS ?? 1;
  useEffect(() => {
    if (cursor && durationS !== null) cursor.setExtent(durationS, Math.max(periodS, durationS / 1e5));
  }, [cursor, durationS, periodS]);
  const atCursor = useSyncExternalStore(cursor?.subscribe ?? still, () => (cursor ? Math.floor(cursor.timeS / periodS + 1e-6) : -1));
  const round = Math.min(Math.max(0, atCursor >= 0 ? atCursor : own), Math.max(0, rounds - 1));
  const setRound = useCallback(
    (next: number, withinS = 0) => {
      setOwn(next);
      cursor?.moveTo(next * periodS + Math.min(Math.max(0, withinS), periodS * 0.999));
    },
    [cursor, periodS],
  );
  return { round, setRound };
}
