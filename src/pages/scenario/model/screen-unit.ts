/**
 * What the screen shows instead of SI units, and back. Decimal units (ms, mm, %) shift the decimal point of the text, so
 * that "2.3 ms" is stored as exactly 0.0023; degrees go through pi.
 */
import { withUnit } from "#src/lib/format.ts";

export interface ScreenUnit {
  /** "" when there is none. */
  text: string;
  /** Powers of ten between screen and SI: 3 for ms. */
  shift: number;
  degrees?: boolean;
}

export const siUnit = (text: string): ScreenUnit => ({ text, shift: 0 });
export const MILLISECONDS: ScreenUnit = { text: "ms", shift: 3 };
export const MICROSECONDS: ScreenUnit = { text: "µs", shift: 6 };
export const MILLIMETRES: ScreenUnit = { text: "mm", shift: 3 };
export const PERCENT: ScreenUnit = { text: "%", shift: 2 };
const RAD_PER_DEGREE = Math.PI / 180;

/** Angles in degrees; everything else as it is. */
export function screenUnit(si: string): ScreenUnit {
  if (si === "rad") return { text: "°", shift: 0, degrees: true };
  if (si === "rad/s") return { text: "°/s", shift: 0, degrees: true };
  return siUnit(si);
}

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

/** A number as people type it: decimal point or comma, true minus, spaces around; null when it is none. */
export function plainNumber(text: string): string | null {
  const plain = text
    .trim()
    .replace(/[\u2212\u2013]/g, "-")
    .replace(/^([+-]?[\d]*),(\d+(?:e[+-]?\d+)?)$/i, "$1.$2")
    .replace(/×10\^?/, "e");
  return NUMBER.test(plain) && Number.isFinite(Number(plain)) ? plain : null;
}

const shifted = (decimal: string, by: number): number => {
  if (by === 0) return Number(decimal);
  const [mantissa, exponent = "0"] = decimal.toLowerCase().split("e");
  return Number(`${mantissa}e${Number(exponent) + by}`);
};

const bare = (text: string): string =>
  text
    .replace(/[\s\u2009\u2060\u00b7*]/g, "")
    .replace(/\u03bc/g, "\u00b5")
    .replace(/\^?2$/, "\u00b2")
    .replace(/^deg(rees?)?/i, "\u00b0")
    .toLowerCase();

/** "1.2 kg" as "1.2" where kg is the field's unit; other texts as they are. */
export function withoutUnit(text: string, unit: ScreenUnit): string {
  const split = /^\s*([+\-\u2212\u2013]?[\d.,]+(?:e[+-]?\d+)?)\s*(\D.*)$/i.exec(text);
  if (!split?.[1] || !split[2] || unit.text === "") return text;
  const typed = bare(split[2]);
  return typed === bare(unit.text) || (unit.text.startsWith("\u00b5") && typed === bare(unit.text.replace("\u00b5", "u"))) ? split[1] : text;
}

/** Stored value of a typed number, alone or with the field's unit behind it; null when the text is no number. */
export function toStored(text: string, unit: ScreenUnit): number | null {
  const plain = plainNumber(text) ?? plainNumber(withoutUnit(text, unit));
  if (plain === null) return null;
  return unit.degrees ? Number(plain) * RAD_PER_DEGREE : shifted(plain, -unit.shift);
}

export const toScreen = (value: number, unit: ScreenUnit): number => (unit.degrees ? value / RAD_PER_DEGREE : shifted(String(value), unit.shift));

/** A number without padding, with a true minus; large and small ones with a power of ten. */
export function numberText(value: number): string {
  const size = Math.abs(value);
  const text = size !== 0 && (size >= 1e6 || size < 1e-4) ? value.toExponential().replace("e+", "e") : String(value);
  return text.replaceAll("-", "\u2212");
}

const MOST_DIGITS = 7;

/** What a field shows: the shortest number that means exactly the stored value; rounded when that has many digits. */
export function fieldText(value: number, unit: ScreenUnit): string {
  const screen = toScreen(value, unit);
  for (let digits = 1; digits <= MOST_DIGITS; digits++) {
    const text = String(Number(screen.toPrecision(digits)));
    if (toStored(text, unit) === value) return numberText(Number(text));
  }
  return numberText(Number(screen.toPrecision(MOST_DIGITS - 1)));
}

export const valueText = (value: number, unit: ScreenUnit): string => withUnit(fieldText(value, unit), unit.text);

/**
 * One step of the arrow keys: a unit of the second leading digit, so that a step is 1 to 10 % of the value; whole numbers
 * by 1. Large: ten of them.
 */
export function stepped(
  value: number,
  unit: ScreenUnit,
  direction: 1 | -1,
  options: { integer: boolean; large: boolean; min: number; max: number },
): number {
  const times = options.large ? 10 : 1;
  if (options.integer) return Math.min(options.max, Math.max(options.min, Math.round(value) + direction * times));
  const screen = toScreen(value, unit);
  const size = Math.abs(screen);
  // Towards zero from exactly 1, 10, ...: the finer step, so that up and down are each other's reverse.
  const magnitude = size === 0 ? firstMagnitude(options, unit) : Math.floor(Math.log10(size) + (direction * Math.sign(screen) < 0 ? -1e-9 : 1e-9));
  const step = 10 ** (magnitude - 1) * times;
  const next = Number((screen + direction * step).toPrecision(12));
  const stored = toStored(String(Math.abs(next) < step * 1e-6 ? 0 : next), unit) ?? value;
  return Math.min(options.max, Math.max(options.min, stored));
}

/** From zero: one hundredth of the range, in whole powers of ten, at most 1. */
function firstMagnitude({ min, max }: { min: number; max: number }, unit: ScreenUnit): number {
  const span = Math.abs(toScreen(max - min, unit));
  return Math.min(1, Math.floor(Math.log10(span)) - 1);
}
