/** The time axis as a strip of alternate inked pieces with labels on round numbers. */
import { withUnit } from "#src/lib/format.ts";
import { formatNumber, niceStep } from "./units.ts";

export interface NeatPiece {
  from: number;
  until: number;
}
export interface NeatScale {
  /** Inked pieces, in the axis' own unit (seconds, metres). */
  inked: NeatPiece[];
  labels: { at: number; text: string }[];
  step: number;
}

/**
 * Labels at multiples of 1, 2 or 5 times a power of ten, at least `leastLabel` apart; one piece is a half, a quarter or a fifth of a step.
 * `factor` turns the axis' unit into the shown one; a slightly longer step is taken when it divides `wholeOf`.
 */
export function neatScale(from: number, until: number, leastLabel: number, unit: string, factor = 1, wholeOf?: number): NeatScale {
  let step = niceStep(leastLabel * factor) / factor;
  const divides = (length: number) => wholeOf !== undefined && Math.abs(wholeOf / length - Math.round(wholeOf / length)) < 1e-6;
  if (wholeOf !== undefined && !divides(step)) {
    const next = niceStep(step * factor * 1.5) / factor;
    if (divides(next)) step = next;
  }
  const lead = Math.round((step * factor) / 10 ** Math.floor(Math.log10(step * factor) + 1e-9));
  const piece = step / (lead === 5 ? 5 : lead === 2 ? 4 : 2);
  const decimals = Math.max(0, Math.ceil(-Math.log10(step * factor) - 1e-9));
  const inked: NeatPiece[] = [];
  const firstPiece = Math.floor(from / piece + 1e-9);
  for (let k = firstPiece; k * piece < until - piece * 1e-6; k++) {
    if (k % 2 !== 0) continue;
    const begin = Math.max(from, k * piece);
    const end = Math.min(until, (k + 1) * piece);
    if (end > begin) inked.push({ from: begin, until: end });
  }
  const labels: NeatScale["labels"] = [];
  for (let k = Math.ceil(from / step - 1e-6); k * step <= until + step * 1e-6; k++) {
    labels.push({ at: k * step, text: k === 0 ? "0" : formatNumber(k * step * factor, decimals) });
  }
  const last = labels[labels.length - 1];
  if (last) last.text = withUnit(last.text, unit);
  return { inked, labels, step };
}

/** Seconds, or milliseconds for short views. */
export function timeScale(fromS: number, untilS: number, leastLabelS: number): NeatScale {
  const inMs = untilS < 0.1;
  return neatScale(fromS, untilS, leastLabelS, inMs ? "ms" : "s", inMs ? 1000 : 1);
}
