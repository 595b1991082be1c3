/** From a text to a scenario, or to everything that is wrong with it. */
import { MAX_SCENARIO_BYTES } from "#shared/api/errors.ts";
import { type JsonPosition, parseJson } from "#shared/api/json.ts";
import { checkScenario } from "#shared/scenario/check.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";

export type Reading =
  | { kind: "too-large"; bytes: number }
  | { kind: "not-json"; message: string; line: string }
  | { kind: "invalid"; issues: Issue[] }
  /** Shape and ranges are right; `toPutRight` are rules across fields, without which it can be kept but not run. */
  | { kind: "ready"; scenario: Scenario; toPutRight: Issue[] };

const LONGEST_EXCERPT = 60;

/** The line up to the place and a little further, so that the place can be pointed at. */
function excerpt(text: string, { line, column }: JsonPosition): string {
  const whole = text.split("\n")[line - 1] ?? "";
  const from = Math.max(0, column - 1 - LONGEST_EXCERPT / 2);
  return `${from > 0 ? "…" : ""}${whole.slice(from, from + LONGEST_EXCERPT)}${whole.length > from + LONGEST_EXCERPT ? "…" : ""}`;
}

export function readScenario(text: string): Reading {
  const bytes = new TextEncoder().encode(text).length;
  if (bytes > MAX_SCENARIO_BYTES) return { kind: "too-large", bytes };
  const json = parseJson(text.replace(/^\uFEFF/, ""));
  if (!json.ok) return { kind: "not-json", message: json.message, line: excerpt(text, json.position) };
  const parsed = parseScenario(json.value);
  if (!parsed.ok) return { kind: "invalid", issues: parsed.issues };
  return { kind: "ready", scenario: parsed.value, toPutRight: checkScenario(parsed.value).issues };
}
