import { describe, expect, it } from "vitest";
import { nextName } from "#src/pages/scenarios/use-make-scenario.ts";

describe("the name of a scenario from a template", () => {
  it("is the template's, or the first number behind it that is free", () => {
    expect(nextName("Overhead crane", [])).toBe("Overhead crane");
    expect(nextName("Overhead crane", ["Overhead crane", "Pallet crane"])).toBe("Overhead crane 2");
    expect(nextName("Overhead crane", ["Overhead crane 3", "Overhead crane", "Overhead crane 2"])).toBe("Overhead crane 4");
  });
});
