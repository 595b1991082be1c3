/** What a table of logs says of one without opening it: the pace of its packets, and what the tests say link by link. */
import { type IndependenceVerdict, testIndependence } from "./independence.ts";
import type { LinkTrace } from "./types.ts";

export interface LogSummary {
  /** Median over the links whose interval is known; null: of none. */
  intervalS: number | null;
  /** How many links have each verdict. */
  verdicts: Partial<Record<IndependenceVerdict, number>>;
}

export function summariseLog(links: readonly LinkTrace[]): LogSummary {
  const intervals = links.flatMap(({ intervalS }) => (intervalS === null ? [] : [intervalS])).sort((a, b) => a - b);
  const verdicts: LogSummary["verdicts"] = {};
  for (const link of links) {
    const { verdict } = testIndependence(link);
    verdicts[verdict] = (verdicts[verdict] ?? 0) + 1;
  }
  return { intervalS: intervals[intervals.length >> 1] ?? null, verdicts };
}
