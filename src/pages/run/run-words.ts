/** How events and files of a run are named. */
import { verdictStateSchema } from "#shared/api/common.ts";
import type { EventKind, RunEvent, RunResult } from "#shared/simulation/result.ts";
import { fileStem } from "#src/lib/download.ts";
import { capital } from "#src/lib/format.ts";

const EVENT_WORDS: Record<EventKind, string> = {
  push: "Push",
  "push-ends": "Push",
  change: "Change",
  reference: "Reference",
  outage: "Outage",
  "outage-ends": "Outage",
  silence: "Silence",
  resumed: "Resumed",
  "limit-crossed": "Limit",
  "track-end": "Track end",
  diverged: "Diverged",
};

export const eventWord = ({ kind }: RunEvent): string => EVENT_WORDS[kind];

/** What is said beside the word; nothing is said twice. */
export function eventText({ kind, text }: RunEvent): string {
  if (kind === "outage") return text === "outage" ? "begins" : `${text} begins`;
  return text.toLowerCase() === EVENT_WORDS[kind].toLowerCase() ? "" : text;
}

/** Coral: something was lost or crossed. */
export const isLoss = ({ kind }: RunEvent): boolean =>
  kind === "outage" || kind === "silence" || kind === "limit-crossed" || kind === "track-end" || kind === "diverged";

export const RUN_VERDICTS = verdictStateSchema.exclude(["does-not-fit"]).options;
export type RunVerdict = (typeof RUN_VERDICTS)[number];
export const VERDICT_CHOICES: Record<RunVerdict, string> = {
  holds: "holds",
  near: "near a limit",
  crosses: "crosses a limit",
  "not-decided": "not decided",
};

export function endedText(
  { ended, endedAtS, durationS }: Pick<RunResult, "ended" | "endedAtS" | "durationS">,
  seconds: (value: number) => string,
): string {
  if (ended === "complete") return seconds(durationS);
  return `${ended === "diverged" ? "diverged" : "track end"} at ${seconds(endedAtS)} of ${seconds(durationS)}`;
}

/** "balancer-rig-1-r15-seed10-series.csv" */
export const runFile = (name: string, revision: number, seed: number, what: string): string => `${fileStem(name)}-r${revision}-seed${seed}-${what}`;

export const runName = (revision: number, seed: number): string => capital(`revision ${revision}, seed ${seed}`);
