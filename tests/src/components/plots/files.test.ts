import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { lightPalette } from "#src/components/plots/palette.ts";

describe("the colours of files", () => {
  it("are all in the tokens, and are the light ones", () => {
    const palette = lightPalette(readFileSync("src/styles/tokens.css", "utf8"));
    expect(palette.panel.toLowerCase()).toBe("#ffffff");
    expect(palette.ink.toLowerCase()).toBe("#12303a");
    expect(Object.values(palette).every((value) => value.length > 0)).toBe(true);
  });
});
