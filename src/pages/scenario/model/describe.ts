/** Parts of a scenario in a few words: for folded sections, list entries and lists of changes. Takes drafts as they are. */

import type { LossProcess } from "#shared/scenario/schema.ts";
import { counted, significant, withUnit } from "#src/lib/format.ts";
import {
  ACKNOWLEDGEMENT,
  choicesAt,
  ESTIMATOR,
  KALMAN_UPDATE,
  LIMIT,
  ON_LOSS,
  OUTAGE_MESSAGES,
  PHY,
  PLACEMENT,
  PROCESS,
  SILENCE,
  wordOf,
} from "./choices.ts";
import { fieldSpec } from "./field-spec.ts";
import { getAt, type Path, patternOf } from "./json-path.ts";
import { channelNamed, isHanging, plantOf, signalNamed } from "./machine.ts";
import { replayText } from "./round-words.ts";
import { MILLISECONDS, PERCENT, toScreen, valueText } from "./screen-unit.ts";

type Entry = Record<string, unknown>;
const LOOP = ["loops", 0] as const;

const entry = (value: unknown): Entry => (value !== null && typeof value === "object" ? (value as Entry) : {});
const list = (value: unknown): unknown[] => (Array.isArray(value) ? value : []);

const BRIEF_DIGITS = 4;

/** As `shown`, rounded for reading at a glance. */
function brief(json: unknown, path: Path): string {
  const value = getAt(json, path);
  if (typeof value !== "number") return String(value ?? "none");
  const { unit } = fieldSpec(json, path);
  return withUnit(significant(toScreen(value, unit), BRIEF_DIGITS), unit.text);
}

/** The value at a path with its unit on the screen. */
export function shown(json: unknown, path: Path): string {
  const value = getAt(json, path);
  return typeof value === "number" ? valueText(value, fieldSpec(json, path).unit) : String(value ?? "none");
}

const lower = (text: string): string => text.charAt(0).toLowerCase() + text.slice(1);

export function describeMachine(json: unknown): string {
  if (getAt(json, [...LOOP, "plant", "type"]) === "state-space") return `state space, ${counted(plantOf(json)?.n ?? 0, "state")}`;
  return isHanging(json) ? "overhead crane" : "pendulum on cart";
}

export function describeOnLoss(json: unknown): string {
  const onLoss = entry(getAt(json, [...LOOP, "actuator", "onLoss"]));
  return onLoss.policy === "plan" ? `plan of ${onLoss.length}` : wordOf(ON_LOSS, onLoss.policy);
}

export function describeLoop(json: unknown): string {
  const law = getAt(json, [...LOOP, "controller", "law", "type"]);
  const kind = law === "pid" ? "PID" : "state feedback";
  return getAt(json, [...LOOP, "controller", "placement"]) === "actuator" ? kind : `${kind}, ${describeOnLoss(json)}`;
}

export function describePlacement(json: unknown): string {
  const { placement, acknowledgement } = entry(getAt(json, [...LOOP, "controller"]));
  const where = wordOf(PLACEMENT, placement);
  return placement === "actuator" ? where : `${where}, ${wordOf(ACKNOWLEDGEMENT, acknowledgement)}`;
}

export function describeIntegral(json: unknown): string {
  const integral = list(getAt(json, [...LOOP, "controller", "law", "integral"])).map(entry);
  return integral.length === 0 ? "none" : integral.map(({ signal }) => lower(signalNamed(json, signal)?.label ?? String(signal))).join(", ");
}

export function describeEstimator(json: unknown): string {
  const { type, update } = entry(getAt(json, [...LOOP, "controller", "estimator"]));
  return type === "kalman" ? `Kalman, ${wordOf(KALMAN_UPDATE, update)}` : wordOf(ESTIMATOR, type);
}

export function describeSensor(json: unknown): string {
  const signals = list(getAt(json, [...LOOP, "sensor", "signals"])).map(entry);
  const bits = signals.reduce((sum, { encoding }) => sum + (typeof entry(encoding).bits === "number" ? (entry(encoding).bits as number) : 32), 0);
  return `${counted(signals.length, "signal")}, ${bits} bits`;
}

export function describeActuator(json: unknown): string {
  const inputs = list(getAt(json, [...LOOP, "actuator", "inputs"]));
  const path = [...LOOP, "actuator", "inputs", 0];
  if (inputs.length !== 1) return counted(inputs.length, "input");
  const { lo, hi } = entry(inputs[0]);
  return typeof lo === "number" && lo === -Number(hi)
    ? `±${shown(json, [...path, "hi"])}`
    : `${shown(json, [...path, "lo"])} to ${shown(json, [...path, "hi"])}`;
}

