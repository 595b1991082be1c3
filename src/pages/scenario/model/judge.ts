/** What is wrong with a draft, field by field, in the units of the screen; and the scenario when nothing is. */
import { type RoundTiming, roundTiming } from "#shared/network/round.ts";
import { checkScenario } from "#shared/scenario/check.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { counted, countText, listed, withUnit } from "#src/lib/format.ts";
import type { Draft } from "./draft.ts";
import { type FieldSpec, fieldSpec, rangeText } from "./field-spec.ts";
import { getAt, type Path, parsePath } from "./json-path.ts";
import { plantOf } from "./machine.ts";
import { runsFacts } from "./round-words.ts";
import { MILLISECONDS, valueText } from "./screen-unit.ts";

export interface FieldIssue {
  path: string;
  code: string;
  /** What is wrong, in one clause. */
  rule: string;
  /** What it would do, and what is permitted. */
  more: string;
}

export interface Judgement {
  issues: FieldIssue[];
  /** Present when the draft can be run. */
  scenario: Scenario | null;
  /** Also of a round that does not fit; null when the shape is wrong. */
  timing: RoundTiming | null;
}

const enter = (spec: FieldSpec): string =>
  spec.meta ? `Enter ${spec.meta.integer ? "a whole number, " : ""}${withUnit(rangeText(spec), spec.unit.text)}.` : "";

function typedIssues({ typed, json }: Draft): FieldIssue[] {
  return Object.entries(typed).flatMap(([path, { problem }]) =>
    problem === null ? [] : [{ path, code: "not-a-value", rule: problem, more: enter(fieldSpec(json, parsePath(path))) }],
  );
}

/** Numbers and their units stay together, as everywhere on the screen. */
const joined = (text: string): string => text.replace(/(\d) (ms|s|B|kg|N|m|%)(?![\w/])/g, (_, digit: string, unit: string) => withUnit(digit, unit));

/** Splits a sentence of the engine's rules where it first pauses. */
export function fromRule({ path, code, message }: Issue): FieldIssue {
  const text = joined(message);
  const pause = text.search(/[:;.]\s/);
  if (pause < 0) return { path, code, rule: text, more: "" };
  return { path, code, rule: text.slice(0, pause + 1), more: text.slice(pause + 1).trim() };
}

/** Rules whose sentence speaks of the file, said in the words and units of the form. */
function inWordsOfTheForm(issue: Issue, json: unknown): FieldIssue {
  const { path, code } = issue;
  const say = (rule: string, more: string): FieldIssue => ({ path, code, rule, more });
  const at = parsePath(path);
  if (code === "out-of-order" && /^limits\[\d+\]\.hi$/.test(path)) {
    const lowest = [...at.slice(0, -1), "lo"];
    const bound = (where: Path) => valueText(Number(getAt(json, where)), fieldSpec(json, where).unit);
    return say(`The highest value ${bound(at)} is not above the lowest ${bound(lowest)}.`, "Enter a larger one, or leave one of them empty.");
  }
  if (code === "sequence-too-short" && path.endsWith(".runs")) {
    const message = String(at.at(-2));
    const { packets } = runsFacts(getAt(json, at) as number[]);
    return packets === 0
      ? say(`Nothing is recorded for the ${message}.`, "Use a reception log, or choose another process.")
      : say(
          `${countText(packets)} packets are recorded for the ${message}, and the run has more rounds.`,
          "Shorten the run, or choose below what follows.",
        );
  }
  if (code === "sequence-too-short") {
    const given = getAt(json, at);
    const count = Array.isArray(given) ? given.length : 0;
    return say(`${counted(count, "round")} given, and the run is longer.`, "Give one for every round, or choose below what follows.");
  }
  if (code === "not-possible" && path.endsWith("controller.acknowledgement")) {
    const withSensor = getAt(json, ["loops", 0, "controller", "placement"]) === "sensor";
    return withSensor
      ? say(
          "Nothing is reported to a controller with the sensor:",
          "it needs no measurement message. Choose \u201cnot acknowledged\u201d or \u201cknown at once\u201d.",
        )
      : say("A controller with the actuator knows what acts.", "Choose \u201cnot acknowledged\u201d.");
  }
  if (code === "not-possible" && path.endsWith("controller.estimator.type")) {
    const measured = ((getAt(json, ["loops", 0, "sensor", "signals"]) as { signal: string }[] | undefined) ?? []).map(({ signal }) => signal);
    const missing = (plantOf(json)?.states ?? []).filter(({ name }) => !measured.includes(name)).map(({ label }) => label.toLowerCase());
    if (missing.length > 0)
      return say(`${listed(missing)} ${missing.length === 1 ? "is" : "are"} not measured.`, "Choose the Kalman filter, or measure every state.");
  }
  return fromRule(issue);
}

function shapeIssue(issue: Issue, draft: Draft, consequence: string | null): FieldIssue {
  const path = parsePath(issue.path);
  const spec = fieldSpec(draft.json, path);
  const value = getAt(draft.json, path);
  if (!spec.meta || typeof value !== "number") {
    if (spec.meta) return { path: issue.path, code: issue.code, rule: `${spec.label} is missing.`, more: enter(spec) };
    return fromRule(issue);
  }
  const shown = valueText(value, spec.unit);
  const rule =
    issue.code === "not-whole" ? `${spec.label} is ${shown}: no whole number.` : `${spec.label} is ${shown}: ${rangeText(spec)} is permitted.`;
  return { path: issue.path, code: issue.code, rule, more: [consequence, enter(spec)].filter(Boolean).join(" ") };
}

const RADIO_FIELDS = /^(round|radio)\.|\.actuator\.onLoss\.length$|\.encoding\.bits$|\.controller\.computeS$|busTransferS$/;

/** What the round would look like with a number that is out of range, as far as that can be computed. */
function consequenceFor(issues: readonly Issue[], draft: Draft): string | null {
  const [only] = issues;
  if (issues.length !== 1 || only.code !== "out-of-range" || !RADIO_FIELDS.test(only.path)) return null;
  const value = getAt(draft.json, parsePath(only.path));
  if (typeof value !== "number" || !(value >= 0) || value > 1e6) return null;
  const timing = roundTiming(draft.json as Scenario);
  const tooLong = timing.issues.find((issue) => issue.code === "payload-too-long");
  if (tooLong) return tooLong.message;
  const last = timing.slots.at(-1);
  if (timing.fits || !last || !Number.isFinite(timing.reserveS)) return null;
  const over = valueText(Number((-timing.reserveS).toPrecision(3)), MILLISECONDS);
  const command = timing.slots.find((slot) => slot.message === "command");
  if (only.path.endsWith("onLoss.length") && command)
    return `The command message would hold ${withUnit(String(command.payloadBytes), "B")}, and the round would be ${over} longer than its period.`;
  return `The round would be ${over} longer than its period.`;
}

export function judge(draft: Draft): Judgement {
  const typed = typedIssues(draft);
  const parsed = parseScenario(draft.json);
  if (!parsed.ok) {
    const mistyped = new Set(typed.map(({ path }) => path));
    const consequence = consequenceFor(parsed.issues, draft);
    const shape = parsed.issues.filter(({ path }) => !mistyped.has(path)).map((issue) => shapeIssue(issue, draft, consequence));
    return { issues: [...typed, ...shape], scenario: null, timing: null };
  }
  const { issues, timing } = checkScenario(parsed.value);
  const all = [...typed, ...issues.map((issue) => inWordsOfTheForm(issue, parsed.value))];
  return { issues: all, scenario: all.length === 0 ? parsed.value : null, timing };
}
