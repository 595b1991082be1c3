import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";

export interface MachineProps {
  scenario: Scenario;
  result: RunResult;
}

export function Machine(_: MachineProps) {
  return null;
}
