/** What the tests of independence say, as mark and words. */
import type { LogItem } from "#shared/api/logs.ts";
import type { IndependenceVerdict } from "#shared/reception/independence.ts";
import type { MarkState } from "#src/components/ui/mark.tsx";

/** Independence is an assumption: kept, crossed, or not decided. */
export const VERDICT_MARKS: Record<IndependenceVerdict, MarkState> = {
  "nothing-lost": "not-decided",
  "all-lost": "not-decided",
  "too-few": "not-decided",
  independent: "holds",
  bursts: "crosses",
  apart: "crosses",
  rhythm: "crosses",
};

const SHORT: Record<IndependenceVerdict, string> = {
  bursts: "in bursts",
  apart: "keep apart",
  rhythm: "in a rhythm",
  "all-lost": "all lost",
  "too-few": "too few to tell",
  independent: "no sign of dependence",
  "nothing-lost": "none lost",
};
/** What is worth most attention comes first. */
const ORDER = Object.keys(SHORT) as IndependenceVerdict[];

/** The verdict that matters most of a log's links, and on how many of them: "in bursts on 2 of 6 links". */
export function shortVerdict({ verdicts, links }: Pick<LogItem, "verdicts" | "links">): { state: MarkState; words: string } | null {
  const verdict = ORDER.find((one) => verdicts?.[one]);
  const count = verdict && verdicts?.[verdict];
  if (!verdict || !count) return null;
  return { state: VERDICT_MARKS[verdict], words: count === links ? SHORT[verdict] : `${SHORT[verdict]} on ${count} of ${links} links` };
}