export function describeSilence(json: unknown): string {
  const silence = getAt(json, [...LOOP, "actuator", "silence"]);
  if (silence === null) return "ignored";
  return `${wordOf(SILENCE, entry(silence).reaction)} after ${entry(silence).afterLost} lost`;
}

export function describeTiming(timing: { latencyS: number; everyRounds: number } | null): string {
  if (timing === null) return "";
  const latency = `latency ${valueText(Number(timing.latencyS.toPrecision(6)), MILLISECONDS)}`;
  return timing.everyRounds > 1 ? `every ${timing.everyRounds} rounds, ${latency}` : latency;
}

const share = (value: unknown): string => (typeof value === "number" ? valueText(value, PERCENT) : "none");

/** Loss ratio and mean burst of a Gilbert-Elliott channel (Gilbert 1960, Elliott 1963); null where it never changes. */
export function channelFacts(channel: unknown): { lossRatio: number; meanBadRounds: number; meanGoodRounds: number } | null {
  const { goodToBad, badToGood, lossInGood, lossInBad } = entry(channel) as Record<string, number>;
  const sum = goodToBad + badToGood;
  if (!(sum > 0)) return null;
  const bad = goodToBad / sum;
  return { lossRatio: bad * lossInBad + (1 - bad) * lossInGood, meanBadRounds: 1 / badToGood, meanGoodRounds: 1 / goodToBad };
}

const ratioText = (channel: unknown): string => {
  const facts = channelFacts(channel);
  return facts ? valueText(Number(facts.lossRatio.toPrecision(3)), PERCENT) : "one state only";
};

const bits = (value: unknown): string => {
  const rounds = list(value);
  return `${counted(rounds.length, "round")}, ${rounds.filter((bit) => bit === 0).length} lost`;
};

export function describeProcess(process: unknown): string {
  const { type, measurement, command, channel } = entry(process);
  if (type === "bernoulli")
    return measurement === command ? `${share(measurement)}, each by itself` : `${share(measurement)} and ${share(command)}, each by itself`;
  if (type === "gilbert-elliott") return `in bursts, ${ratioText(measurement)} and ${ratioText(command)}`;
  if (type === "gilbert-elliott-shared") return `in bursts for both, ${ratioText(channel)}`;
  if (type === "given") return `given: ${bits(measurement)}; ${bits(command)}`;
  if (type === "flood") return "by floods over the floor";
  if (type === "replay") return replayText(process as Extract<LossProcess, { type: "replay" }>);
  return type === "none" ? "none" : lower(wordOf(PROCESS, type));
}

export function describeLosses(json: unknown): string {
  const process = entry(getAt(json, ["losses", "process"]));
  return process.type === "given" ? "given sequences" : describeProcess(process);
}

export function describePush(json: unknown, index: number): string {
  const path = ["pushes", index];
  const push = entry(getAt(json, path));
  const where = channelNamed(json, push.channel)?.label ?? String(push.channel);
  const at = (key: string) => brief(json, [...path, key]);
  const until = typeof push.untilS === "number" ? ` to ${at("untilS")}` : " on";
  switch (push.type) {
    case "impulse":
      return `Impulse of ${at("size")} ${where} at ${at("atS")}`;
    case "step":
      return `Step of ${at("size")} ${where}, ${at("fromS")}${until}`;
    case "ramp":
      return `Ramp to ${at("size")} ${where}, ${at("fromS")}${until}`;
    case "sine":
      return `Sine of ${at("amplitude")}, ${at("frequencyHz")} ${where}, ${at("fromS")}${until}`;
    case "noise":
      return `Noise of ${at("std")} RMS ${where}, ${at("fromS")}${until}`;
    default:
      return `${counted(list(push.values).length, "given value")} ${where} from ${at("fromS")}`;
  }
}

export function describeChange(json: unknown, index: number): string {
  const path = ["changes", index];
  const parameter = String(getAt(json, [...path, "parameter"]));
  return `${fieldSpec(json, ["loops", 0, "plant", parameter]).label} becomes ${brief(json, [...path, "value"])} at ${brief(json, [...path, "atS"])}`;
}

