/** The verdict of a run in words: one sentence with the decisive figure. */
import { createPlant } from "#shared/plants/registry.ts";
import type { Limit, Scenario } from "#shared/scenario/schema.ts";
import { percentText, plusMinusText, quantityText, withUnit } from "#shared/scenario/show.ts";
import type { LimitVerdict, RunResult, Verdict } from "./result.ts";

const WORDS = ["no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve"];
const inWords = (count: number): string => WORDS[count] ?? String(count);
const seconds = (value: number): string => withUnit(value < 10 ? value.toFixed(2) : value.toFixed(1), "s");
/** Names such as x1 and u2 are symbols: no article, and no capital at the head of a sentence. */
const SYMBOL = /^[a-z]\d+\b/;
const capital = (text: string): string => (SYMBOL.test(text) ? text : text.charAt(0).toUpperCase() + text.slice(1));

export const VERDICT_WORDS: Record<Verdict, string> = { holds: "Holds", near: "Near", crosses: "Crosses", "not-decided": "Not decided" };

function signalOf(scenario: Scenario, name: string): { label: string; unit: string } {
  const plant = createPlant(scenario.loops[0].plant);
  return [...plant.outputs, ...plant.inputs].find((signal) => signal.name === name) ?? { label: name, unit: "" };
}

const said = (label: string): string => (SYMBOL.test(label) ? label : `the ${label.toLowerCase()}`);

/** "Angle" and "within ±12°", for labels that set the first part in bold. */
export function limitParts(limit: Limit, scenario: Scenario): { name: string; rule: string } {
  if (limit.type === "saturation") return { name: "Saturated", rule: `below ${percentText(limit.below)}` };
  const { label, unit } = signalOf(scenario, limit.signal);
  switch (limit.type) {
    case "within": {
      const { lo, hi } = limit;
      const of = limit.of === "error" ? " of its reference" : "";
      if (lo !== null && hi !== null && lo === -hi) return { name: label, rule: `within ${plusMinusText(hi, unit)}${of}` };
      if (lo !== null && hi !== null) return { name: label, rule: `within ${quantityText(lo, unit)} to ${quantityText(hi, unit)}${of}` };
      return { name: label, rule: hi !== null ? `at most ${quantityText(hi, unit)}${of}` : `at least ${quantityText(lo ?? 0, unit)}${of}` };
    }
    case "settle":
      return { name: label, rule: `settles in ${quantityText(limit.withinS, "s")} to ${plusMinusText(limit.band, unit)}` };
    case "rms":
      return { name: label, rule: `${limit.of === "error" ? "error " : ""}RMS below ${quantityText(limit.below, unit)}` };
  }
}

/** "Angle within ±12°" */
export function limitLabel(limit: Limit, scenario: Scenario): string {
  const { name, rule } = limitParts(limit, scenario);
  return `${name} ${rule}`;
}

/** Outside its band for as long as it could be watched: then the figure is no settling time. */
export function neverSettled(limit: Limit | undefined, verdict: LimitVerdict): boolean {
  return limit?.type === "settle" && verdict.settlingS === null;
}

/** "the angle passes 12° at 4.29 s" */
function crossing(scenario: Scenario, verdict: LimitVerdict): string {
  const limit = scenario.limits[verdict.index];
  if (limit.type === "saturation") return `the input is saturated for ${percentText(verdict.value)} of the time, ${percentText(limit.below)} allowed`;
  const { label, unit } = signalOf(scenario, limit.signal);
  const name = said(label);
  switch (limit.type) {
    case "within": {
      const bound = verdict.crossedBound === "hi" ? limit.hi : limit.lo;
      return `${name} passes ${quantityText(bound ?? 0, unit)}${verdict.crossedAtS === null ? "" : ` at ${seconds(verdict.crossedAtS)}`}`;
    }
    case "settle":
      if (neverSettled(limit, verdict)) return `${name} has not settled after ${seconds(verdict.value)}, ${seconds(limit.withinS)} allowed`;
      return `${name} needs ${seconds(verdict.value)} to settle, ${seconds(limit.withinS)} allowed`;
    case "rms":
      return `the RMS of ${name} is ${quantityText(verdict.value, unit)}, ${quantityText(limit.below, unit)} allowed`;
  }
}

function using(scenario: Scenario, verdict: LimitVerdict): string {
  const limit = scenario.limits[verdict.index];
  const share = percentText(Math.round(verdict.used * 100) / 100);
  if (limit.type === "saturation") return `saturation uses ${share} of what is allowed`;
  const name = said(signalOf(scenario, limit.signal).label);
  if (limit.type === "settle") return `settling of ${name} uses ${share} of its time`;
  return `${limit.type === "rms" ? `the RMS of ${name}` : name} uses ${share} of its limit`;
}

/** Word and sentence for a verdict line: "Holds" and "All five limits kept; the angle uses 74 % of its limit." */
export function verdictSentence(
  scenario: Scenario,
  result: Pick<RunResult, "verdict" | "limits" | "ended" | "endedAtS" | "events">,
): { word: string; sentence: string } {
  const word = VERDICT_WORDS[result.verdict];
  const { limits } = result;
  const count = limits.length;
  if (result.ended === "diverged") return { word, sentence: `The run diverged at ${seconds(result.endedAtS)} and ended there.` };
  const crossed = limits
    .filter(({ state }) => state === "crosses")
    .sort((a, b) => (a.crossedAtS ?? result.endedAtS) - (b.crossedAtS ?? result.endedAtS));
  if (result.ended === "track-end") {
    const [before] = crossed.filter(({ crossedAtS }) => crossedAtS !== null && crossedAtS < result.endedAtS);
    const first = before ? ` First, ${crossing(scenario, before)}.` : "";
    return {
      word,
      sentence: `The ${result.events.find(({ kind }) => kind === "track-end")?.text ?? "end of the track"} is reached at ${seconds(result.endedAtS)}.${first}`,
    };
  }
  if (count === 0) return { word, sentence: "No limits are set, so there is nothing to hold or cross." };
  if (crossed.length > 0) {
    const rest =
      count === 1 ? "" : `; ${crossed.length === count ? `all ${inWords(count)}` : `${inWords(crossed.length)} of ${inWords(count)}`} limits crossed`;
    return { word, sentence: `${capital(crossing(scenario, crossed[0]))}${rest}.` };
  }
  const most = limits.reduce((a, b) => (b.used > a.used ? b : a));
  const kept = count === 1 ? "The limit is kept" : count === 2 ? "Both limits kept" : `All ${inWords(count)} limits kept`;
  return { word, sentence: result.verdict === "near" ? `${kept}, but ${using(scenario, most)}.` : `${kept}; ${using(scenario, most)}.` };
}
