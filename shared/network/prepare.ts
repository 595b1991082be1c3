/** The door for what asks about floods alone: links, wave, survey. The machine and its limits need not be in order for it. */
import { checkFloor } from "#shared/scenario/check-floor.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import { Report } from "#shared/scenario/report.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { type RoundTiming, roundTiming } from "./round.ts";

export type PreparedFloor = { ok: true; scenario: Scenario; timing: RoundTiming } | { ok: false; issues: Issue[] };

/** Checks floor, radio and round as if floods decided what is delivered, whatever the scenario's process is. A round that does not fit can be flooded all the same. */
export function prepareFloor(input: unknown): PreparedFloor {
  const parsed = parseScenario(input);
  if (!parsed.ok) return parsed;
  const timing = roundTiming(parsed.value);
  const report = new Report();
  checkFloor(report, { ...parsed.value, losses: { ...parsed.value.losses, process: { type: "flood" } } }, timing);
  const issues = [...report.issues, ...timing.issues.filter(({ code }) => code === "payload-too-long")];
  return issues.length > 0 ? { ok: false, issues } : { ok: true, scenario: parsed.value, timing };
}
