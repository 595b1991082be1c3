/** The loss tape of a whole log or of a stretch of it: the pieces of src/components/plots/tape-pieces.ts, made from run lengths. */
import { cutDepth, type TapePiece } from "#src/components/plots/tape-pieces.ts";
import { longestLossIn, lostBetween, type RunIndex, runAt } from "./run-index.ts";

export interface TapeStretch {
  fromPacket: number;
  untilPacket: number;
  /** Pixels of both. */
  left: number;
  right: number;
  /** Width of one column where packets are thinner than it. */
  pixel: number;
}

export function logTape(index: RunIndex, { fromPacket, untilPacket, left, right, pixel }: TapeStretch): TapePiece[] {
  const from = Math.max(0, Math.floor(fromPacket));
  const until = Math.min(index.packets, Math.ceil(untilPacket));
  const perPacket = (right - left) / (untilPacket - fromPacket);
  const pieces: TapePiece[] = [];
  if (until <= from || !(perPacket > 0)) return pieces;
  const xOf = (packet: number) => Math.min(right, Math.max(left, left + (packet - fromPacket) * perPacket));
  const add = (first: number, end: number, depth: number, deliveredShare: number, lost: number) => {
    const last = pieces[pieces.length - 1];
    if (last && lost === 0 && last.lost === 0) last.untilX = xOf(end);
    else pieces.push({ x: xOf(first), untilX: xOf(end), depth, deliveredShare, lost });
  };
  if (perPacket >= pixel) {
    for (let run = runAt(index, from); run < index.runs.length && (index.starts[run] as number) < until; run++) {
      const begin = index.starts[run] as number;
      const end = index.starts[run + 1] as number;
      if (run % 2 === 0) {
        if (end > begin) add(Math.max(from, begin), Math.min(until, end), 0, 0, 0);
      } else
        for (let packet = Math.max(from, begin); packet < Math.min(until, end); packet++) add(packet, packet + 1, cutDepth(packet - begin + 1), 0, 1);
    }
    return pieces;
  }
  const columns = Math.max(1, Math.round((xOf(until) - xOf(from)) / pixel));
  for (let column = 0; column < columns; column++) {
    const first = from + Math.floor((column * (until - from)) / columns);
    const end = from + Math.floor(((column + 1) * (until - from)) / columns);
    const lost = lostBetween(index, first, end);
    add(first, end, lost > 0 ? cutDepth(longestLossIn(index, first, end)) : 0, lost > 0 ? 1 - lost / (end - first) : 0, lost);
  }
  return pieces;
}

const f = (value: number): string => String(Math.round(value * 100) / 100);

/** Shares of what was cut away that did arrive, in three tints. */
export const TINTS = [0.15, 0.3, 0.45] as const;

export interface TapePaths {
  /** What is left of the tape. */
  whole: string;
  /** What was cut away but partly arrived, by tint. */
  tints: readonly string[];
}

/** The pieces as paths of a picture, the tape's upper edge at 0. */
export function tapePaths(pieces: readonly TapePiece[], height: number): TapePaths {
  const box = (x: number, y: number, untilX: number, untilY: number) => `M${f(x)} ${f(y)}H${f(untilX)}V${f(untilY)}H${f(x)}Z`;
  const tints = TINTS.map(() => "");
  let whole = "";
  for (const { x, untilX, depth, deliveredShare } of pieces) {
    const cut = depth * height;
    if (cut < height) whole += box(x, cut, untilX, height);
    if (cut > 0 && deliveredShare > 0) {
      const tint = Math.min(TINTS.length - 1, Math.floor(deliveredShare * TINTS.length));
      tints[tint] += box(x, 0, untilX, cut);
    }
  }
  return { whole, tints };
}
