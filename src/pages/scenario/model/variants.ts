/**
 * Parts of a scenario that come in several forms (a controller's kind, a loss process, a push): what each form starts
 * with when it is chosen for the first time. What was set in a form before is kept by the page for the session.
 */
import { designLoop } from "#shared/control/design.ts";
import { receptionRatio } from "#shared/network/reception.ts";
import { roundTiming } from "#shared/network/round.ts";
import type { Phy } from "#shared/scenario/round-schema.ts";
import type { Law, Scenario } from "#shared/scenario/schema.ts";
import { FLOOR_FIRST } from "./floor-variants.ts";
import { getAt, type Path, patternOf } from "./json-path.ts";
import { outputNamed, plantOf } from "./machine.ts";
import { runsFacts } from "./round-words.ts";

type Node = Record<string, unknown>;
const node = (value: unknown): Node => (value !== null && typeof value === "object" ? (value as Node) : {});
const number = (value: unknown, otherwise: number): number => (typeof value === "number" ? value : otherwise);

/** Figures that people go on working with, not the last bits of a computation. */
const rounded = (value: number): number => Number(value.toPrecision(5));

interface Gains {
  gain: number[][];
  integral: { signal: string; gain: number[] }[];
}

/** The gains, inputs x states, that the scenario's law amounts to; null for a PID and where a design fails. */
function presentGains(good: Scenario | null): Gains | null {
  const law = good?.loops[0].controller.law;
  if (!good || !law || law.type === "pid") return null;
  const { design } = designLoop(good, roundTiming(good).ns.loops[0]);
  const feedback = design?.feedback;
  if (!design || !feedback) return null;
  const { n, m } = design.model;
  const row = (count: number, value: (index: number) => number) => Array.from({ length: count }, (_, index) => rounded(value(index)));
  return {
    gain: Array.from({ length: m }, (_, j) => row(n, (i) => feedback.k[j * n + i])),
    integral: law.integral.map(({ signal }, i) => ({ signal, gain: row(m, (j) => feedback.ki[j * feedback.ni + i]) })),
  };
}

/** The scenario with a law that has a model, in place of a PID: the one that it had before, else equal weights. */
function withModel(good: Scenario | null, before: Law | null): Scenario | null {
  const loop = good?.loops[0];
  const plant = good && plantOf(good);
  if (!good || !loop || !plant || loop.controller.law.type !== "pid") return good;
  const law = before ?? { type: "lqr", stateWeights: Array(plant.n).fill(1), inputWeights: Array(plant.m).fill(1), integral: [] };
  return { ...good, loops: [{ ...loop, controller: { ...loop.controller, law } }] };
}

function firstLaw(type: string, json: unknown, good: Scenario | null, before: Law | null): Law {
  const plant = plantOf(json);
  const n = plant?.n ?? 1;
  const m = plant?.m ?? 1;
  if (type === "lqr") return { type, stateWeights: Array(n).fill(1), inputWeights: Array(m).fill(1), integral: [] };
  const gains = presentGains(withModel(good, before));
  const gain = gains?.gain;
  if (type === "gain") return { type, gain: gain ?? Array.from({ length: m }, () => Array(n).fill(0)), integral: gains?.integral ?? [] };
  // The PID begins as the part of the present state feedback that acts on the first angle, or else on the first signal.
  const measured = (getAt(json, ["loops", 0, "sensor", "signals"]) as { signal: string }[] | undefined)?.map(({ signal }) => signal) ?? [];
  const signal = measured.find((name) => outputNamed(json, name)?.unit === "rad") ?? measured[0] ?? "x1";
  const index = plant?.states.findIndex(({ name }) => name === signal) ?? -1;
  const half = Math.floor(n / 2);
  return {
    type: "pid",
    signal,
    proportional: gain && index >= 0 ? gain[0][index] : 1,
    integral: 0,
    derivative: gain && index >= 0 && index + half < n && n % 2 === 0 ? gain[0][index + half] : 0,
    filterS: 0.01,
  };
}

