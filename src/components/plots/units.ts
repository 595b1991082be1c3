/** How the pictures write their figures. */
import { fixed, significant, withUnit } from "#src/lib/format.ts";

/** So many decimals; from ten million on as a power of ten, so that a diverged run cannot burst a picture. */
export const formatNumber = (value: number, decimals: number): string =>
  Math.abs(value) >= 1e7 ? significant(value, 3) : fixed(value, Math.max(0, Math.min(12, decimals)));

/** For ticks: "0.3", "−12", "8.59"; a round number stays what it is. */
export const formatTick = (value: number): string => significant(value, Math.abs(value) >= 1000 || Number.isInteger(value) ? 6 : 3);

/** Decimals with which a value is told beside a plot that reaches up to `extent`: four figures, give or take one. */
export function decimalsFor(extent: number): number {
  if (!(extent > 0) || !Number.isFinite(extent)) return 2;
  return Math.max(0, Math.min(9, 3 - Math.round(Math.log10(extent))));
}

/** Decimals of an instant, s: enough to tell one recorded point from the next. */
export function timeDecimals(stepS: number): number {
  if (!(stepS > 0)) return 3;
  return Math.max(2, Math.min(6, Math.ceil(-Math.log10(stepS) - 1e-9)));
}

export const formatTime = (timeS: number, decimals: number): string => withUnit(fixed(timeS, decimals), "s");

/** 1, 2 or 5 times a power of ten, at least `least`. */
export function niceStep(least: number): number {
  if (!(least > 0) || !Number.isFinite(least)) return 1;
  const power = 10 ** Math.floor(Math.log10(least) + 1e-9);
  const lead = least / power;
  const step = lead <= 1.0000001 ? 1 : lead <= 2.0000001 ? 2 : lead <= 5.0000001 ? 5 : 10;
  return Number((step * power).toPrecision(12));
}
