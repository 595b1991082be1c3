/** What a link's log says, in sentences that page, server and command line share. */
import { significant } from "#shared/scenario/show.ts";
import { shownReliability, slowerThanRound } from "./claim.ts";
import type { LinkFit } from "./fit.ts";
import { hoursCovered, hoursThatDiffer } from "./hours.ts";
import { type IndependenceTest, TOO_FEW_LOSSES } from "./independence.ts";
import type { LinkTrace } from "./types.ts";
import { atLeastText, counted, countText, durationText, shareText } from "./words.ts";

/** One streak is called an outage when it makes so large a share of all losses and is so many mean bursts long. */
const OUTAGE_SHARE = 0.3;
const OUTAGE_BURSTS = 8;

export interface VerdictWords {
  headline: string;
  sentences: string[];
}

export interface VerdictInput {
  trace: LinkTrace;
  fit: LinkFit;
  test: IndependenceTest;
  /** Period of the round that the log is to be used for; null: not said. */
  periodS?: number | null;
}

export function verdictWords({ trace, fit, test, periodS = null }: VerdictInput): VerdictWords {
  const { headline, sentences } = told(trace, fit, test);
  if (trace.lostBefore + trace.lostAfter > 0) {
    sentences.push(
      `${counted(trace.lostBefore + trace.lostAfter, "round")} at the ends count as lost because other links saw them; if this node was off then, cut the log.`,
    );
  }
  if (trace.hours) sentences.push(...hourSentences(trace.hours));
  const slower = periodS === null ? null : slowerThanRound(trace, periodS).sentence;
  if (slower) sentences.push(slower);
  return { headline, sentences };
}

function told(trace: LinkTrace, fit: LinkFit, test: IndependenceTest): VerdictWords {
  const { packets, lost } = test;
  switch (test.verdict) {
    case "nothing-lost":
      return {
        headline: packets === 1 ? "The only packet was not lost" : `None of ${counted(packets, "packet")} was lost`,
        sentences: [
          `With ${shareText(fit.confidence)} confidence at least ${atLeastText(shownReliability(packets, 0, fit.confidence))} arrive, if losses are independent.`,
          "Without a loss nothing can be said about bursts.",
        ],
      };
    case "all-lost":
      return {
        headline: packets === 1 ? "The only packet was lost" : `All ${counted(packets, "packet")} were lost`,
        sentences: ["Nothing can be fitted. Is the received column the right way round?"],
      };
    case "too-few":
      return {
        headline: `Too few ${lost <= packets / 2 ? "losses" : "deliveries"} to tell: ${countText(Math.min(lost, packets - lost))}`,
        sentences: tooFew(fit, test),
      };
    case "independent":
      return {
        headline: "No sign that losses depend on each other",
        sentences: [
          ratio(fit),
          `None of the tests finds a dependence (${pValues(test)}), and ${streaks(fit)}.`,
          "That is no proof: other hours, other traffic or moving metal may bring bursts.",
        ],
      };
    case "bursts":
      return { headline: burstHeadline(fit), sentences: [ratio(fit), ...bursts(trace, fit, test)] };
    case "apart":
      return {
        headline: "Losses keep apart more than chance would have it",
        sentences: [
          ratio(fit),
          `After a loss the next packet is lost less often than others (${pValues(test)}). Look for a sender or relay that alternates.`,
        ],
      };
    case "rhythm":
      return { headline: "Losses follow a rhythm", sentences: [ratio(fit), rhythm(trace, fit, test)] };
  }
}

function hourSentences(hours: NonNullable<LinkTrace["hours"]>): string[] {
  const covered = hoursCovered(hours);
  const sentences = covered === null ? [] : [`The log covers ${covered} of the day and says nothing about the rest.`];
  const differ = hoursThatDiffer(hours);
  if (differ) {
    const { best, worst } = differ;
    sentences.push(
      `Loss changes over the day: ${shareText(best.loss)} from ${best.hour} to ${best.hour + 1} h, ${shareText(worst.loss)} from ${worst.hour} to ${worst.hour + 1} h. Design for the worst hour.`,
    );
  }
  return sentences;
}

/** "3.9 % lost (95 % interval 3.6 to 4.2 %)." */
function ratio(fit: LinkFit): string {
  const [lo, hi] = fit.clopperPearson;
  return `${shareText(fit.lossRatio)} of ${counted(fit.counts.packets, "packet")} were lost (${shareText(fit.confidence)} interval ${shareText(lo)} to ${shareText(hi)} for independent losses).`;
}

