import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { parseJson } from "#shared/api/json.ts";

describe("parseJson", () => {
  it("reads every JSON value as JSON.parse does", () => {
    fc.assert(
      fc.property(fc.jsonValue(), (value) => {
        const text = JSON.stringify(value, null, 2);
        expect(parseJson(text)).toEqual({ ok: true, value: JSON.parse(text) });
      }),
    );
  });

  it("refuses exactly what JSON.parse refuses, at a place inside the text", () => {
    const text = fc
      .tuple(fc.jsonValue(), fc.nat(), fc.constantFrom("", ",", "}", "]", '"', "NaN", "0", ".", "\\", "\n", "x", ":"))
      .map(([value, at, put]) => {
        const json = JSON.stringify(value, null, 1);
        const cut = at % (json.length + 1);
        return json.slice(0, cut) + put + json.slice(cut + (at % 2));
      });
    fc.assert(
      fc.property(text, (broken) => {
        let valid = true;
        try {
          JSON.parse(broken);
        } catch {
          valid = false;
        }
        const parsed = parseJson(broken);
        expect(parsed.ok).toBe(valid);
        if (!parsed.ok) {
          expect(parsed.position.offset).toBeGreaterThanOrEqual(0);
          expect(parsed.position.offset).toBeLessThanOrEqual(broken.length);
        }
      }),
      { numRuns: 2_000 },
    );
  });

  it.each([
    ['{"a": NaN}', 1, 7, "NaN is not a number in JSON"],
    ['{"a": -Infinity}', 1, 7, "-Infinity is not a number in JSON"],
    ['{\n  "a": 1,\n}', 3, 1, "no comma before }"],
    ['{"a": 1 "b": 2}', 1, 9, "a comma or } is expected"],
    ["{'a': 1}", 1, 2, "a field name in double quotes"],
    ['{"a": 01}', 1, 7, "not how JSON writes a number"],
    ['{"a": "x', 1, 7, "this string is not closed"],
    ['{"a": undefined}', 1, 7, "undefined is not a value"],
    ["[1, 2", 1, 6, "the text ends here"],
    ["", 1, 1, "a value is expected"],
    ["{} {}", 1, 4, "nothing is expected after the value"],
  ])("says where and why %s is not JSON", (text, line, column, reason) => {
    const parsed = parseJson(text);
    expect(parsed).toMatchObject({ ok: false, position: { line, column } });
    expect(!parsed.ok && parsed.message).toContain(reason);
    expect(!parsed.ok && parsed.message).toContain(`line ${line}, column ${column}`);
  });

  it("refuses brackets nested deeper than anything could mean", () => {
    expect(parseJson("[".repeat(100_000) + "]".repeat(100_000))).toMatchObject({ ok: false, position: { offset: 501 } });
  });

  it("takes a text that starts with a byte order mark", () => {
    expect(parseJson("\ufeff[1]")).toEqual({ ok: true, value: [1] });
  });
});
