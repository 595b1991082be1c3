import { describe, expect, it } from "vitest";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { cleanDraft } from "#src/pages/scenario/model/draft.ts";
import { type Path, setAt } from "#src/pages/scenario/model/json-path.ts";
import { judge } from "#src/pages/scenario/model/judge.ts";
import { applySaving } from "#src/pages/scenario/model/savings.ts";

const base = TEMPLATES[0].scenario;
const judged = (...edits: [Path, unknown][]) => judge(cleanDraft(edits.reduce<unknown>((json, [path, value]) => setAt(json, path, value), base)));
const plain = (text: string) => text.replaceAll("\u2009", " ").replaceAll("\u2060", "").replaceAll("\u2212", "-");

describe("judging a draft", () => {
  it("finds nothing wrong with the templates", () => {
    for (const { scenario } of TEMPLATES) expect(judge(cleanDraft(scenario))).toMatchObject({ issues: [], scenario: { name: scenario.name } });
  });

  it("names field, value and range in the unit of the screen", () => {
    const { issues, scenario } = judged([["losses", "process", "command"], 1.4]);
    expect(scenario).toBeNull();
    expect(issues).toEqual([{ path: "losses.process.command", code: "out-of-range", rule: expect.any(String), more: expect.any(String) }]);
    expect(plain(issues[0].rule)).toBe("Command lost is 140 %: 0 to 100 is permitted.");
    expect(plain(issues[0].more)).toBe("Enter 0 to 100 %.");
  });

  it("says what a plan that is too long would do to the round", () => {
    const { issues } = judged([["loops", 0, "actuator", "onLoss", "length"], 40]);
    expect(plain(issues[0].more)).toMatch(
      /The command message would hold 60 B, and the round would be [\d.]+ ms longer than its period\. Enter a whole number, 1 to 12 steps\./,
    );
  });

  it("counts text that is no value as an issue of its field, and runs nothing", () => {
    const draft = { ...cleanDraft(base), typed: { "round.periodS": { text: "2o", problem: "\u201c2o\u201d is no number." } } };
    expect(judge(draft)).toMatchObject({ scenario: null, issues: [{ path: "round.periodS", rule: "\u201c2o\u201d is no number." }] });
  });

  it("says bounds of an angle in degrees when the upper one is below the lower", () => {
    const { issues } = judged([["limits", 0, "hi"], -Math.PI / 6], [["limits", 0, "lo"], Math.PI / 18]);
    expect(plain(issues[0].rule)).toBe("The highest value -30° is not above the lowest 10°.");
  });

  it("keeps the timing of a round that does not fit, and every saving that is enough makes it fit", () => {
    const { timing, scenario, issues } = judged([["round", "periodS"], 0.015]);
    expect(scenario).toBeNull();
    expect(issues.map(({ code }) => code)).toContain("round-does-not-fit");
    const json = setAt(base, ["round", "periodS"], 0.015);
    const enough = timing?.savings.filter(({ savesS }) => savesS >= -timing.reserveS - 1e-9) ?? [];
    expect(enough.length).toBeGreaterThan(0);
    for (const saving of enough) {
      const applied = applySaving(json, saving);
      expect(judge(cleanDraft(applied)).timing?.fits, saving.change).toBe(true);
    }
  });
});
