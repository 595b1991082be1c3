import { describe, expect, it } from "vitest";
import { bytesText, counted, fixed, listed, msText, percentText, quantityText, significant, THIN, whenText, withUnit } from "#src/lib/format.ts";

describe("numbers", () => {
  it("keeps a number and its unit together with a thin space and a word joiner", () => {
    expect(withUnit("25", "ms")).toBe("25\u2009\u2060ms");
    expect(percentText(0.885)).toBe(`88.5${THIN}%`);
  });
  it("puts no space before a degree sign", () => {
    expect(withUnit("8.84", "°")).toBe("8.84°");
  });
  it("shows radians as degrees", () => {
    expect(quantityText(Math.PI / 15, "rad")).toBe("12°");
    expect(quantityText(-0.5, "rad/s")).toBe("\u221228.6°/s");
  });
  it("writes a true minus sign and never minus zero", () => {
    expect(fixed(-7.08, 2)).toBe("\u22127.08");
    expect(fixed(-0.004, 2)).toBe("0.00");
    expect(significant(-1e-7)).toBe("\u22121e\u22127");
  });
  it("keeps significant digits without trailing zeros", () => {
    expect(significant(0.30000000000000004)).toBe("0.3");
    expect(significant(123_456, 4)).toBe("123500");
    expect(significant(1_250_000)).toBe("1.25e6");
    expect(significant(1e9)).toBe("1e9");
  });
  it("says that there is none instead of a number that is not finite", () => {
    expect(significant(Number.NaN)).toBe("none");
    expect(fixed(Number.POSITIVE_INFINITY, 1)).toBe("none");
  });
  it("shows seconds as milliseconds without losing any of them", () => {
    expect(msText(0.025)).toBe(`25${THIN}ms`);
    expect(msText(0.0123456, 4)).toBe(`12.35${THIN}ms`);
    expect(msText(1.2)).toBe(`1200${THIN}ms`);
  });
  it("gives sizes as people say them", () => {
    expect(bytesText(83)).toBe(`83${THIN}B`);
    expect(bytesText(4200)).toBe(`4.2${THIN}kB`);
    expect(bytesText(7_234_567)).toBe(`7.2${THIN}MB`);
  });
});

describe("words", () => {
  it("counts one and many", () => {
    expect([counted(1, "scenario"), counted(11, "scenario")]).toEqual(["1 scenario", "11 scenarios"]);
  });
  it("lists with one conjunction", () => {
    expect(listed(["engineer"])).toBe("engineer");
    expect(listed(["engineer", "reviewer", "administrator"], "or")).toBe("engineer, reviewer or administrator");
  });
});

describe("times", () => {
  const now = new Date(2025, 11, 1, 15, 0);
  const at = (...parts: [number, number, number, number?, number?]) => new Date(...parts).toISOString();
  it("gives the clock for today, in the time zone of the browser", () => {
    expect(whenText(at(2025, 11, 1, 14, 32), now)).toBe("Today 14:32");
    expect(whenText(at(2025, 11, 1, 0, 5), now)).toBe("Today 00:05");
  });
  it("says yesterday by the calendar, not by 24 hours", () => {
    expect(whenText(at(2025, 10, 30, 23, 59), now)).toBe("Yesterday");
  });
  it("gives the day before that, and the year only when it is another", () => {
    expect(whenText(at(2025, 10, 28), now)).toBe("28 Nov");
    expect(whenText(at(2024, 11, 31), now)).toBe("31 Dec 2024");
  });
});
