/** Lists of whole numbers as people type them: "11 to 14, 20, 26". */

import { channelRange } from "#shared/network/channels.ts";
import type { Phy } from "#shared/scenario/round-schema.ts";
import { PHY, wordOf } from "./choices.ts";
import type { Read } from "./typed-values.ts";

const PART = /^(\d+)(?:\s*(?:to|-|\u2013|\.\.)\s*(\d+))?$/i;
const LONGEST = 2000;

/** Runs of three and more are joined; the order stays. */
export function numbersAsText(value: unknown): string {
  if (!Array.isArray(value)) return "";
  const parts: string[] = [];
  for (let i = 0; i < value.length; ) {
    let end = i;
    while (end + 1 < value.length && value[end + 1] === value[end] + 1) end++;
    if (end - i >= 2) parts.push(`${value[i]} to ${value[end]}`);
    else for (let k = i; k <= end; k++) parts.push(String(value[k]));
    i = end + 1;
  }
  return parts.join(", ");
}

/** Numbers and ranges, divided by commas, semicolons or line breaks (or spaces between plain numbers). */
export function readNumberList(text: string, what: string): Read {
  const value: number[] = [];
  const joined = text.replace(/(\d)\s*(?:to|-|\u2013|\.\.)\s*(\d)/gi, "$1-$2");
  for (const part of joined.split(/[\s,;]+/)) {
    if (part === "") continue;
    const match = PART.exec(part);
    const from = Number(match?.[1]);
    const until = Number(match?.[2] ?? match?.[1]);
    if (!match || until < from || until - from > LONGEST)
      return { ok: false, problem: `\u201c${part}\u201d is no ${what}: write numbers and ranges, such as 11, 15 to 18, 26.` };
    for (let k = from; k <= until; k++) value.push(k);
  }
  return { ok: true, value };
}

/** Channels of the radio, each once, within its PHY's. */
export function readChannels(text: string, phy: Phy): Read {
  const read = readNumberList(text, "channel");
  if (!read.ok) return read;
  const { first, last } = channelRange(phy);
  const list = read.value as number[];
  const outside = list.find((channel) => channel < first || channel > last);
  if (outside !== undefined) return { ok: false, problem: `There is no channel ${outside}: ${wordOf(PHY, phy)} has ${first} to ${last}.` };
  const twice = list.find((channel, i) => list.indexOf(channel) !== i);
  return twice === undefined ? read : { ok: false, problem: `Channel ${twice} is listed twice; each stands once.` };
}

/** With the channel taken in or out: ascending lists stay so, others grow at their end. */
export function toggleChannel(list: readonly number[], channel: number): number[] {
  if (list.includes(channel)) return list.filter((one) => one !== channel);
  const ascending = list.every((one, i) => i === 0 || one > list[i - 1]);
  const next = [...list, channel];
  return ascending ? next.sort((a, b) => a - b) : next;
}
