import { z } from "zod";
import type { Issue } from "#shared/scenario/issues.ts";
import { describeIssues, parseScenario, pathText } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { HttpError } from "./errors.ts";

const MOST_ISSUES = 100;

function refuse(code: "request-invalid" | "scenario-invalid", what: string, issues: Issue[]): never {
  const rest = issues.length - 1;
  const message = `${what}: ${issues[0].message}${rest > 0 ? ` And ${rest} more.` : ""}`;
  throw new HttpError(code, message, { issues: issues.slice(0, MOST_ISSUES) });
}

/** Rules across fields speak for themselves; the others are told by field, value and permitted range. */
function issuesOf(schema: z.ZodType, error: z.ZodError, input: unknown): Issue[] {
  const own = error.issues.filter(({ code }) => code === "custom");
  const others = error.issues.filter(({ code }) => code !== "custom");
  const told = own.map(({ path, message }) => ({ code: "invalid", path: pathText(path), message }));
  return [...describeIssues(schema, new z.ZodError(others), input), ...told];
}

/** Hands on the parsed value, with defaults filled in. */
export function validated<Schema extends z.ZodType>(schema: Schema, input: unknown, what = "The request is not valid"): z.output<Schema> {
  if (input === undefined) throw new HttpError("request-invalid", `${what}: it has no body; a JSON object is expected.`);
  const parsed = schema.safeParse(input);
  return parsed.success ? parsed.data : refuse("request-invalid", what, issuesOf(schema, parsed.error, input));
}

export function validatedScenario(input: unknown): Scenario {
  const parsed = parseScenario(input);
  return parsed.ok ? parsed.value : refuse("scenario-invalid", "The scenario cannot be saved", parsed.issues);
}
