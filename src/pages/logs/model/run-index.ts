/**
 * A link's record as run lengths (delivered, lost, delivered, ...), indexed so that any stretch of it is counted without
 * going through its packets: a long log has millions of them, and few runs.
 */
export interface RunIndex {
  runs: readonly number[];
  /** Packet at which run i begins; one more entry for the end. */
  starts: Float64Array;
  /** Packets lost before run i. */
  lostBefore: Float64Array;
  packets: number;
  lost: number;
}

const isLost = (run: number): boolean => run % 2 === 1;

export function indexRuns(runs: readonly number[]): RunIndex {
  const starts = new Float64Array(runs.length + 1);
  const lostBefore = new Float64Array(runs.length + 1);
  for (const [i, length] of runs.entries()) {
    starts[i + 1] = (starts[i] as number) + length;
    lostBefore[i + 1] = (lostBefore[i] as number) + (isLost(i) ? length : 0);
  }
  return { runs, starts, lostBefore, packets: starts[runs.length] as number, lost: lostBefore[runs.length] as number };
}

/** The run that holds the packet; the last one beyond the end. */
export function runAt({ starts, runs }: RunIndex, packet: number): number {
  let low = 0;
  let high = runs.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((starts[middle] as number) <= packet) low = middle;
    else high = middle - 1;
  }
  return low;
}

/** Packets lost before the given one. */
export function lostBefore(index: RunIndex, packet: number): number {
  if (packet <= 0 || index.runs.length === 0) return 0;
  if (packet >= index.packets) return index.lost;
  const run = runAt(index, packet);
  return (index.lostBefore[run] as number) + (isLost(run) ? packet - (index.starts[run] as number) : 0);
}

export const lostBetween = (index: RunIndex, from: number, until: number): number => lostBefore(index, until) - lostBefore(index, from);

/** Longest row of losses that ends, or is under way, in a stretch; counted from where it began, also before the stretch. */
export function longestLossIn(index: RunIndex, from: number, until: number): number {
  let longest = 0;
  for (let run = runAt(index, from); run < index.runs.length && (index.starts[run] as number) < until; run++) {
    if (isLost(run)) longest = Math.max(longest, Math.min(until, index.starts[run + 1] as number) - (index.starts[run] as number));
  }
  return longest;
}

export interface Burst {
  /** Packet at which it begins. */
  from: number;
  length: number;
}

/** The longest row of losses of the whole record; the first of equals. */
export function longestBurst({ runs, starts }: RunIndex): Burst | null {
  let at = -1;
  for (let run = 1; run < runs.length; run += 2) if (at < 0 || (runs[run] as number) > (runs[at] as number)) at = run;
  return at < 0 ? null : { from: starts[at] as number, length: runs[at] as number };
}

/** The next row of losses that begins after the packet, or the last one that begins before it. */
export function burstFrom(index: RunIndex, packet: number, direction: 1 | -1): Burst | null {
  const { runs, starts } = index;
  if (runs.length < 2) return null;
  let run = runAt(index, packet);
  if (!isLost(run)) run += direction;
  else if (direction === 1 || (starts[run] as number) >= packet) run += 2 * direction;
  return run < 1 || run >= runs.length ? null : { from: starts[run] as number, length: runs[run] as number };
}
