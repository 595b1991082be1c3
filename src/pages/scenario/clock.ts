import { instantText, whenText } from "#src/lib/format.ts";

/** "14:32" today, "28 Nov 2025, 14:32" on other days. */
export function clockText(at: number | Date): string {
  const iso = new Date(at).toISOString();
  const today = /^Today (.*)$/.exec(whenText(iso));
  return today ? today[1] : instantText(iso);
}
