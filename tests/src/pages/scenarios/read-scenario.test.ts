import { describe, expect, it } from "vitest";
import { MAX_SCENARIO_BYTES } from "#shared/api/errors.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { readScenario } from "#src/pages/scenarios/read-scenario.ts";

const template = () => structuredClone(TEMPLATES[0]?.scenario) as NonNullable<(typeof TEMPLATES)[0]>["scenario"];

describe("reading a scenario", () => {
  it("takes every template as it is exported", () => {
    for (const { scenario } of TEMPLATES) {
      expect(readScenario(JSON.stringify(scenario, null, 2))).toEqual({ kind: "ready", scenario, toPutRight: [] });
    }
  });
  it("takes a file that begins with a byte order mark", () => {
    expect(readScenario(`\uFEFF${JSON.stringify(template())}`).kind).toBe("ready");
  });
  it("says line and column of broken JSON, and shows the line", () => {
    const reading = readScenario('{\n  "format": "holdfast-scenario",\n  "name": oops\n}');
    expect(reading).toMatchObject({ kind: "not-json", line: '  "name": oops' });
    expect(reading.kind === "not-json" && reading.message).toMatch(/line 3, column 11/);
  });
  it("refuses NaN, which JSON does not know", () => {
    const reading = readScenario('{ "run": { "durationS": NaN } }');
    expect(reading.kind === "not-json" && reading.message).toMatch(/NaN is not a number in JSON/);
  });
  it("names field, value and permitted range of everything that is wrong", () => {
    const bad = template() as unknown as { loops: { plant: Record<string, unknown> }[]; round: Record<string, unknown> };
    if (bad.loops[0]) bad.loops[0].plant.cartMassKg = -1;
    bad.round.periodS = 0;
    bad.round.perod = 0.02;
    const reading = readScenario(JSON.stringify(bad));
    expect(reading.kind).toBe("invalid");
    const issues = reading.kind === "invalid" ? reading.issues : [];
    expect(issues.map(({ path }) => path).sort()).toEqual(["loops[0].plant.cartMassKg", "round.periodS", "round.perod"]);
    expect(issues.find(({ path }) => path === "round.periodS")?.message).toMatch(/0 s; permitted 0\.001 to 10 s/);
  });
  it("takes a scenario whose round does not fit, and says what would help", () => {
    const tight = template();
    tight.round.periodS = 0.005;
    const reading = readScenario(JSON.stringify(tight));
    expect(reading.kind).toBe("ready");
    const unfit = reading.kind === "ready" ? reading.toPutRight.find(({ code }) => code === "round-does-not-fit") : undefined;
    expect(unfit?.message).toMatch(/does not fit/);
    expect(unfit?.help?.length).toBeGreaterThan(0);
  });
  it("refuses a text above the largest size without parsing it", () => {
    expect(readScenario(`"${"x".repeat(MAX_SCENARIO_BYTES)}"`)).toEqual({ kind: "too-large", bytes: MAX_SCENARIO_BYTES + 2 });
  });
});
