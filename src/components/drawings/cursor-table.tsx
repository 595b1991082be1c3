import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";

export interface CursorTableProps {
  scenario: Scenario;
  result: RunResult;
}

export function CursorTable(_: CursorTableProps) {
  return null;
}
