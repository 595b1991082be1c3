import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  fieldText,
  MICROSECONDS,
  MILLIMETRES,
  MILLISECONDS,
  PERCENT,
  plainNumber,
  screenUnit,
  siUnit,
  stepped,
  toStored,
  valueText,
} from "#src/pages/scenario/model/screen-unit.ts";

const DEGREES = screenUnit("rad");
const UNITS = [DEGREES, screenUnit("rad/s"), MILLISECONDS, MICROSECONDS, MILLIMETRES, PERCENT, siUnit("kg")];

describe("units of the screen", () => {
  it("shows again exactly what was typed, in every unit", () => {
    const typed = fc
      .tuple(fc.integer({ min: -999_999, max: 999_999 }), fc.integer({ min: -4, max: 0 }))
      .map(([digits, power]) => Number(`${digits}e${power}`));
    fc.assert(
      fc.property(typed, fc.constantFrom(...UNITS), (value, unit) => {
        const stored = toStored(String(value), unit) as number;
        const shown = plainNumber(fieldText(stored, unit));
        expect(Number(shown)).toBe(value);
        expect(toStored(shown as string, unit)).toBe(stored);
      }),
    );
  });

  it("stores a decimal as the file would have it, not a product of it", () => {
    expect(toStored("2.3", MILLISECONDS)).toBe(0.0023);
    expect(toStored("11.2", PERCENT)).toBe(0.112);
    expect(toStored("200", MICROSECONDS)).toBe(0.0002);
    expect(toStored("1e-1", MILLIMETRES)).toBe(0.0001);
    expect(toStored("180", DEGREES)).toBe(Math.PI);
  });

  it("reads decimal commas and true minus signs, and refuses what is no number", () => {
    expect(toStored("\u22121,5", siUnit("m"))).toBe(-1.5);
    expect(toStored("+.5", siUnit("m"))).toBe(0.5);
    for (const text of ["", "-", "1.2.3", "0x10", "1e", "Infinity", "NaN", "12 kg", "1e999"]) expect(toStored(text, siUnit("m")), text).toBeNull();
  });

  it("rounds a stored value of many digits for the eye only", () => {
    expect(fieldText(0.2094, DEGREES)).toBe("11.9977");
    expect(fieldText(1 / 3, siUnit("m"))).toBe("0.333333");
  });

  it("puts a thin space before a unit and none before a degree", () => {
    expect(valueText(0.025, MILLISECONDS)).toBe("25\u2009\u2060ms");
    expect(valueText(Math.PI / 15, DEGREES)).toBe("12°");
    expect(valueText(-0.3, siUnit("m"))).toBe("\u22120.3\u2009\u2060m");
  });
});

describe("stepping by arrow keys", () => {
  const free = { integer: false, large: false, min: -1e9, max: 1e9 };
  it("moves the second digit, and whole numbers by one", () => {
    expect(stepped(1.2, siUnit("kg"), 1, free)).toBe(1.3);
    expect(stepped(0.025, MILLISECONDS, 1, free)).toBe(0.026);
    expect(stepped(0.05, PERCENT, -1, free)).toBe(0.049);
    expect(stepped(6, siUnit(""), 1, { ...free, integer: true })).toBe(7);
    expect(stepped(90, siUnit("kg"), 1, { ...free, large: true })).toBe(100);
  });

  it("comes back to where it was when stepped up and down", () => {
    const value = fc.integer({ min: 1, max: 99 }).chain((digits) => fc.integer({ min: -3, max: 4 }).map((power) => Number(`${digits}e${power}`)));
    fc.assert(
      fc.property(value, (from) => {
        expect(stepped(stepped(from, siUnit("N"), 1, free), siUnit("N"), -1, free)).toBe(from);
      }),
    );
  });

  it("stays within the range and gets off zero", () => {
    expect(stepped(12, siUnit(""), 1, { integer: true, large: false, min: 1, max: 12 })).toBe(12);
    expect(stepped(0, siUnit("kg"), -1, { ...free, min: 0, max: 10 })).toBe(0);
    expect(stepped(0, siUnit("kg"), 1, { ...free, min: 0, max: 10 })).toBe(0.1);
    expect(stepped(0.1, siUnit("m"), -1, free)).toBe(0.099);
  });
});

describe("a number typed with its unit", () => {
  it("means the same as without", () => {
    expect(toStored("1.2 kg", siUnit("kg"))).toBe(1.2);
    expect(toStored("25ms", MILLISECONDS)).toBe(0.025);
    expect(toStored("7,5 %", PERCENT)).toBe(0.075);
    expect(toStored("200 us", MICROSECONDS)).toBe(0.0002);
    expect(toStored("30 deg", screenUnit("rad"))).toBeCloseTo(Math.PI / 6, 12);
    expect(toStored("9.81 m/s^2", siUnit("m/s\u00b2"))).toBe(9.81);
    expect(toStored("2 N s/m", siUnit("N\u2009s/m"))).toBe(2);
  });
  it("is no number with another unit", () => {
    for (const text of ["1.2 g", "25 s", "5 kgg", "kg"]) expect(toStored(text, siUnit("kg"))).toBeNull();
    expect(toStored("25 s", MILLISECONDS)).toBeNull();
  });
});
