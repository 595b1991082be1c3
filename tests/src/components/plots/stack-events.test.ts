import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { EventKind, RunEvent } from "#shared/simulation/result.ts";
import { markedEvents, placeEvents } from "#src/components/plots/stack-events.ts";

const at = (atS: number, kind: EventKind, text = ""): RunEvent => ({ atS, kind, text });
const space = (rows: number) => ({
  xOf: (timeS: number) => 40 + timeS * 50,
  left: 40,
  right: 540,
  rows,
  measure: (words: string) => words.length * 6,
});

describe("events above the plots", () => {
  it("joins outages of nodes that overlap with their own ends", () => {
    const events = [
      at(1, "outage", "node 1 out"),
      at(2, "outage", "node 14 out"),
      at(3, "outage-ends", "node 14 back"),
      at(4, "outage-ends", "node 1 back"),
    ];
    expect(markedEvents(events, 5).map(({ words, atS, untilS }) => [words, atS, untilS])).toEqual([
      ["node 1 out", 1, 4],
      ["node 14 out", 2, 3],
    ]);
  });

  it("joins an outage with its end, and one without an end with the end of the run", () => {
    const marked = markedEvents([at(1, "outage", "outage"), at(2, "outage-ends"), at(3, "outage", "jamming")], 5);
    expect(marked.map(({ words, atS, untilS }) => [words, atS, untilS])).toEqual([
      ["outage", 1, 2],
      ["jamming", 3, 5],
    ]);
  });
  it("marks two references that step together once, and leaves crossings to the curves", () => {
    expect(markedEvents([at(1, "reference"), at(1, "reference"), at(2, "limit-crossed")], 5)).toHaveLength(1);
  });
  it("puts words to the left where the next mark leaves no room at the right", () => {
    const { events } = placeEvents(markedEvents([at(4, "push"), at(4.1, "outage", "outage"), at(4.25, "outage-ends")], 10), space(2));
    expect(events.map(({ text, row }) => [text?.words, text?.anchor, row])).toEqual([
      ["push", "end", 0],
      ["outage", "start", 0],
    ]);
  });
  it("counts a crowd in words once", () => {
    const crowd = Array.from({ length: 30 }, (_, i) => at(i * 0.3, "push"));
    const words = placeEvents(markedEvents(crowd, 10), space(2)).events.flatMap(({ text }) => (text ? [text.words] : []));
    expect(words).toEqual(["30 pushes"]);
  });
  it("never writes over a mark or another word, and never drops a mark", () => {
    const kinds = fc.constantFrom<EventKind>("push", "reference", "change", "silence", "resumed", "diverged");
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.double({ min: 0, max: 10, noNaN: true }), kinds), { maxLength: 40 }),
        fc.integer({ min: 1, max: 3 }),
        (list, rows) => {
          const marked = markedEvents(
            list.map(([atS, kind]) => at(atS, kind)),
            10,
          );
          const { events } = placeEvents(marked, space(rows));
          const words = events.flatMap(({ text, row }) => {
            if (!text) return [];
            const width = text.words.length * 6;
            return [{ row, from: text.anchor === "start" ? text.x : text.x - width, until: text.anchor === "start" ? text.x + width : text.x }];
          });
          const apart = words.every((a, i) => words.every((b, j) => i <= j || a.row !== b.row || a.until <= b.from || b.until <= a.from));
          const offMarks = words.every(({ row, from, until }) =>
            events.every((event) => event.row !== row || event.untilX <= from || event.x >= until),
          );
          return events.length === marked.length && apart && offMarks;
        },
      ),
    );
  });
});
