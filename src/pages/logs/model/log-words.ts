/** Numbers and times of logs as the screens say them. */
import { counted } from "#shared/reception/words.ts";
import { capital, fixed, significant, withUnit } from "#src/lib/format.ts";

export interface TimeScale {
  unit: string;
  /** Shown = seconds x factor. */
  factor: number;
}

/** Seconds, minutes or hours, by how long the whole is. */
export function scaleOf(seconds: number): TimeScale {
  if (seconds < 0.3) return { unit: "ms", factor: 1000 };
  if (seconds < 300) return { unit: "s", factor: 1 };
  return seconds < 3 * 3600 ? { unit: "min", factor: 1 / 60 } : { unit: "h", factor: 1 / 3600 };
}

/** A share of losses: "3.08 %", "0.041 %", "0 %". */
export const lossText = (ratio: number): string => withUnit(significant(ratio * 100), "%");

/** "2.9 to 3.5 %" */
export function rangeOfLoss(low: number, high: number): string {
  const digits = Math.max(0, Math.min(8, 2 - Math.floor(Math.log10(Math.max(high * 100, 1e-9)))));
  return `${fixed(low * 100, digits)} to ${withUnit(fixed(high * 100, digits), "%")}`;
}

export const packetsText = (count: number): string => counted(count, "packet");

/** "Line-west_2026-11.csv" as "Line west 2026-11" */
export const nameOfFile = (file: string): string =>
  capital(
    file
      .replace(/\.(csv|txt|tsv|log|dat)(\.gz)?$/i, "")
      .replace(/[_\s]+/g, " ")
      .trim()
      .slice(0, 120),
  ) || "Reception log";
