import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";

export interface LimitStripProps {
  scenario: Scenario;
  result: RunResult;
  /** Rows instead of columns (phone). */
  rows?: boolean;
}

export function LimitStrip(_: LimitStripProps) {
  return null;
}