function firstEstimator(type: string, json: unknown): Node {
  if (type === "direct") return { type };
  const signals = (getAt(json, ["loops", 0, "sensor", "signals"]) as { noiseStd?: number }[] | undefined) ?? [];
  return {
    type,
    update: "stationary",
    processNoise: Array(plantOf(json)?.n ?? 1).fill(0.05),
    measurementNoise: signals.map(({ noiseStd }) => (typeof noiseStd === "number" && noiseStd > 0 ? noiseStd : 0.001)),
  };
}

/** Loss ratio of the present process, to go on with about as many losses in another form. */
function presentLoss(json: unknown, message: "measurement" | "command"): number {
  const process = node(getAt(json, ["losses", "process"]));
  const part = process.type === "gilbert-elliott-shared" ? process.channel : process[message];
  if (typeof part === "number") return part;
  if (process.type === "replay") {
    const { packets, lost } = runsFacts(node(part).runs as number[]);
    return packets > 0 ? lost / packets : 0.05;
  }
  if (Array.isArray(part) && part.length > 0) return part.filter((bit) => bit === 0).length / part.length;
  const { goodToBad, badToGood, lossInGood, lossInBad } = node(part);
  const sum = number(goodToBad, 0) + number(badToGood, 0);
  return sum > 0 ? (number(goodToBad, 0) * number(lossInBad, 1) + number(badToGood, 0) * number(lossInGood, 0)) / sum : 0.05;
}

/** Bursts of four rounds on average with the given loss ratio. */
function bursts(ratio: number): Node {
  const badToGood = 0.25;
  const share = Math.min(Math.max(ratio, 0), 0.8);
  return { goodToBad: Number(((badToGood * share) / (1 - share)).toPrecision(3)), badToGood, lossInGood: 0, lossInBad: 1 };
}

function firstProcess(type: string, json: unknown): Node {
  const loss = (message: "measurement" | "command") => Number(presentLoss(json, message).toPrecision(3));
  switch (type) {
    case "bernoulli":
      return { type, measurement: loss("measurement"), command: loss("command") };
    case "gilbert-elliott":
      return { type, measurement: bursts(loss("measurement")), command: bursts(loss("command")) };
    case "gilbert-elliott-shared":
      return { type, channel: bursts(loss("measurement")) };
    case "given":
      return { type, measurement: [1, 1, 0, 1, 1, 1, 1, 0, 1, 1], command: [1, 1, 1, 1, 0, 1, 1, 1, 1, 1], then: "repeat" };
    case "flood":
      return { type };
    // Nothing is recorded before a log is chosen, and nothing is made up.
    case "replay":
      return { type, log: null, measurement: { link: "", runs: [] }, command: { link: "", runs: [] }, then: "repeat" };
    default:
      return { type: "none" };
  }
}

/** A table begins as the formula's own curve, from almost nothing to almost all, row by row. */
function firstReception(type: string, json: unknown): Node {
  if (type !== "table") return { type, codingGainS2Db: 4, codingGainS8Db: 8 };
  const phy = getAt(json, ["radio", "phy"]) as Phy;
  const present = node(getAt(json, ["radio", "reception"]));
  const formula = { type: "formula" as const, codingGainS2Db: number(present.codingGainS2Db, 4), codingGainS8Db: number(present.codingGainS8Db, 8) };
  const bytes = number(getAt(json, ["radio", "headerBytes"]), 4) + longestPayload(json);
  const all = Array.from({ length: 81 }, (_, i) => i / 2 - 20).map((snrDb) => ({
    snrDb,
    prr: Number(receptionRatio(phy, formula, bytes, 10 ** (snrDb / 10)).toFixed(4)),
  }));
  const from = Math.max(0, all.findIndex(({ prr }) => prr > 0) - 1);
  const until = all.findIndex(({ prr }) => prr === 1);
  return { type, name: "", rows: all.slice(from, until < 0 ? undefined : until + 1) };
}

/** Of the round's messages; the draft may be one that has no round. */
function longestPayload(json: unknown): number {
  try {
    return Math.max(0, ...roundTiming(json as Scenario).slots.map(({ payloadBytes }) => payloadBytes));
  } catch {
    return 16;
  }
}

