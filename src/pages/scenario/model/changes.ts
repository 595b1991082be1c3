/** What differs between two scenarios, setting by setting, in the words of the form. */

import { pathText } from "#shared/scenario/parse.ts";
import { counted } from "#src/lib/format.ts";
import {
  describeChange,
  describeEncoding,
  describeLimit,
  describeOutage,
  describeProcess,
  describeProfile,
  describePush,
  leafText,
} from "./describe.ts";
import { fieldSpec } from "./field-spec.ts";
import { FLOOR_LISTS, FLOOR_OWNERS, FLOOR_WHOLES } from "./floor-words.ts";
import { getAt, type Path, patternOf, sameJson } from "./json-path.ts";
import { inputAt, signalNamed, stateAt } from "./machine.ts";
import { ROUND_LISTS, ROUND_OWNERS, ROUND_WHOLES } from "./round-words.ts";

export interface Change {
  path: string;
  label: string;
  before: string;
  after: string;
}

const NONE = "\u2013";
type Node = Record<string, unknown>;
const isNode = (value: unknown): value is Node => value !== null && typeof value === "object" && !Array.isArray(value);

/** The tag that says which form an entry has; two forms are compared as a whole. */
const tagOf = (value: unknown): unknown => (isNode(value) ? (value.type ?? value.policy ?? null) : null);

const nth = (word: string, path: Path): string => `${word} ${Number(path.at(-1)) + 1}`;
const lower = (text: string): string => text.charAt(0).toLowerCase() + text.slice(1);

/** Lists whose entries come and go: how to name an entry, and how to say all of it. */
const LISTS: Record<string, { name: (json: unknown, path: Path) => string; say: (json: unknown, path: Path) => string }> = {
  ...FLOOR_LISTS,
  ...ROUND_LISTS,
  pushes: { name: (_, path) => nth("Push", path), say: (json, path) => describePush(json, Number(path.at(-1))) },
  changes: { name: (_, path) => nth("Change in mid-run", path), say: (json, path) => describeChange(json, Number(path.at(-1))) },
  limits: { name: (_, path) => nth("Limit", path), say: (json, path) => describeLimit(json, Number(path.at(-1))) },
  "losses.outages": { name: (_, path) => nth("Outage", path), say: (json, path) => describeOutage(json, Number(path.at(-1))) },
  "loops[].references": { name: (json, path) => `Reference of ${signalText(json, path)}`, say: describeProfile },
  "loops[].feedforward": { name: (json, path) => `Feed-forward of ${signalText(json, path)}`, say: describeProfile },
  "loops[].references[].profile.points": { name: (json, path) => `${owner(json, path)}, ${lower(nth("Point", path))}`, say: pointText },
  "loops[].feedforward[].profile.points": { name: (json, path) => `${owner(json, path)}, ${lower(nth("Point", path))}`, say: pointText },
  "loops[].sensor.signals": {
    name: (json, path) => `Sensor, ${signalText(json, path)}`,
    say: (json, path) => `noise ${leafText(json, [...path, "noiseStd"])}, ${describeEncoding(json, [...path, "encoding"])}`,
  },
  "loops[].controller.law.integral": {
    name: (json, path) => `Integral of ${signalText(json, path)}`,
    say: (json, path) => leafText(json, [...path, "weight"]),
  },
};

function signalText(json: unknown, path: Path): string {
  const name = getAt(json, [...path, "signal"]);
  return lower(signalNamed(json, name)?.label ?? String(name));
}

const owner = (json: unknown, path: Path): string =>
  `${path[2] === "references" ? "Reference" : "Feed-forward"} of ${signalText(json, path.slice(0, 4))}`;

function pointText(json: unknown, path: Path): string {
  return `${leafText(json, [...path, "value"])} at ${leafText(json, [...path, "atS"])}`;
}

