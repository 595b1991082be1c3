/** How findings about nodes and messages are put into words. */
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RoundTiming } from "./round.ts";

/** Enough digits to tell 99.9 from 100. */
export function percent(share: number): string {
  if (share > 0.9999 && share < 1) return "over 99.99 %";
  const digits = share > 0.98 && share < 1 ? 2 : share > 0 && share < 1 ? 1 : 0;
  return `${(share * 100).toFixed(digits)} %`;
}

/** 0.999 as "99.9 %", with the digits that somebody typed. */
export const wanted = (share: number): string => `${Number((share * 100).toFixed(6))} %`;

/** "node 3 (Controller)". */
export function nodeWords(scenario: Scenario, id: number): string {
  const name = scenario.floor?.nodes.find((node) => node.id === id)?.name ?? "";
  return name ? `node ${id} (${name})` : `node ${id}`;
}

export const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** "a", "a and b", "a, b and c". */
export const listWords = (items: readonly string[]): string =>
  items.length < 2 ? (items[0] ?? "") : `${items.slice(0, -1).join(", ")} and ${items.at(-1)}`;

/** "commands", "commands of Film dancer": what is counted of a slot's message. */
export function messagesOf(timing: RoundTiming, slot: number): string {
  const { message, loop, label } = timing.slots[slot];
  if (message === "beacon") return "beacons";
  if (message === "other") return `messages "${label}"`;
  const name = timing.loops.find((candidate) => candidate.loop === loop)?.name;
  return timing.loops.length > 1 && name ? `${message}s of ${name}` : `${message}s`;
}

/** 11, 12, 13 and 26 as "11 to 13 and 26". */
export function rangesWords(numbers: readonly number[]): string {
  const runs: [number, number][] = [];
  for (const number of [...numbers].sort((a, b) => a - b)) {
    const last = runs.at(-1);
    if (last && last[1] === number - 1) last[1] = number;
    else runs.push([number, number]);
  }
  return listWords(runs.flatMap(([lo, hi]) => (hi - lo > 1 ? [`${lo} to ${hi}`] : hi > lo ? [`${lo}`, `${hi}`] : [`${lo}`])));
}
