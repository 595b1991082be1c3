/** Counts and durations as people read them, for the sentences and messages of reception logs. */
import { significant, THIN, withUnit } from "#shared/scenario/show.ts";

/** 2995 as "2 995", with thin spaces. */
export const countText = (value: number): string => String(Math.round(value)).replace(/\B(?=(\d{3})+$)/g, THIN);

/** "1 packet", "2 995 packets" */
export const counted = (value: number, one: string, many = `${one}s`): string => `${countText(value)} ${Math.round(value) === 1 ? one : many}`;

/** "20 ms", "59.9 s", "3.2 min", "1 h", "2.1 days", in at most three digits. */
export function durationText(valueS: number): string {
  const size = Math.abs(valueS);
  if (size === 0) return withUnit("0", "s");
  if (size < 1e-3) return withUnit(significant(valueS * 1e6), "µs");
  if (size < 1) return withUnit(significant(valueS * 1e3), "ms");
  if (size < 120) return withUnit(significant(valueS), "s");
  if (size < 3600) return withUnit(significant(valueS / 60), "min");
  return size < 172_800 ? withUnit(significant(valueS / 3600), "h") : withUnit(significant(valueS / 86_400), "days");
}

/** A share in percent, three digits; near 100 % with two digits of what is missing: "99.95 %". */
export function shareText(share: number): string {
  const missing = (1 - share) * 100;
  if (missing > 10 || missing <= 0) return withUnit(significant(share * 100), "%");
  return withUnit(String(Number((share * 100).toFixed(decimalsFor(missing)))), "%");
}

/** A lower limit, rounded down: 2 900 packets without a loss show 99.89 %, not 99.9 %. */
export function atLeastText(share: number): string {
  const scale = Number(`1e${decimalsFor((1 - share) * 100)}`);
  return withUnit(String(Math.floor(share * 100 * scale + 1e-6) / scale), "%");
}

/** So many that two digits of what is missing to 100 % are seen. */
function decimalsFor(missing: number): number {
  let decimals = 0;
  for (let rest = missing; rest < 9.95 && decimals < 9; decimals++) rest *= 10;
  return decimals;
}
