import type { RoundTiming } from "#shared/network/round.ts";

export interface RoundRibbonProps {
  timing: RoundTiming;
  /** Hop bound: the height of the stairs. Without it the slots are plain blocks with step divisions. */
  hops?: number;
}

export function RoundRibbon(_: RoundRibbonProps) {
  return null;
}
