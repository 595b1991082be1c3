/** What a link's losses say about its channel: loss ratio, Gilbert-Elliott channel, streaks. Formulas: model 8, methods page. */
import { ln } from "#shared/math/elementary.ts";
import { chiSquareTail, clopperPearson, type Interval, wilson } from "#shared/math/statistics.ts";
import { type Autocorrelation, autocorrelation, countTrace, lostStreaks, type TraceCounts } from "./trace.ts";
import type { LinkTrace } from "./types.ts";

export interface GilbertElliottFit {
  /** Probability per packet. */
  goodToBad: number;
  goodToBadInterval: Interval;
  badToGood: number;
  badToGoodInterval: Interval;
  /** Mean length of a burst of losses and of a gap between bursts, packets. */
  meanBurst: number;
  meanGap: number;
  /** Correlation of successive packets, 1 - goodToBad - badToGood; that of packets k apart is its k-th power. */
  memory: number;
  logLikelihood: number;
  /** Of the best independent losses, on the same pairs of packets. */
  logLikelihoodIndependent: number;
  /** Twice the difference; chi-square with one degree of freedom when losses are independent. */
  likelihoodRatio: number;
  pValue: number;
}

export interface StreakRow {
  /** Packets lost in a row; the last row may stand for this many or more. */
  length: number;
  orMore: boolean;
  count: number;
  /** Expected number of such streaks if losses were independent, and with the fitted Gilbert-Elliott channel. */
  expectedIndependent: number;
  expectedGilbertElliott: number | null;
}

export interface LinkFit {
  counts: TraceCounts;
  lossRatio: number;
  confidence: number;
  clopperPearson: Interval;
  wilson: Interval;
  /**
   * Bursts make a log worth fewer packets: n (1 - memory)/(1 + memory) independent ones, with the score interval for so many.
   * null when losses are not fitted or keep apart.
   */
  allowingForBursts: { packets: number; wilson: Interval } | null;
  /** null unless the link was seen to go bad and to become good again. */
  gilbertElliott: GilbertElliottFit | null;
  streaks: StreakRow[];
  autocorrelation: Autocorrelation;
}

export const LAGS_SHOWN = 40;
const STREAK_ROWS = 20;

export function fitLink(trace: Pick<LinkTrace, "runs">, confidence = 0.95): LinkFit {
  const counts = countTrace(trace.runs);
  const { packets, lost } = counts;
  const lossRatio = packets > 0 ? lost / packets : 0;
  const gilbertElliott = fitGilbertElliott(counts, confidence);
  return {
    counts,
    lossRatio,
    confidence,
    clopperPearson: clopperPearson(lost, packets, confidence),
    wilson: wilson(lost, packets, confidence),
    allowingForBursts: gilbertElliott && gilbertElliott.memory > 0 ? forBursts(lossRatio, packets, gilbertElliott.memory, confidence) : null,
    gilbertElliott,
    streaks: streakRows(trace, counts, lossRatio, gilbertElliott),
    autocorrelation: autocorrelation(trace.runs, LAGS_SHOWN),
  };
}

/** The mean of a Markov chain of two states has (1 + memory)/(1 - memory) times the variance of independent draws, for large n. */
function forBursts(lossRatio: number, packets: number, memory: number, confidence: number): { packets: number; wilson: Interval } {
  const worth = Math.max(1, (packets * (1 - memory)) / (1 + memory));
  return { packets: worth, wilson: wilson(lossRatio * worth, worth, confidence) };
}

/**
 * A packet is lost exactly when the channel is bad (Gilbert, 1960), so the states are seen, and the likelihood of a Markov chain
 * is largest at the observed shares of moves (Anderson and Goodman, 1957; Billingsley, 1961): p = n01/(n00+n01), r = n10/(n10+n11).
 */
export function fitGilbertElliott(counts: TraceCounts, confidence = 0.95): GilbertElliottFit | null {
  const { n00, n01, n10, n11 } = counts;
  const fromGood = n00 + n01;
  const fromBad = n10 + n11;
  // A state that was entered and never left has no mean length.
  if (n01 === 0 || n10 === 0) return null;
  const goodToBad = n01 / fromGood;
  const badToGood = n10 / fromBad;
  const logLikelihood = terms(n00, 1 - goodToBad) + terms(n01, goodToBad) + terms(n10, badToGood) + terms(n11, 1 - badToGood);
  const lossRatio = (n01 + n11) / (fromGood + fromBad);
  const logLikelihoodIndependent = terms(n01 + n11, lossRatio) + terms(n00 + n10, 1 - lossRatio);
  const likelihoodRatio = Math.max(0, 2 * (logLikelihood - logLikelihoodIndependent));
  return {
    goodToBad,
    goodToBadInterval: clopperPearson(n01, fromGood, confidence),
    badToGood,
    badToGoodInterval: clopperPearson(n10, fromBad, confidence),
    meanBurst: 1 / badToGood,
    meanGap: 1 / goodToBad,
    memory: 1 - goodToBad - badToGood,
    logLikelihood,
    logLikelihoodIndependent,
    likelihoodRatio,
    pValue: chiSquareTail(likelihoodRatio, 1),
  };
}

const terms = (count: number, probability: number): number => (count === 0 ? 0 : count * ln(probability));

/**
 * Expected streaks of exactly k in n independent packets: (n - k - 1) p^k q^2 inside and 2 p^k q at the ends. With the fitted
 * channel, streaks are geometric: r (1 - r)^(k-1) of as many as there are.
 */
function streakRows(trace: Pick<LinkTrace, "runs">, counts: TraceCounts, loss: number, channel: GilbertElliottFit | null): StreakRow[] {
  const seen = lostStreaks(trace.runs);
  if (seen.length === 0) return [];
  const { packets: n, lostStreaks: streaks, longestLost } = counts;
  const found = new Map(seen.map(({ length, count }) => [length, count]));
  const rows: StreakRow[] = [];
  const expectedAll = (n - 1) * loss * (1 - loss) + loss;
  let power = loss;
  let stays = 1;
  let leftSeen = streaks;
  let leftExpected = expectedAll;
  for (let length = 1; length <= Math.min(longestLost, STREAK_ROWS); length++) {
    const orMore = length === STREAK_ROWS && longestLost > STREAK_ROWS;
    const count = orMore ? leftSeen : (found.get(length) ?? 0);
    const exactly = n > length ? Math.max(0, n - length - 1) * power * (1 - loss) * (1 - loss) + 2 * power * (1 - loss) : power;
    rows.push({
      length,
      orMore,
      count,
      expectedIndependent: orMore ? Math.max(0, leftExpected) : exactly,
      expectedGilbertElliott: channel ? streaks * stays * (orMore ? 1 : channel.badToGood) : null,
    });
    leftSeen -= count;
    leftExpected -= exactly;
    power *= loss;
    if (channel) stays *= 1 - channel.badToGood;
  }
  return rows;
}
