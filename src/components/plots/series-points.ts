/** Reading values out of recorded series, and thinning them for a picture. */

/** Index of the last point at or before `timeS`; 0 when there is none. */
export function indexAt(t: ArrayLike<number>, timeS: number): number {
  let low = 0;
  let high = t.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((t[middle] as number) <= timeS) low = middle;
    else high = middle - 1;
  }
  return low;
}

/** Index of the point nearest to `timeS`. */
export function nearestIndex(t: ArrayLike<number>, timeS: number): number {
  const at = indexAt(t, timeS);
  const next = t[at + 1];
  return next !== undefined && next - timeS < timeS - (t[at] as number) ? at + 1 : at;
}

/**
 * Value at an instant: straight between two points, or (stair) the last point's. A run may end between two points, so the last
 * value stands for one step more; NaN beyond that, where nothing was recorded.
 */
export function valueAt(t: ArrayLike<number>, values: ArrayLike<number>, timeS: number, stair = false): number {
  const step = t.length > 1 ? (t[1] as number) - (t[0] as number) : 0;
  if (t.length === 0 || timeS > (t[t.length - 1] as number) + step + 1e-9) return Number.NaN;
  const at = indexAt(t, timeS);
  const here = values[at] as number;
  const next = values[at + 1];
  if (stair || next === undefined) return here;
  const from = t[at] as number;
  const width = (t[at + 1] as number) - from;
  return width > 0 ? here + ((next - here) * Math.max(0, timeS - from)) / width : here;
}

export interface Extremes {
  min: number;
  max: number;
}

/** Of the finite values; null when there is none. */
export function extremes(values: ArrayLike<number>): Extremes | null {
  let min = Number.POSITIVE_INFINITY;
  let max = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < values.length; i++) {
    const value = values[i] as number;
    if (!Number.isFinite(value)) continue;
    if (value < min) min = value;
    if (value > max) max = value;
  }
  return min <= max ? { min, max } : null;
}

/** What a plot draws: a gap is null. */
export type Line = Float64Array | (number | null)[];

/**
 * The part of several lines that a picture of `columns` pixels shows from `fromS` to `untilS`, one point beyond on both sides.
 * With more than four points a pixel, each pixel keeps the lowest and the highest value of every line, in their order, so
 * that no peak is lost. Values that are not finite become gaps.
 */
export function thin(t: Float64Array, lines: readonly Float64Array[], fromS: number, untilS: number, columns: number): [Float64Array, ...Line[]] {
  const first = indexAt(t, fromS);
  const last = Math.min(t.length - 1, indexAt(t, untilS) + 1);
  const count = last - first + 1;
  if (columns < 1 || count <= columns * 4) {
    const gapless = (values: Float64Array): Line =>
      values.every(Number.isFinite) ? values : Array.from(values, (value) => (Number.isFinite(value) ? value : null));
    return [t.subarray(first, last + 1), ...lines.map((values) => gapless(values.subarray(first, last + 1)))];
  }
  const times = new Float64Array(columns * 2);
  for (let column = 0; column < columns; column++) {
    times[2 * column] = t[first + Math.floor((column * count) / columns)] as number;
    times[2 * column + 1] = t[first + Math.floor(((column + 1) * count) / columns) - 1] as number;
  }
  const thinned = lines.map((values): Line => {
    const kept: (number | null)[] = new Array(columns * 2).fill(null);
    for (let column = 0; column < columns; column++) {
      const end = first + Math.floor(((column + 1) * count) / columns);
      let min = Number.POSITIVE_INFINITY;
      let max = Number.NEGATIVE_INFINITY;
      let minAt = 0;
      let maxAt = 0;
      for (let i = first + Math.floor((column * count) / columns); i < end; i++) {
        const value = values[i] as number;
        if (value < min) {
          min = value;
          minAt = i;
        }
        if (value > max) {
          max = value;
          maxAt = i;
        }
      }
      if (!Number.isFinite(min) || !Number.isFinite(max)) continue;
      kept[2 * column] = minAt <= maxAt ? min : max;
      kept[2 * column + 1] = minAt <= maxAt ? max : min;
    }
    return kept;
  });
  return [times, ...thinned];
}
