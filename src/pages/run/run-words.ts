/** How events and files of a run are named. */
import { verdictStateSchema } from "#shared/api/common.ts";
import { pendulumSchema } from "#shared/plants/schema.ts";
import { type QuantityMeta, quantityMeta } from "#shared/scenario/quantity.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { EventKind, RunEvent, RunResult } from "#shared/simulation/result.ts";
import { fileStem } from "#src/lib/download.ts";
import { capital, quantityText } from "#src/lib/format.ts";

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

/** What is said beside the word: labels and units where the engine gives names, and nothing twice. */
export function eventText({ kind, text }: RunEvent, scenario: Scenario, result: RunResult): string {
  if (kind === "outage") return text === "outage" ? "begins" : `${text} begins`;
  if (kind === "reference") {
    const [, signal = "", value = ""] = text.match(/^(\S+) to (\S+)$/) ?? [];
    const column = result.series.columns.find(({ name }) => name === signal);
    return column ? `${column.label} to ${quantityText(Number(value), column.unit)}` : text;
  }
  if (kind === "change") {
    const [, parameter = "", value = ""] = text.match(/^(\S+) becomes (\S+)$/) ?? [];
    const meta = parameterMeta(scenario, parameter);
    return meta ? `${capital(meta.label)} becomes ${quantityText(Number(value), meta.unit)}` : text;
  }
  return text.toLowerCase() === EVENT_WORDS[kind].toLowerCase() ? "" : text;
}

function parameterMeta(scenario: Scenario, parameter: string): QuantityMeta | undefined {
  const { plant } = scenario.loops[0];
  if (plant.type !== "pendulum-on-cart") return undefined;
  const schema = Object.entries(pendulumSchema.shape).find(([name]) => name === parameter)?.[1];
  return schema && quantityMeta(schema);
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