/** Where a setting belongs, when its own label does not say. */
function ownerOf(json: unknown, path: Path): string {
  const pattern = patternOf(path);
  for (let end = path.length - 1; end > 0; end--) {
    const outer = path.slice(0, end);
    const list = typeof outer.at(-1) === "number" ? LISTS[patternOf(outer.slice(0, -1))] : undefined;
    if (list) return list.name(json, outer);
  }
  if (pattern.startsWith("loops[].controller.law.stateWeights")) return "Weight";
  if (pattern.startsWith("loops[].controller.law.inputWeights")) return "Weight";
  if (pattern.startsWith("loops[].controller.law.gain")) return `Gain, ${lower(inputAt(json, Number(path.at(-2)))?.label ?? "input")}`;
  if (pattern.startsWith("loops[].controller.law")) return pattern.endsWith(".type") ? "" : "Controller";
  if (pattern.startsWith("loops[].controller.estimator.processNoise")) return "Process noise";
  if (pattern.startsWith("loops[].controller.estimator.measurementNoise")) return "Assumed sensor noise";
  if (pattern.startsWith("loops[].controller.limits")) return "Controller's own limit";
  if (pattern.startsWith("loops[].actuator.silence.")) return "Reaction to silence";
  if (pattern.startsWith("loops[].actuator.inputs[].encoding")) return `${inputAt(json, Number(path[4]))?.label ?? "Input"}, encoded`;
  if (pattern.startsWith("loops[].start.state")) return "Start";
  if (pattern.startsWith("loops[].start.estimate")) return "Estimate at the start";
  if (/^losses\.process\.(measurement|command)\./.test(pattern)) return path[2] === "measurement" ? "Measurement" : "Command";
  if (pattern.startsWith("losses.process.channel")) return "Channel";
  if (pattern === "losses.process.measurement" || pattern === "losses.process.command") return "";
  const owner = [...FLOOR_OWNERS, ...ROUND_OWNERS].find(([beginning]) => pattern.startsWith(beginning));
  if (owner) return owner[1];
  if (pattern.startsWith("round.beacon.")) return "Beacon";
  if (pattern.startsWith("radio.") || pattern.startsWith("round.")) return "Round";
  return "";
}

export function settingLabel(json: unknown, path: Path): string {
  const outer = ownerOf(json, path);
  const { label } = fieldSpec(json, path);
  const chance = /^losses\.process\.(measurement|command)$/.test(pathText(path)) ? ", chance" : "";
  return outer ? `${outer}, ${lower(label)}` : `${label}${chance}`;
}

/** All of a part in a few words. */
function wholeText(json: unknown, path: Path): string {
  const value = getAt(json, path);
  const pattern = patternOf(path);
  if (value === undefined || value === null) return pattern.endsWith("encoding") ? "32-bit number" : NONE;
  const list = typeof path.at(-1) === "number" ? LISTS[patternOf(path.slice(0, -1))] : undefined;
  if (list) return list.say(json, path);
  if (pattern === "losses.process") return describeProcess(value);
  const whole = (FLOOR_WHOLES[pattern] ?? ROUND_WHOLES[pattern])?.(value);
  if (whole) return whole;
  if (pattern.endsWith("encoding")) return describeEncoding(json, path);
  if (pattern === "round.beacon") return `${leafText(json, [...path, "payloadBytes"])}`;
  if (Array.isArray(value) && value.length > 0 && value.every((one) => one === 0 || one === 1))
    return `${counted(value.length, "round")}, ${value.filter((one) => one === 0).length} lost`;
  if (pattern.endsWith(".messages") && Array.isArray(value)) return value.length === 2 ? "both" : String(value[0]);
  if (pattern === "loops[].start.state" || pattern === "loops[].start.estimate")
    return Array.isArray(value) ? value.map((_, i) => `${stateAt(json, i)?.symbol ?? ""} ${leafText(json, [...path, i])}`.trim()).join(", ") : NONE;
  if (isNode(value) && tagOf(value) !== null) {
    const key = "policy" in value ? "policy" : "type";
    const extra = value.policy === "plan" ? ` of ${value.length}` : "";
    return `${leafText(json, [...path, key])}${extra}`;
  }
  if (isNode(value) && pattern.endsWith("silence")) return `${leafText(json, [...path, "reaction"])} after ${leafText(json, [...path, "afterLost"])}`;
  return leafText(json, path);
}

