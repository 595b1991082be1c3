/** From a log's links to a scenario's loss process: as it was received, or as a fitted process. */

import { countTrace, piece } from "#shared/reception/trace.ts";
import type { LossProcess } from "#shared/scenario/schema.ts";

/** As many run lengths as a scenario holds. */
export const MOST_RUNS = 200_000;
const LEAST_RESERVE = 100;

/** Rounds of the run, and a tenth more, at least a hundred: the run may be made a little longer without choosing anew. */
export function roundsToEmbed(durationS: number, periodS: number): { rounds: number; reserve: number } {
  const rounds = Math.max(1, Math.ceil(durationS / periodS - 1e-9));
  return { rounds, reserve: Math.max(LEAST_RESERVE, Math.ceil(rounds / 10)) };
}

export interface Replayed {
  runs: number[];
  packets: number;
  lost: number;
  /** Not all that was asked for: the log ends, or a scenario holds no more run lengths. */
  short: "log" | "runs" | null;
}

/** The log from one packet on, as run lengths that begin with a delivered one (0 when the first is lost). */
export function replayFrom(recorded: readonly number[], fromPacket: number, packets: number, every = 1): Replayed {
  const taken = piece(recorded, fromPacket, packets, every);
  const runs = taken.slice(0, MOST_RUNS);
  const counts = countTrace(runs);
  const short = taken.length > MOST_RUNS ? "runs" : counts.packets < packets ? "log" : null;
  return { runs, packets: counts.packets, lost: counts.lost, short };
}

export const KINDS = ["replay", "gilbert-elliott", "bernoulli", "bernoulli-upper"] as const;
export type UseKind = (typeof KINDS)[number];

/** What a link's fit says, as far as a process needs it. */
export interface LinkFigures {
  ratio: number;
  /** Upper end of the 95 % interval. */
  upper: number;
  /** null: no losses in a row to fit to. */
  chain: { goodToBad: number; badToGood: number } | null;
}

export interface ReplayChoice {
  log: { id: string; name: string };
  measurement: { link: string; runs: number[] };
  command: { link: string; runs: number[] };
  then: "error" | "delivered" | "repeat";
}

export const replayProcess = (choice: ReplayChoice): LossProcess => ({ type: "replay", ...choice });

const stated = (value: number): number => Number(value.toPrecision(6));

export function fittedProcess(kind: Exclude<UseKind, "replay">, measurement: LinkFigures, command: LinkFigures): LossProcess | null {
  if (kind === "bernoulli") return { type: "bernoulli", measurement: stated(measurement.ratio), command: stated(command.ratio) };
  if (kind === "bernoulli-upper") return { type: "bernoulli", measurement: stated(measurement.upper), command: stated(command.upper) };
  if (!measurement.chain || !command.chain) return null;
  const channel = ({ goodToBad, badToGood }: NonNullable<LinkFigures["chain"]>) => ({
    goodToBad: stated(goodToBad),
    badToGood: stated(badToGood),
    lossInGood: 0,
    lossInBad: 1,
  });
  return { type: "gilbert-elliott", measurement: channel(measurement.chain), command: channel(command.chain) };
}
