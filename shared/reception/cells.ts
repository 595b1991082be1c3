/** What stands in a cell: whole numbers, decimals, times, received or lost. Never throws; NaN or null says that it cannot be read. */

/** A whole number from 0 on; NaN for anything else. Also 12.0, which spreadsheets like to write. */
export function wholeNumber(cell: string): number {
  let value = 0;
  let at = 0;
  const { length } = cell;
  if (length === 0 || length > 16) return slowWhole(cell);
  for (; at < length; at++) {
    const digit = cell.charCodeAt(at) - 48;
    if (digit < 0 || digit > 9) return slowWhole(cell);
    value = value * 10 + digit;
  }
  return value <= Number.MAX_SAFE_INTEGER ? value : Number.NaN;
}

function slowWhole(cell: string): number {
  const match = /^\s*\+?(\d{1,16})(?:[.,]0+)?\s*$/.exec(cell);
  const value = match ? Number(match[1]) : Number.NaN;
  return value <= Number.MAX_SAFE_INTEGER ? value : Number.NaN;
}

/** A decimal number with the file's decimal sign; NaN for anything else. */
export function decimalNumber(cell: string, decimal: "." | ","): number {
  const text = cell.trim();
  if (text === "") return Number.NaN;
  if (decimal === ",") return text.includes(".") ? Number.NaN : plain(text.replace(",", "."));
  return plain(text);
}

/** Number() also takes "0x1f" and "Infinity": letters other than an exponent's are refused. */
function plain(text: string): number {
  for (let at = 0; at < text.length; at++) {
    const code = text.charCodeAt(at);
    // + - . 0 to 9 E e
    if (!((code >= 48 && code <= 57) || code === 46 || code === 45 || code === 43 || code === 101 || code === 69)) return Number.NaN;
  }
  return Number(text);
}

export interface Instant {
  /** Seconds; since 1970 for a date. */
  seconds: number;
  /** 0 to 23 as written; -1 where the time is not a time of the day. */
  hour: number;
}

const PER_SECOND = { s: 1, ms: 1e3, us: 1e6, ns: 1e9 } as const;
/** Seconds since 1970 from here on (September 2001), else a stopwatch. */
const EPOCH_FROM_S = 1e9;
/** Some thirty thousand years; a larger figure is no time. */
const LATEST_S = 1e12;
const DAY_S = 86_400;

const ISO = /^\s*(\d{4})-(\d\d)-(\d\d)(?:[T ](\d\d):(\d\d)(?::(\d\d)(?:[.,](\d{1,12}))?)?\s*(Z|[-+]\d\d:?\d\d)?)?\s*$/i;

/** Writes into `out`; false when the cell is no time. A date without a zone counts as UTC. */
export function readInstant(cell: string, unit: keyof typeof PER_SECOND | "iso", decimal: "." | ",", out: Instant): boolean {
  if (unit !== "iso") {
    const value = decimalNumber(cell, decimal) / PER_SECOND[unit];
    if (!(Math.abs(value) <= LATEST_S)) return false;
    out.seconds = value;
    out.hour = value >= EPOCH_FROM_S ? Math.floor((value % DAY_S) / 3600) : -1;
    return true;
  }
  const match = ISO.exec(cell);
  if (!match) return false;
  const [, year, month, day, hour = "0", minute = "0", second = "0", fraction = "", zone = "Z"] = match;
  if (Number(month) < 1 || Number(month) > 12 || Number(day) < 1 || Number(day) > 31 || Number(hour) > 23 || Number(minute) > 59) return false;
  const offset = zone.length < 5 ? 0 : (zone[0] === "-" ? -1 : 1) * (Number(zone.slice(1, 3)) * 3600 + Number(zone.slice(-2)) * 60);
  out.seconds =
    daysSince1970(Number(year), Number(month), Number(day)) * DAY_S +
    Number(hour) * 3600 +
    Number(minute) * 60 +
    Number(`${second}.${fraction || "0"}`) -
    offset;
  out.hour = Number(hour);
  return true;
}

/** Days of the Gregorian calendar, counted in years that begin in March so that the leap day comes last. */
function daysSince1970(year: number, month: number, day: number): number {
  const y = month > 2 ? year : year - 1;
  const era = Math.floor(y / 400);
  const yearOfEra = y - era * 400;
  const dayOfYear = Math.floor((153 * (month > 2 ? month - 3 : month + 9) + 2) / 5) + day - 1;
  return era * 146_097 + yearOfEra * 365 + Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100) + dayOfYear - 719_468;
}

const YES = new Set(["1", "true", "t", "yes", "y", "ok", "received", "delivered", "success", "rx", "pass"]);
const NO = new Set(["0", "false", "f", "no", "n", "lost", "missed", "missing", "timeout", "fail", "failed", "error", "dropped"]);
export const RECEIVED_WORDS = "1/0, true/false, yes/no, ok/lost, received/lost";

/** true, false, or null when the cell says neither. */
export function yesOrNo(cell: string): boolean | null {
  if (cell === "1") return true;
  if (cell === "0") return false;
  const word = cell.trim().toLowerCase();
  return YES.has(word) ? true : NO.has(word) ? false : null;
}

/** Words that say themselves what became of the packet, whatever the column is called. */
const PLAIN_WORDS = new Set([
  "ok",
  "received",
  "delivered",
  "success",
  "rx",
  "pass",
  "lost",
  "missed",
  "missing",
  "timeout",
  "fail",
  "failed",
  "error",
  "dropped",
]);
export const saysItself = (cell: string): boolean => PLAIN_WORDS.has(cell.trim().toLowerCase());
