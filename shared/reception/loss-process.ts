/** From a log to what a scenario's losses can be: the recorded packets again, or a fitted channel. */
import type { LossProcess } from "#shared/scenario/schema.ts";
import type { LinkFit } from "./fit.ts";
import { piece } from "./trace.ts";
import { type LinkTrace, linkName } from "./types.ts";

export type ReplayProcess = Extract<LossProcess, { type: "replay" }>;
export type ReplayedLink = ReplayProcess["measurement"];
export type GilbertElliottChannel = Extract<LossProcess, { type: "gilbert-elliott-shared" }>["channel"];

/** The name under which a scenario remembers its log; longer ones are cut. */
const MAX_NAME = 120;

/**
 * Packets from `from` on, one a round, for at most `rounds` rounds; `every`: each so many-th packet, for a log that is faster
 * than the round (see packetsPerRound).
 */
export function replayOf(trace: LinkTrace, from: number, rounds: number, every = 1): ReplayedLink {
  return { link: linkName(trace).slice(0, MAX_NAME), runs: piece(trace.runs, from, rounds, every) };
}

/** How many packets of the log pass in one round, at least 1: a log slower than the round is replayed one packet a round. */
export function packetsPerRound({ intervalS }: Pick<LinkTrace, "intervalS">, periodS: number): number {
  return intervalS === null ? 1 : Math.max(1, Math.round(periodS / intervalS));
}

/** Rounds that a replay from `from` on lasts. */
export const roundsInReplay = (trace: Pick<LinkTrace, "packets">, from: number, every = 1): number =>
  Math.max(0, Math.ceil((trace.packets - from) / every));

export function replayProcess(
  log: ReplayProcess["log"],
  measurement: ReplayedLink,
  command: ReplayedLink,
  then: ReplayProcess["then"] = "error",
): ReplayProcess {
  return { type: "replay", log: log && { ...log, name: log.name.slice(0, MAX_NAME) }, measurement, command, then };
}

export interface FittedChannel<T> {
  value: T;
  /** What was taken, and at which end of its interval. */
  sentence: string;
}

/**
 * The fitted channel, or null where nothing could be fitted. "upper": more and longer bursts, each probability at the unfavourable
 * end of its interval.
 */
export function gilbertElliottOf(
  { gilbertElliott: fit, confidence }: LinkFit,
  at: "estimate" | "upper" = "estimate",
): FittedChannel<GilbertElliottChannel> | null {
  if (!fit) return null;
  const goodToBad = at === "upper" ? fit.goodToBadInterval[1] : fit.goodToBad;
  const badToGood = at === "upper" ? fit.badToGoodInterval[0] : fit.badToGood;
  return {
    value: { goodToBad, badToGood, lossInGood: 0, lossInBad: 1 },
    sentence:
      at === "upper"
        ? `Both moves at the unfavourable end of their ${confidence * 100} % intervals.`
        : "The most likely channel; the truth may be worse.",
  };
}

/** Independent losses of the same ratio; "upper": at the upper end of the interval, wider when losses come in bursts. */
export function bernoulliOf(fit: LinkFit, at: "estimate" | "upper" = "estimate"): FittedChannel<number> {
  if (at === "estimate") return { value: fit.lossRatio, sentence: "The observed loss ratio; the truth may be worse." };
  const exact = fit.clopperPearson[1];
  const allowing = fit.allowingForBursts?.wilson[1] ?? 0;
  return {
    value: Math.max(exact, allowing),
    sentence: `The upper end of the ${fit.confidence * 100} % interval${allowing > exact ? ", allowing for bursts" : ""}.`,
  };
}