/** Pairs entries of two lists: the same ones first (longest common subsequence), the rest in order. */
function pairs(before: unknown[], after: unknown[]): [number | null, number | null][] {
  if (before.length === after.length) return before.map((_, i) => [i, i]);
  const rows = before.length + 1;
  const columns = after.length + 1;
  const length = new Uint16Array(rows * columns);
  for (let i = before.length - 1; i >= 0; i--)
    for (let j = after.length - 1; j >= 0; j--)
      length[i * columns + j] = sameJson(before[i], after[j])
        ? length[(i + 1) * columns + j + 1] + 1
        : Math.max(length[(i + 1) * columns + j], length[i * columns + j + 1]);
  const found: [number | null, number | null][] = [];
  let gone: number[] = [];
  let come: number[] = [];
  const settle = () => {
    for (let k = 0; k < Math.max(gone.length, come.length); k++) found.push([gone[k] ?? null, come[k] ?? null]);
    gone = [];
    come = [];
  };
  for (let i = 0, j = 0; i < before.length || j < after.length; ) {
    if (i < before.length && j < after.length && sameJson(before[i], after[j])) {
      settle();
      i++;
      j++;
    } else if (j >= after.length || (i < before.length && length[(i + 1) * columns + j] >= length[i * columns + j + 1])) gone.push(i++);
    else come.push(j++);
  }
  settle();
  return found;
}

function walk(before: unknown, after: unknown, path: Path, found: Change[]): void {
  const was = getAt(before, path);
  const is = getAt(after, path);
  if (sameJson(was, is)) return;
  const pattern = patternOf(path);
  const list = LISTS[pattern];
  if (list && Array.isArray(was) && Array.isArray(is)) {
    for (const [i, j] of pairs(was, is)) {
      if (i !== null && j !== null && i === j && tagOf(was[i]) === tagOf(is[j])) walk(before, after, [...path, j], found);
      else {
        const at = [...path, j ?? i ?? 0];
        found.push({
          path: pathText(at),
          label: j === null ? list.name(before, at) : list.name(after, at),
          before: i === null ? NONE : list.say(before, [...path, i]),
          after: j === null ? NONE : list.say(after, at),
        });
      }
    }
    return;
  }
  const vectors = Array.isArray(was) && Array.isArray(is) && was.length === is.length && was.length <= 24 && !pattern.startsWith("losses.process");
  if (vectors && !pattern.endsWith(".messages")) {
    was.forEach((_, i) => {
      walk(before, after, [...path, i], found);
    });
    return;
  }
  if (isNode(was) && isNode(is) && tagOf(was) === tagOf(is)) {
    for (const key of new Set([...Object.keys(was), ...Object.keys(is)])) walk(before, after, [...path, key], found);
    return;
  }
  const label =
    pattern === "losses.process"
      ? "Loss process"
      : isNode(was ?? is) && tagOf(was ?? is) !== null
        ? partLabel(after, path)
        : settingLabel(after, path);
  found.push({ path: pathText(path), label, before: wholeText(before, path), after: wholeText(after, path) });
}

const PARTS: Record<string, string> = {
  "loops[].controller.law": "Controller",
  "loops[].controller.estimator": "Estimator",
  "loops[].actuator.onLoss": "Command lost",
  "loops[].sensor.noise": "Noise values",
  "loops[].plant": "Machine",
};
const partLabel = (json: unknown, path: Path): string =>
  PARTS[patternOf(path)] ?? (path.at(-1) === "profile" ? `Reference of ${signalText(json, path.slice(0, -1))}` : settingLabel(json, path));

/** One entry per setting that differs, in the order of the scenario. Texts carry their units. */
export function describeChanges(before: unknown, after: unknown): Change[] {
  const found: Change[] = [];
  walk(before, after, [], found);
  return found;
}
