/** A scenario as a file, out and in. */

import { MAX_SCENARIO_BYTES } from "#shared/api/errors.ts";
import { parseJson } from "#shared/api/json.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { bytesText } from "#src/lib/format.ts";

const fileName = (name: string): string =>
  `${
    name
      .toLowerCase()
      .replace(/[^\p{L}\p{N}]+/gu, "-")
      .replace(/^-|-$/g, "") || "scenario"
  }.json`;

export function downloadJson(name: string, json: unknown): void {
  const address = URL.createObjectURL(new Blob([`${JSON.stringify(json, null, 2)}\n`], { type: "application/json" }));
  const link = document.createElement("a");
  link.href = address;
  link.download = fileName(name);
  link.click();
  URL.revokeObjectURL(address);
}

export type ReadFile = { ok: true; scenario: Scenario } | { ok: false; text: string; issues: Issue[] };

export async function readScenarioFile(file: File): Promise<ReadFile> {
  if (file.size > MAX_SCENARIO_BYTES)
    return { ok: false, text: `${file.name} has ${bytesText(file.size)}; a scenario may have at most ${bytesText(MAX_SCENARIO_BYTES)}.`, issues: [] };
  const json = parseJson(await file.text());
  if (!json.ok)
    return { ok: false, text: `${file.name} is no JSON, line ${json.position.line}, column ${json.position.column}: ${json.message}.`, issues: [] };
  const parsed = parseScenario(json.value);
  if (parsed.ok) return { ok: true, scenario: parsed.value };
  const count = parsed.issues.length;
  return {
    ok: false,
    text: `${file.name} is no scenario of this version: ${count} ${count === 1 ? "place has" : "places have"} to be put right.`,
    issues: parsed.issues,
  };
}