export const firstChannel = (json: unknown): string => plantOf(json)?.channels[0]?.name ?? "cart";

/** Keeps time and size of the push where the other form has them too. */
function firstPush(type: string, json: unknown, path: Path): Node {
  const push = node(getAt(json, path));
  const channel = push.channel ?? firstChannel(json);
  const fromS = number(push.fromS ?? push.atS, 1);
  const size = number(push.size ?? push.amplitude ?? push.std, 1);
  const untilS = typeof push.untilS === "number" ? push.untilS : null;
  switch (type) {
    case "impulse":
      return { type, channel, atS: fromS, size };
    case "ramp":
      return { type, channel, fromS, untilS: untilS ?? fromS + 1, size };
    case "sine":
      return { type, channel, fromS, untilS, amplitude: size, frequencyHz: 1, phaseRad: 0 };
    case "noise":
      return { type, channel, fromS, untilS, std: Math.abs(size), intervalS: 0.05 };
    case "given":
      return { type, channel, fromS, intervalS: 0.05, values: [size, 0] };
    default:
      return { type: "step", channel, fromS, untilS, size };
  }
}

function firstLimit(type: string, json: unknown, path: Path): Node {
  const limit = node(getAt(json, path));
  const signal = limit.signal ?? plantOf(json)?.states[0]?.name ?? "x1";
  const bound = Math.abs(number(limit.hi ?? limit.band ?? (limit.type === "saturation" ? undefined : limit.below), 0.1)) || 0.1;
  switch (type) {
    case "settle":
      return { type, signal, band: bound, withinS: 2, afterS: number(limit.fromS, 0) };
    case "rms":
      return { type, signal, of: limit.of ?? "signal", below: bound, fromS: 0, untilS: null };
    case "saturation":
      return { type, below: 0.02 };
    default:
      return { type: "within", signal, of: limit.of ?? "signal", lo: -bound, hi: bound, fromS: 0, untilS: null };
  }
}

function firstProfile(type: string, json: unknown, path: Path): Node {
  const profile = node(getAt(json, path));
  if (type === "sine") return { type, offset: 0, amplitude: 0.1, frequencyHz: 0.2, phaseRad: 0 };
  return { type, points: Array.isArray(profile.points) ? profile.points : [{ atS: 1, value: 0.1 }] };
}

/** What the session knows beside the draft. */
export interface Known {
  /** The last scenario that could be run. */
  good: Scenario | null;
  /** The last law with a model that ran. */
  modelLaw: Law | null;
}

const FIRST: Record<string, (type: string, json: unknown, path: Path, known: Known) => unknown> = {
  "loops[].controller.law": (type, json, _, { good, modelLaw }) => firstLaw(type, json, good, modelLaw),
  "loops[].controller.estimator": (type, json) => firstEstimator(type, json),
  "loops[].actuator.onLoss": (policy) => (policy === "plan" ? { policy, length: 6, end: "zero" } : { policy }),
  "loops[].sensor.noise": (type, json) =>
    type === "given"
      ? { type, values: [Array((getAt(json, ["loops", 0, "sensor", "signals"]) as unknown[] | undefined)?.length ?? 1).fill(0)], then: "repeat" }
      : { type },
  ...FLOOR_FIRST,
  "losses.process": (type, json) => firstProcess(type, json),
  "radio.reception": (type, json) => firstReception(type, json),
  "pushes[]": (type, json, path) => firstPush(type, json, path),
  "limits[]": (type, json, path) => firstLimit(type, json, path),
  "loops[].references[].profile": (type, json, path) => firstProfile(type, json, path),
  "loops[].feedforward[].profile": (type, json, path) => firstProfile(type, json, path),
};

/** The key that says which form the part at the path has. */
export const tagKey = (path: Path): "type" | "policy" => (path.at(-1) === "onLoss" ? "policy" : "type");

/** The part in another form, with values to begin with. */
export function firstOf(json: unknown, path: Path, tag: string, known: Known): unknown {
  return FIRST[patternOf(path)]?.(tag, json, path, known) ?? { [tagKey(path)]: tag };
}