export function describeOutage(json: unknown, index: number): string {
  const path = ["losses", "outages", index];
  const messages = list(getAt(json, [...path, "messages"]));
  const which = messages.length === 2 ? "both messages" : wordOf(OUTAGE_MESSAGES, messages[0]).replace("meas.", "measurement");
  return `Outage of ${which}, ${brief(json, [...path, "fromS"])} to ${brief(json, [...path, "untilS"])}`;
}

export function describeLimit(json: unknown, index: number): string {
  const path = ["limits", index];
  const limit = entry(getAt(json, path));
  const at = (key: string) => brief(json, [...path, key]);
  if (limit.type === "saturation") return `Saturated less than ${at("below")} of the time`;
  const what = `${limit.of === "error" ? "Error of " : ""}${signalNamed(json, limit.signal)?.label ?? String(limit.signal)}`;
  const signal = limit.of === "error" ? `Error of ${lower(what.slice(9))}` : what;
  if (limit.type === "settle") return `${signal} settles in ${at("withinS")} to ±${at("band")}`;
  if (limit.type === "rms") return `${signal} ${wordOf(LIMIT, "rms")} ${at("below")}`;
  if (typeof limit.lo === "number" && typeof limit.hi === "number")
    return limit.lo === -limit.hi ? `${signal} within ±${at("hi")}` : `${signal} from ${at("lo")} to ${at("hi")}`;
  if (typeof limit.hi === "number") return `${signal} at most ${at("hi")}`;
  return typeof limit.lo === "number" ? `${signal} at least ${at("lo")}` : `${signal}, no bound yet`;
}

export function describeProfile(json: unknown, path: Path): string {
  const profile = entry(getAt(json, [...path, "profile"]));
  const signal = signalNamed(json, getAt(json, [...path, "signal"]))?.label ?? "Signal";
  if (profile.type === "sine")
    return `${signal}: sine, ${shown(json, [...path, "profile", "amplitude"])}, ${shown(json, [...path, "profile", "frequencyHz"])}`;
  return `${signal}: ${profile.type === "ramps" ? "ramps" : "steps"}, ${counted(list(profile.points).length, "point")}`;
}

export function describeEncoding(json: unknown, path: Path): string {
  const encoding = getAt(json, path);
  if (encoding === null) return "32-bit number";
  const { bits: count, lo, hi } = entry(encoding);
  const { unit } = fieldSpec(json, [...path, "lo"]);
  return `${count} bits, ${typeof lo === "number" ? valueText(lo, unit) : "?"} to ${typeof hi === "number" ? valueText(hi, unit) : "?"}`;
}

export function describePushes(json: unknown): string {
  const parts = [
    counted(list(getAt(json, ["pushes"])).length, "push", "pushes"),
    ...(list(getAt(json, ["changes"])).length > 0 ? [counted(list(getAt(json, ["changes"])).length, "change")] : []),
  ];
  return parts.join(", ");
}

export const describeLimits = (json: unknown): string => counted(list(getAt(json, ["limits"])).length, "limit");

export function describeReferences(json: unknown): string {
  const references = list(getAt(json, [...LOOP, "references"])).map(entry);
  return references.length === 0 ? "at rest" : references.map(({ signal }) => lower(signalNamed(json, signal)?.label ?? String(signal))).join(", ");
}

export function describeRun(json: unknown): string {
  return `${shown(json, ["run", "durationS"])}, seed ${getAt(json, ["run", "seed"])}`;
}

export function describeStart(json: unknown): string {
  const start = entry(getAt(json, [...LOOP, "start"]));
  const parts = [
    start.state === null ? "at rest" : "away from rest",
    ...(start.estimate === null ? [] : ["wrong estimate"]),
    ...(typeof start.networkJoinsAtS === "number" && start.networkJoinsAtS > 0
      ? [`network from ${shown(json, [...LOOP, "start", "networkJoinsAtS"])}`]
      : []),
  ];
  return parts.join(", ");
}

/** A leaf of the scenario in words: a choice, a number with its unit, a text. */
export function leafText(json: unknown, path: Path): string {
  const value = getAt(json, path);
  const choices = choicesAt(patternOf(path));
  if (choices) return patternOf(path) === "radio.phy" ? wordOf(PHY, value) : wordOf(choices, value);
  if (value === undefined || value === null) return "none";
  if (typeof value === "number") return shown(json, path);
  if (typeof value === "string") return value === "" ? "empty" : value;
  if (typeof value === "boolean") return value ? "yes" : "no";
  return Array.isArray(value) ? counted(value.length, "entry", "entries") : "set";
}
