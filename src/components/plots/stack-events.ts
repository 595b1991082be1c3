/** Events above the plots: one mark each, and words where there is room. */
import type { EventKind, RunEvent } from "#shared/simulation/result.ts";

export type EventMark = "push" | "push-ends" | "reference" | "change" | "outage" | "silence" | "resumed" | "ended";

export interface PlacedEvent {
  mark: EventMark;
  /** Pixels. For an outage from x to until, else x = until. */
  x: number;
  untilX: number;
  row: number;
  /** null: no room; the mark alone, and the list of events, have to tell. */
  text: { words: string; x: number; anchor: "start" | "end" } | null;
  /** A dotted line through the plots. */
  lead: boolean;
}

interface Marked {
  mark: EventMark;
  words: string;
  atS: number;
  untilS: number;
}

const MARKS: Partial<Record<EventKind, { mark: EventMark; words: string }>> = {
  push: { mark: "push", words: "push" },
  "push-ends": { mark: "push-ends", words: "" },
  change: { mark: "change", words: "change" },
  reference: { mark: "reference", words: "reference step" },
  outage: { mark: "outage", words: "outage" },
  silence: { mark: "silence", words: "silence" },
  resumed: { mark: "resumed", words: "resumed" },
  "track-end": { mark: "ended", words: "track end" },
  diverged: { mark: "ended", words: "diverged" },
};

/** Outages are joined with their ends; crossings are marked on the curves instead. `steps`: references change by steps. */
export function markedEvents(events: readonly RunEvent[], endS: number, steps = true): Marked[] {
  const marked: Marked[] = [];
  const open: Marked[] = [];
  for (const event of [...events].sort((a, b) => a.atS - b.atS)) {
    if (event.kind === "outage-ends") {
      const words = event.text.replace(/ back$/, " out");
      const own = open.findIndex((item) => item.words === words);
      const [began] = open.splice(Math.max(0, own), 1);
      if (began) began.untilS = event.atS;
      continue;
    }
    const known = MARKS[event.kind];
    if (!known) continue;
    const words = event.kind === "outage" ? event.text : event.kind === "reference" && !steps ? "reference" : known.words;
    // Two references that step together are one mark.
    if (event.kind !== "outage" && marked.some(({ mark, atS }) => mark === known.mark && atS === event.atS)) continue;
    const item = { ...known, words, atS: event.atS, untilS: event.atS };
    marked.push(item);
    if (event.kind === "outage") open.push(item);
  }
  for (const began of open) began.untilS = endS;
  return marked;
}

export interface EventSpace {
  xOf(timeS: number): number;
  left: number;
  right: number;
  rows: number;
  measure(words: string): number;
}

const GAP = 9;
/** More marks of one kind than this are counted in words once, not named one by one. */
const NAMED = 8;

/** "30 pushes" at the first, nothing at the others. */
function countedOnce<T extends Marked>(visible: T[]): T[] {
  const counts = new Map<string, number>();
  for (const { words } of visible) counts.set(words, (counts.get(words) ?? 0) + 1);
  const told = new Set<string>();
  return visible.map((item) => {
    const alike = counts.get(item.words) ?? 0;
    if (item.words === "" || alike <= NAMED) return item;
    if (told.has(item.words)) return { ...item, words: "" };
    told.add(item.words);
    const plural = item.words === "push" ? "pushes" : item.words === "resumed" ? "times resumed" : `${item.words}s`;
    return { ...item, words: `${alike} ${plural}` };
  });
}

/**
 * Words go to the right of their mark, else to the left, else one row down; never over another mark or word. What finds no
 * room keeps its mark. Returns how many rows are in use.
 */
export function placeEvents(marked: readonly Marked[], space: EventSpace): { events: PlacedEvent[]; rows: number } {
  const { xOf, left, right, measure } = space;
  const visible = countedOnce(
    marked
      .map((item) => ({ ...item, x: xOf(item.atS), untilX: xOf(item.untilS) }))
      .filter(({ x, untilX }) => untilX >= left - 0.5 && x <= right + 0.5),
  );
  /** Taken stretches of each row. */
  const taken: [number, number][][] = Array.from({ length: space.rows }, () => []);
  const free = (row: number, from: number, until: number) => (taken[row] ?? []).every(([a, b]) => until <= a || from >= b);
  let used = visible.length > 0 ? 1 : 0;
  // The first row's marks are reserved before any word is placed.
  for (const { x, untilX } of visible) taken[0]?.push([Math.max(left, x) - 4, Math.min(right, untilX) + 4]);
  const events = visible.map((item): PlacedEvent => {
    const x = Math.max(left, item.x);
    const untilX = Math.min(right, item.untilX);
    const width = measure(item.words);
    const lead = item.mark === "push" || item.mark === "reference" || item.mark === "change";
    const placed: PlacedEvent = { mark: item.mark, x, untilX, row: 0, text: null, lead: lead && item.x >= left };
    if (item.words === "") return placed;
    for (let row = 0; row < space.rows; row++) {
      if (row > 0 && !free(row, x - 5, untilX + 5)) continue;
      const after = untilX + GAP;
      const before = x - GAP;
      const side =
        after + width <= right + 50 && free(row, after - 3, after + width + 6)
          ? ({ anchor: "start", x: after } as const)
          : before - width >= left - 30 && free(row, before - width - 6, before + 3)
            ? ({ anchor: "end", x: before } as const)
            : null;
      if (!side) continue;
      placed.row = row;
      placed.text = { words: item.words, ...side };
      taken[row]?.push(side.anchor === "start" ? [after - 3, after + width + 6] : [before - width - 6, before + 3]);
      if (row > 0) taken[row]?.push([x - 5, untilX + 5]);
      used = Math.max(used, row + 1);
      break;
    }
    return placed;
  });
  return { events, rows: used };
}
