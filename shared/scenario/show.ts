/** Numbers with their units, as people read them; used by sentences that page, server and command line share. */

/** Thin space and word joiner: number and unit stay together. */
export const THIN = "\u2009\u2060";

/** A hyphen becomes a minus; "-0.0" loses it. */
export const trueMinus = (text: string): string => (/[1-9]/.test(text) ? text : text.replace("-", "")).replaceAll("-", "\u2212");

/** So many significant digits, without trailing zeros; powers of ten below 1e-4 and from 1e6 on. */
export function significant(value: number, digits = 3): string {
  if (!Number.isFinite(value)) return "none";
  const size = Math.abs(value);
  if (size !== 0 && (size >= 1e6 || size < 1e-4)) {
    const [mantissa = "0", exponent = "0"] = value.toExponential(digits - 1).split("e");
    return trueMinus(`${mantissa.includes(".") ? mantissa.replace(/\.?0+$/, "") : mantissa}e${Number(exponent)}`);
  }
  return trueMinus(String(Number(value.toPrecision(digits))));
}

export interface Shown {
  unit: string;
  /** Shown value = stored value x factor. */
  factor: number;
}

/** Radians become degrees; lengths below 0.1 m become mm when `size` says how large the value is. */
export function shownUnit(unit: string, size = Number.POSITIVE_INFINITY): Shown {
  if (unit === "rad" || unit.startsWith("rad/")) return { unit: `°${unit.slice(3)}`, factor: 180 / Math.PI };
  if (unit === "m" && Math.abs(size) < 0.1) return { unit: "mm", factor: 1000 };
  return { unit, factor: 1 };
}

/** "0.188" + "m"; no space before a degree sign. */
export const withUnit = (number: string, unit: string): string =>
  unit === "" ? number : unit.startsWith("°") ? `${number}${unit}` : `${number}${THIN}${unit}`;

/** Stored value with the unit that people read. */
export function quantityText(value: number, unit: string, digits = 3): string {
  const shown = shownUnit(unit);
  return withUnit(significant(value * shown.factor, digits), shown.unit);
}

/** "±12°", "±30 mm" */
export function plusMinusText(value: number, unit: string): string {
  const shown = shownUnit(unit, value);
  return `±${withUnit(significant(value * shown.factor, 3), shown.unit)}`;
}

export const percentText = (share: number): string => withUnit(significant(share * 100, share < 0.1 ? 2 : 3), "%");
