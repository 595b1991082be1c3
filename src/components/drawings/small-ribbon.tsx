import type { RoundTiming } from "#shared/network/round.ts";

export interface SmallRibbonProps {
  timing: RoundTiming;
  hops?: number;
  width?: number;
}

/** For tables: the same marks as the large ribbon, no text. */
export function SmallRibbon(_: SmallRibbonProps) {
  return null;
}
