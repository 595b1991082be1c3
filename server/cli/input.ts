/** What every command reads and refuses in the same way. */
import { readFileSync, writeFileSync } from "node:fs";
import { parseJson } from "#shared/api/json.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";

/** Something the caller can put right; printed as it is. */
export class Refused extends Error {}

const reason = (cause: unknown): string => (cause instanceof Error ? cause.message : String(cause));

/** file: a path, or - for standard input. */
export function readText(file: string): string {
  try {
    return readFileSync(file === "-" ? 0 : file, "utf8");
  } catch (cause) {
    throw new Refused(`${file} cannot be read: ${reason(cause)}`);
  }
}

export const listed = (issues: readonly Issue[]): string =>
  issues.map(({ path, message, help }) => [`${path || "file"}: ${message}`, ...(help ?? []).map((line) => `  ${line}`)].join("\n")).join("\n");

export function readScenario(file: string): Scenario {
  const json = parseJson(readText(file));
  if (!json.ok) throw new Refused(`${file}: ${json.message}`);
  const result = parseScenario(json.value);
  if (!result.ok) throw new Refused(listed(result.issues));
  return result.value;
}

/** A whole number that an option names, or null where it was not given. */
export function wholeNumber(name: string, text: string | undefined, least: number, most: number): number | null {
  if (text === undefined) return null;
  const value = Number(text);
  if (!/^\d+$/.test(text) || value < least || value > most) throw new Refused(`--${name} is ${text}; permitted: whole numbers ${least} to ${most}.`);
  return value;
}

export function save(file: string, text: string): void {
  try {
    writeFileSync(file, text);
  } catch (cause) {
    throw new Refused(`${file} cannot be written: ${reason(cause)}`);
  }
}
