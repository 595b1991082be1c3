/** What is kept of a scenario beside itself: the table's columns, and what stands for a verdict while there is no run. */
import type { VerdictLine } from "#shared/api/common.ts";
import { PLANT_LABELS, plantKind, type RoundSummary } from "#shared/api/scenarios.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import { checkScenario } from "#shared/scenario/check.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { searchText, sortKey } from "../../db/text.ts";

/**
 * Raised whenever the same scenario would give other columns: kept summaries of another version are made anew at the next
 * start. 1: one loop. 2: any number of loops and messages.
 */
export const SUMMARY_VERSION = 2;

function roundSummary(timing: RoundTiming): RoundSummary {
  const { ns: _ns, savings: _savings, issues: _issues, ...summary } = timing;
  return summary;
}

const DOES_NOT_FIT = new Set(["round-does-not-fit", "payload-too-long"]);

/** A draft that breaks a rule across fields is kept all the same; its verdict says what is wrong. */
function verdictWithoutRun(issues: Issue[]): VerdictLine {
  const unfit = issues.find((issue) => DOES_NOT_FIT.has(issue.code));
  if (unfit) return { state: "does-not-fit", word: "Does not fit", sentence: unfit.message };
  return { state: "not-decided", word: "Not decided", sentence: issues[0]?.message ?? "This revision has not been run yet." };
}

export function summarise(scenario: Scenario) {
  const { issues, timing } = checkScenario(scenario);
  const kind = plantKind(scenario.loops[0].plant);
  return {
    columns: {
      name: scenario.name,
      sortKey: sortKey(scenario.name),
      searchText: searchText(scenario.name, PLANT_LABELS[kind]),
      plantKind: kind,
      periodS: scenario.round.periodS,
      round: roundSummary(timing),
      summaryVersion: SUMMARY_VERSION,
    },
    unrun: verdictWithoutRun(issues),
    runs: issues.length === 0,
  };
}
export type Summary = ReturnType<typeof summarise>;
