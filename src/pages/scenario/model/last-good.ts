import { fieldSpec } from "./field-spec.ts";
import { getAt, parsePath } from "./json-path.ts";
import type { FieldIssue } from "./judge.ts";
import { valueText } from "./screen-unit.ts";

/** What the only bad field held when the bench last ran: "with plan at 6 steps"; null where that says nothing. */
export function lastGoodText(issues: readonly FieldIssue[], good: unknown): string | null {
  if (issues.length !== 1) return null;
  const path = parsePath(issues[0].path);
  const value = getAt(good, path);
  if (typeof value !== "number") return null;
  const { label, unit } = fieldSpec(good, path);
  return `with ${label.charAt(0).toLowerCase()}${label.slice(1)} at ${valueText(value, unit)}`;
}
