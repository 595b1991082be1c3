import { existsSync } from "node:fs";
import { dirname, join } from "node:path";
import { describe, expect, it } from "vitest";
import { checkScenario } from "#shared/scenario/check.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import { filesBelow, ROOT, read } from "./files.ts";

const DOCUMENTS = ["README.md", "DEVELOPERS.md", "examples/README.md"];
const scripts = Object.keys(JSON.parse(read("package.json")).scripts);

describe.each(DOCUMENTS)("%s", (document) => {
  const text = read(document);

  it("names only commands that package.json has", () => {
    const commands = [...text.matchAll(/npm (?:run (?:-s )?)?([a-z][a-z:]*)/g)]
      .map((match) => match[1])
      .filter((name) => name !== "ci" && name !== "run");
    expect(commands.filter((name) => !scripts.includes(name))).toEqual([]);
  });

  it("links only to files that exist", () => {
    const targets = [...text.matchAll(/\]\(([^)#\s]+)[^)]*\)/g)].map((match) => match[1]).filter((target) => !/^[a-z]+:/.test(target));
    expect(targets.filter((target) => !existsSync(join(ROOT, dirname(document), target)))).toEqual([]);
  });
});

describe("examples", () => {
  const scenarios = filesBelow("examples", /\.json$/)
    .map((path) => ({ path, content: JSON.parse(read(path)) }))
    .filter(({ content }) => content.format === "holdfast-scenario");

  it("are there", () => expect(scenarios.length).toBeGreaterThanOrEqual(3));

  it.each(scenarios)("$path parses and can be run", ({ content }) => {
    const parsed = parseScenario(content);
    expect(parsed).toMatchObject({ ok: true });
    expect(parsed.ok && checkScenario(parsed.value).issues).toEqual([]);
  });
});
