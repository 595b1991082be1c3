import { describe, expect, it } from "vitest";
import { decimalNumber, readInstant, wholeNumber, yesOrNo } from "#shared/reception/cells.ts";

describe("whole numbers", () => {
  it.each([
    ["0", 0],
    ["65535", 65_535],
    [" 42 ", 42],
    ["12.0", 12],
    ["12,00", 12],
    ["+7", 7],
  ])("reads %j", (cell, value) => expect(wholeNumber(cell)).toBe(value));
  it.each(["", " ", "-1", "1.5", "0x1f", "1e3", "n/a", "99999999999999999999"])("refuses %j", (cell) => expect(wholeNumber(cell)).toBeNaN());
});

describe("decimal numbers", () => {
  it("follow the file's decimal sign and take no other", () => {
    expect(decimalNumber("-71,5", ",")).toBe(-71.5);
    expect(decimalNumber("-71.5", ".")).toBe(-71.5);
    expect(decimalNumber("1.234,5", ",")).toBeNaN();
    expect(decimalNumber("71,5", ".")).toBeNaN();
    expect(decimalNumber("2.5e-3", ".")).toBe(0.0025);
    for (const cell of ["", "Infinity", "0x10", "1 2", "dBm"]) expect(decimalNumber(cell, ".")).toBeNaN();
  });
});

describe("times", () => {
  const read = (cell: string, unit: "s" | "ms" | "us" | "ns" | "iso", decimal: "." | "," = ".") => {
    const out = { seconds: Number.NaN, hour: 99 };
    return readInstant(cell, unit, decimal, out) ? out : null;
  };
  it("are seconds, whatever unit the file has", () => {
    expect(read("2.5", "s")).toEqual({ seconds: 2.5, hour: -1 });
    expect(read("2500", "ms")?.seconds).toBe(2.5);
    expect(read("2,5", "s", ",")?.seconds).toBe(2.5);
    expect(read("2500000", "us")?.seconds).toBe(2.5);
    expect(read("2500000000", "ns")?.seconds).toBe(2.5);
  });
  it.each([
    ["1970-01-01T00:00:00Z", 0],
    ["2026-03-11T05:58:40.020Z", Date.UTC(2026, 2, 11, 5, 58, 40) / 1000 + 0.02],
    ["2024-02-29 23:59:59", Date.UTC(2024, 1, 29, 23, 59, 59) / 1000],
    ["2100-03-01", Date.UTC(2100, 2, 1) / 1000],
    ["2026-07-01T12:00+02:00", Date.UTC(2026, 6, 1, 10) / 1000],
    ["2026-07-01T12:00:00,25-0330", Date.UTC(2026, 6, 1, 15, 30) / 1000 + 0.25],
  ])("reads the date %s as the calendar has it", (cell, seconds) => expect(read(cell, "iso")?.seconds).toBeCloseTo(seconds, 6));
  it("knows the hour of the day as it was written, or in UTC since 1970", () => {
    expect(read("2026-07-01T23:10:00+02:00", "iso")?.hour).toBe(23);
    expect(read(String(Date.UTC(2026, 2, 11, 5, 58) / 1000), "s")?.hour).toBe(5);
    expect(read("36000", "s")?.hour).toBe(-1);
  });
  it.each(["", "soon", "2026-13-01", "2026-03-11T25:00", "11.03.2026 05:58"])("refuses %j as a date", (cell) => expect(read(cell, "iso")).toBeNull());
});

it("takes the usual words for received and lost, and no others", () => {
  for (const cell of ["1", "true", "YES", " ok ", "Received"]) expect(yesOrNo(cell)).toBe(true);
  for (const cell of ["0", "False", "no", "lost", "LOST "]) expect(yesOrNo(cell)).toBe(false);
  for (const cell of ["", "2", "maybe", "-"]) expect(yesOrNo(cell)).toBeNull();
});
