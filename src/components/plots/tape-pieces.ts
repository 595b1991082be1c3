/** Loss tape: what became of one message in every round, cut for a strip of pixels. */

/** How many losses in a row end with round k (0 = delivered), and how many were lost before round k. */
export interface LossRecord {
  streak: Uint32Array;
  /** Length count + 1. */
  lostBefore: Uint32Array;
}

export function lossRecord(delivered: Uint8Array, count = delivered.length): LossRecord {
  const streak = new Uint32Array(count);
  const lostBefore = new Uint32Array(count + 1);
  let inRow = 0;
  for (let k = 0; k < count; k++) {
    inRow = delivered[k] === 0 ? inRow + 1 : 0;
    streak[k] = inRow;
    lostBefore[k + 1] = (lostBefore[k] as number) + (inRow > 0 ? 1 : 0);
  }
  return { streak, lostBefore };
}

/** Depth of the cut of the first, second and every further loss in a row. */
export const CUT_DEPTHS = [0, 0.45, 0.72, 1] as const;
export const cutDepth = (streak: number): number => CUT_DEPTHS[Math.min(3, streak)] as number;

export interface TapePiece {
  x: number;
  untilX: number;
  /** 0 = whole. */
  depth: number;
  /** Share of delivered messages in what was cut away: more than 0 only where one pixel stands for several rounds. */
  deliveredShare: number;
  lost: number;
}

export interface TapeSpan {
  periodS: number;
  count: number;
  fromS: number;
  untilS: number;
  /** Pixels of fromS and untilS. */
  left: number;
  right: number;
  /** Width of one column where rounds are thinner than it. */
  pixel: number;
}

/**
 * Pieces from left to right. Delivered rounds in a row are one piece; a lost round is one piece. Where rounds are thinner than a pixel,
 * each pixel is cut as deep as the longest row of losses in it, so that a lost message always shows.
 */
export function tapePieces(record: LossRecord, span: TapeSpan): TapePiece[] {
  const { periodS, count, fromS, untilS, left, right, pixel } = span;
  const perSecond = (right - left) / (untilS - fromS);
  const first = Math.max(0, Math.floor(fromS / periodS + 1e-9));
  const end = Math.min(count, Math.ceil(untilS / periodS - 1e-9));
  const pieces: TapePiece[] = [];
  if (end <= first || !(perSecond > 0)) return pieces;
  const xOf = (round: number) => Math.min(right, Math.max(left, left + (round * periodS - fromS) * perSecond));
  const add = (from: number, until: number, depth: number, deliveredShare: number, lost: number) => {
    const last = pieces[pieces.length - 1];
    if (last && last.depth === depth && lost === 0 && last.lost === 0) last.untilX = xOf(until);
    else pieces.push({ x: xOf(from), untilX: xOf(until), depth, deliveredShare, lost });
  };
  if (periodS * perSecond >= pixel) {
    for (let k = first; k < end; k++) {
      const streak = record.streak[k] as number;
      add(k, k + 1, cutDepth(streak), 0, streak > 0 ? 1 : 0);
    }
    return pieces;
  }
  const columns = Math.max(1, Math.round((xOf(end) - xOf(first)) / pixel));
  for (let column = 0; column < columns; column++) {
    const from = first + Math.floor((column * (end - first)) / columns);
    const until = first + Math.floor(((column + 1) * (end - first)) / columns);
    const lost = (record.lostBefore[until] as number) - (record.lostBefore[from] as number);
    let longest = 0;
    if (lost > 0) for (let k = from; k < until; k++) longest = Math.max(longest, record.streak[k] as number);
    add(from, until, cutDepth(longest), lost > 0 ? 1 - lost / (until - from) : 0, lost);
  }
  return pieces;
}

/** Coral ticks below the tape, neighbours joined, each at least `least` wide. */
export function lossTicks(pieces: readonly TapePiece[], least: number): { x: number; width: number }[] {
  const ticks: { x: number; width: number }[] = [];
  for (const piece of pieces) {
    if (piece.lost === 0) continue;
    const last = ticks[ticks.length - 1];
    const width = Math.max(least, piece.untilX - piece.x - 0.4);
    if (last && piece.x - (last.x + last.width) < 0.5) last.width = Math.max(last.width, piece.x + width - last.x);
    else ticks.push({ x: piece.x, width });
  }
  return ticks;
}

/** Lost messages of the rounds that begin in the view. */
export function lostInView(record: LossRecord, periodS: number, fromS: number, untilS: number): number {
  const count = record.streak.length;
  const first = Math.min(count, Math.max(0, Math.floor(fromS / periodS + 1e-9)));
  const end = Math.min(count, Math.max(first, Math.ceil(untilS / periodS - 1e-9)));
  return (record.lostBefore[end] as number) - (record.lostBefore[first] as number);
}
