/** Numbers with their units, and times, as people read them. Stored values are SI; the screen shows degrees, ms, mm and %. */

import { trueMinus, withUnit } from "#shared/scenario/show.ts";

export { countText } from "#shared/reception/words.ts";
export { quantityText, shownUnit, significant, THIN, withUnit } from "#shared/scenario/show.ts";

/** Fixed decimals, true minus, never "−0.0". */
export const fixed = (value: number, decimals: number): string => (Number.isFinite(value) ? trueMinus(value.toFixed(decimals)) : "none");

/** "25 ms", "2.5 ms", "1200 ms" */
export const msText = (seconds: number, digits = 3): string => withUnit(String(Number((seconds * 1000).toPrecision(Math.max(digits, 3)))), "ms");

/** "88.5 %" */
export const percentText = (share: number, decimals = 1): string => withUnit(fixed(share * 100, decimals), "%");

/** "4.8 MB" */
export function bytesText(bytes: number): string {
  if (bytes < 1000) return withUnit(String(bytes), "B");
  if (bytes < 1e6) return withUnit(fixed(bytes / 1e3, bytes < 1e4 ? 1 : 0), "kB");
  return withUnit(fixed(bytes / 1e6, 1), "MB");
}

/** "1 scenario", "11 scenarios" */
export const counted = (count: number, one: string, many = `${one}s`): string => `${count} ${count === 1 ? one : many}`;

const WORDS = ["No", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight", "Nine", "Ten", "Eleven", "Twelve"];
/** At the beginning of a sentence: "Eleven scenarios", "13 scenarios". */
export const countedInWords = (count: number, one: string, many = `${one}s`): string => `${WORDS[count] ?? count} ${count === 1 ? one : many}`;

/** "engineer", "engineer and reviewer", "engineer, reviewer or administrator" */
export function listed(words: readonly string[], last: "and" | "or" = "and"): string {
  if (words.length < 2) return words.join("");
  return `${words.slice(0, -1).join(", ")} ${last} ${words.at(-1)}`;
}

export const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
/** "an engineer", "a reviewer" */
export const withArticle = (word: string): string => `${/^[aeiou]/i.test(word) ? "an" : "a"} ${word}`;

const MONTHS = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];
const two = (value: number): string => String(value).padStart(2, "0");
const clockText = (at: Date): string => `${two(at.getHours())}:${two(at.getMinutes())}`;
const dayNumber = (at: Date): number => Math.round(Date.UTC(at.getFullYear(), at.getMonth(), at.getDate()) / 86_400_000);

/** "Today 14:32", "Yesterday", "28 Nov", "28 Nov 2024"; in the time zone of this browser. */
export function whenText(iso: string, now: Date = new Date()): string {
  const at = new Date(iso);
  const days = dayNumber(now) - dayNumber(at);
  if (days === 0) return `Today ${clockText(at)}`;
  if (days === 1) return "Yesterday";
  const day = `${at.getDate()} ${MONTHS[at.getMonth()]}`;
  return at.getFullYear() === now.getFullYear() ? day : `${day} ${at.getFullYear()}`;
}

/** "28 Nov 2025, 14:32": the whole instant, for titles and records. */
export function instantText(iso: string): string {
  const at = new Date(iso);
  return `${at.getDate()} ${MONTHS[at.getMonth()]} ${at.getFullYear()}, ${clockText(at)}`;
}
