/** How long one must measure, and what a log cannot show. */
import { clopperPearson, packetsForClaim } from "#shared/math/statistics.ts";
import type { LinkTrace } from "./types.ts";
import { counted, durationText, shareText } from "./words.ts";

export interface Claim {
  packets: number;
  /** At the given period; null without one. */
  durationS: number | null;
  sentence: string;
}

/** reliability and confidence strictly between 0 and 1; periodS: one packet each so long. */
export function measureForClaim(reliability: number, confidence: number, allowedLosses = 0, periodS: number | null = null): Claim {
  const packets = packetsForClaim(reliability, confidence, allowedLosses);
  const durationS = periodS === null ? null : packets * periodS;
  const losses = allowedLosses === 0 ? "without a loss" : `with at most ${counted(allowedLosses, "loss", "losses")}`;
  const lasting = durationS === null || periodS === null ? "" : `, that is ${durationText(durationS)} at one each ${durationText(periodS)}`;
  return {
    packets,
    durationS,
    sentence: `${counted(packets, "packet")} ${losses} show that at least ${shareText(reliability)} arrive, with ${shareText(confidence)} confidence${lasting}. This holds for independent losses; bursts need longer.`,
  };
}

/** What the packets that were measured are enough for: the largest reliability that they show at this confidence. */
export const shownReliability = (packets: number, lost: number, confidence: number): number =>
  // One-sided at `confidence` is a limit of the two-sided interval at 2 confidence - 1.
  1 - clopperPearson(lost, packets, 2 * confidence - 1)[1];

export interface SlowerThanRound {
  slower: boolean;
  /** null: the log's interval is not known. */
  intervalS: number | null;
  periodS: number;
  /** null where there is nothing to say. */
  sentence: string | null;
}

/** Clocks are off by some parts in a million, and times are rounded; one in fifty more is a slower log. */
const SLOWER = 1.02;

/** A log with fewer packets than rounds cannot show bursts that begin and end between two of its packets. */
export function slowerThanRound({ intervalS }: Pick<LinkTrace, "intervalS">, periodS: number): SlowerThanRound {
  if (intervalS === null) {
    return {
      slower: false,
      intervalS,
      periodS,
      sentence: `The log does not say how far its packets lie apart, so it is not known whether it is as fast as the round of ${durationText(periodS)}.`,
    };
  }
  const slower = intervalS > SLOWER * periodS;
  return {
    slower,
    intervalS,
    periodS,
    sentence: slower
      ? `This log has one packet each ${durationText(intervalS)}, the round lasts ${durationText(periodS)}: bursts shorter than ${counted(Math.ceil(intervalS / periodS - 1e-6), "round")} cannot be seen in it. Log one packet a round to see them.`
      : null,
  };
}
