/** What can be read off run lengths without writing the packets out: counts, streaks, autocorrelation, loss over time, pieces. */
import type { LinkTrace } from "./types.ts";

/** Run lengths: delivered, lost, delivered, ...; only the first may be 0. */
export type Runs = readonly number[];

export interface TraceCounts {
  packets: number;
  lost: number;
  /** Pairs of successive packets: n[from][to], 1 = lost. */
  n00: number;
  n01: number;
  n10: number;
  n11: number;
  /** Runs of either kind. */
  runs: number;
  lostStreaks: number;
  longestLost: number;
  longestDelivered: number;
}

export function countTrace(runs: Runs): TraceCounts {
  const counts = { packets: 0, lost: 0, n00: 0, n01: 0, n10: 0, n11: 0, runs: 0, lostStreaks: 0, longestLost: 0, longestDelivered: 0 };
  for (let i = 0; i < runs.length; i++) {
    const length = runs[i];
    if (length === 0) continue;
    const isLost = i % 2 === 1;
    counts.packets += length;
    counts.runs++;
    if (isLost) {
      counts.lost += length;
      counts.n11 += length - 1;
      counts.lostStreaks++;
      counts.longestLost = Math.max(counts.longestLost, length);
    } else {
      counts.n00 += length - 1;
      counts.longestDelivered = Math.max(counts.longestDelivered, length);
    }
    if (i + 1 < runs.length) counts[isLost ? "n10" : "n01"]++;
  }
  return counts;
}

export interface Autocorrelation {
  /** Entry k - 1: correlation of packets that lie k apart; empty where all or none were lost. */
  values: number[];
  /** Independent losses stay within ± this 95 times in 100: 1.96 / sqrt(n). */
  band: number;
}

/** Sample autocorrelation of the losses, mean and divisor of the whole series (Box and Jenkins 1976; NIST/SEMATECH 1.3.5.12). */
export function autocorrelation(runs: Runs, lags: number): Autocorrelation {
  const { packets: n, lost } = countTrace(runs);
  const most = Math.min(lags, n - 1);
  if (lost === 0 || lost === n || most < 1) return { values: [], band: n > 0 ? 1.96 / Math.sqrt(n) : 0 };
  // starts[j], ends[j]: the j-th streak of lost packets
  const starts: number[] = [];
  const ends: number[] = [];
  let at = 0;
  runs.forEach((length, i) => {
    if (i % 2 === 1) {
      starts.push(at);
      ends.push(at + length);
    }
    at += length;
  });
  const both = new Float64Array(most + 1);
  for (let a = 0; a < starts.length; a++) {
    const length = ends[a] - starts[a];
    for (let k = 1; k <= most && k < length; k++) both[k] += length - k;
    for (let b = a + 1; b < starts.length && starts[b] - ends[a] < most; b++) {
      const last = Math.min(most, ends[b] - 1 - starts[a]);
      for (let k = starts[b] - ends[a] + 1; k <= last; k++) both[k] += Math.min(ends[a], ends[b] - k) - Math.max(starts[a], starts[b] - k);
    }
  }
  const mean = lost / n;
  const lostBefore = lostBeforeEach(runs);
  const variance = n * mean * (1 - mean);
  const values = Array.from({ length: most }, (_, k) => {
    const lag = k + 1;
    const first = lostBefore(n - lag);
    const last = lost - lostBefore(lag);
    return (both[lag] - mean * (first + last) + (n - lag) * mean * mean) / variance;
  });
  return { values, band: 1.96 / Math.sqrt(n) };
}

/** How many of the first x packets were lost; quickest when asked in rising order. */
function lostBeforeEach(runs: Runs): (x: number) => number {
  let i = 0;
  let at = 0;
  let lost = 0;
  return (x) => {
    if (x < at) {
      i = 0;
      at = 0;
      lost = 0;
    }
    while (i < runs.length && at + runs[i] <= x) {
      if (i % 2 === 1) lost += runs[i];
      at += runs[i];
      i++;
    }
    return lost + (i % 2 === 1 && i < runs.length ? x - at : 0);
  };
}

export interface StreakCount {
  /** Packets lost in a row. */
  length: number;
  count: number;
}

/** How often each length of a lost streak occurs, shortest first. */
export function lostStreaks(runs: Runs): StreakCount[] {
  const counts = new Map<number, number>();
  for (let i = 1; i < runs.length; i += 2) counts.set(runs[i], (counts.get(runs[i]) ?? 0) + 1);
  return [...counts].map(([length, count]) => ({ length, count })).sort((a, b) => a.length - b.length);
}

export interface RollingLoss {
  /** Packets in the window. */
  window: number;
  /** Middle of the window: packets from the beginning, and seconds where the interval is known. */
  points: { packet: number; timeS: number | null; loss: number }[];
}

/** Loss ratio in a window that moves over the log, at so many places at most. */
export function rollingLoss(trace: Pick<LinkTrace, "runs" | "packets" | "intervalS">, { points = 400, window = 0 } = {}): RollingLoss {
  const { runs, packets: n, intervalS } = trace;
  const wide = Math.max(1, Math.min(n, window > 0 ? window : Math.max(50, Math.ceil((2 * n) / points))));
  const places = Math.max(1, Math.min(points, n - wide + 1));
  const upTo = lostBeforeEach(runs);
  const from = lostBeforeEach(runs);
  return {
    window: wide,
    points: Array.from({ length: n > 0 ? places : 0 }, (_, k) => {
      const start = places > 1 ? Math.round((k * (n - wide)) / (places - 1)) : 0;
      const packet = start + wide / 2;
      return { packet, timeS: intervalS === null ? null : packet * intervalS, loss: (upTo(start + wide) - from(start)) / wide };
    }),
  };
}

/** The packets from `from` on, at most `count` of them, every `every`-th one. */
export function piece(runs: Runs, from: number, count: number, every = 1): number[] {
  const out = [0];
  let at = 0;
  let next = from;
  let left = count;
  for (let i = 0; i < runs.length && left > 0; i++) {
    const end = at + runs[i];
    const taken = next < end ? Math.min(left, Math.ceil((end - next) / every)) : 0;
    if (taken > 0) {
      const isLost = i % 2 === 1;
      if ((out.length % 2 === 0) === isLost) out[out.length - 1] += taken;
      else out.push(taken);
      next += taken * every;
      left -= taken;
    }
    at = end;
  }
  return out;
}