function tooFew(fit: LinkFit, test: IndependenceTest): string[] {
  const { runs, burstThatWouldShow: burst } = test;
  const seen =
    burst === null
      ? "With so few no burst would have shown."
      : `Had they come in bursts of ${countText(burst)} or more, the runs test would have shown it.`;
  const sentences = [ratio(fit), `At least ${TOO_FEW_LOSSES} are needed for a verdict. ${seen}`];
  if (runs && runs.p < test.significance && runs.observed < runs.expected) {
    sentences.push(
      `They did: the longest streak is ${countText(fit.counts.longestLost)}, and independent losses would hardly give so few runs (p ${pText(runs.p)}). That is one event, not yet a pattern; measure longer.`,
    );
  }
  return sentences;
}

const burstHeadline = (fit: LinkFit): string => {
  const { meanBurst, independentBurst } = burstLengths(fit);
  return meanBurst / independentBurst < 1.1
    ? "Losses depend on each other a little"
    : `Losses come in bursts of ${significant(meanBurst)} packets on average`;
};

/** Independent losses make bursts of 1/(1 - p) on average. */
function burstLengths(fit: LinkFit): { meanBurst: number; independentBurst: number } {
  return { meanBurst: fit.counts.lost / Math.max(1, fit.counts.lostStreaks), independentBurst: 1 / (1 - fit.lossRatio) };
}

function bursts(trace: LinkTrace, fit: LinkFit, test: IndependenceTest): string[] {
  const { meanBurst, independentBurst } = burstLengths(fit);
  const { intervalS } = trace;
  const lasting = intervalS === null ? "" : ` (${durationText(fit.counts.longestLost * intervalS)})`;
  const sentences = [
    `A burst lasts ${significant(meanBurst)} packets on average where independent losses would make ${significant(independentBurst)}; the longest is ${countText(fit.counts.longestLost)}${lasting}. It is no chance (${pValues(test)}).`,
  ];
  const { lost, longestLost } = fit.counts;
  if (longestLost > OUTAGE_SHARE * lost && longestLost > OUTAGE_BURSTS * meanBurst) {
    sentences.push(
      `One streak makes ${shareText(longestLost / lost)} of all losses: an outage rather than the link's usual ways. Look at it apart, and at the rest without it.`,
    );
  }
  const { allowingForBursts: allowing } = fit;
  if (allowing) {
    const [lo, hi] = allowing.wilson;
    sentences.push(
      `Bursts make the log worth ${counted(allowing.packets, "independent packet")}: the interval for the loss is rather ${shareText(lo)} to ${shareText(hi)}.`,
    );
  }
  sentences.push("Use it as a replay or as a Gilbert-Elliott channel; independent losses of the same ratio would be too kind.");
  return sentences;
}

function rhythm(trace: LinkTrace, fit: LinkFit, test: IndependenceTest): string {
  const { values } = fit.autocorrelation;
  const lags = test.ljungBox?.lags ?? values.length;
  let strongest = 0;
  for (let k = 1; k < Math.min(lags, values.length); k++) if (Math.abs(values[k]) > Math.abs(values[strongest])) strongest = k;
  const apart = trace.intervalS === null ? "" : ` (${durationText((strongest + 1) * trace.intervalS)})`;
  return `Successive packets look independent, yet packets that lie ${strongest + 1} apart${apart} are alike: correlation ${significant(values[strongest] ?? 0, 2)} (${pValues(test)}). Look for something that repeats, such as another radio's beacon. A Gilbert-Elliott channel does not have this; use a replay.`;
}

/** Independent losses bring n (1 - p) p^k streaks of k or more. */
function streaks({ counts, lossRatio }: LinkFit): string {
  let expected = counts.packets * (1 - lossRatio);
  for (let k = 0; k < counts.longestLost; k++) expected *= lossRatio;
  const many = counts.longestLost === 1 ? "no two were lost in a row" : `the longest streak is ${countText(counts.longestLost)}`;
  return counts.longestLost === 1 ? many : `${many}, where independent losses bring ${significant(expected, 2)} so long or longer`;
}

function pValues({ runs, ljungBox, transitions }: IndependenceTest): string {
  const parts = [];
  if (runs) parts.push(`runs test p ${pText(runs.p)}`);
  // Where losses are rare the other two are no good approximation, and do not count.
  if (transitions && transitions.smallestExpected >= 5) {
    if (ljungBox) parts.push(`Ljung-Box p ${pText(ljungBox.p)}`);
    parts.push(`successive outcomes p ${pText(transitions.p)}`);
  }
  return parts.join(", ");
}

/** Below one in a million the size no longer matters. */
const pText = (p: number): string => (p < 1e-6 ? "below 0.000001" : `= ${significant(p, 2)}`);
