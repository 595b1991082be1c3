import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { csvRows } from "#shared/reception/csv-rows.ts";

interface Read {
  line: number;
  cells: string[];
  unclosed?: true;
}

function rowsOf(pieces: readonly string[], delimiter = ","): Read[] {
  const rows: Read[] = [];
  const splitter = csvRows(delimiter, ({ cells, line, unclosed }) => {
    rows.push(unclosed ? { line, cells: [...cells], unclosed } : { line, cells: [...cells] });
  });
  for (const piece of pieces) splitter.push(piece);
  splitter.end();
  return rows;
}

describe("splitting delimited text", () => {
  it.each([
    ["LF", "a,b\n1,2\n"],
    ["CRLF", "a,b\r\n1,2\r\n"],
    ["CR", "a,b\r1,2\r"],
    ["no line end at the end", "a,b\n1,2"],
    ["a byte order mark", "\ufeffa,b\n1,2\n"],
  ])("reads %s", (_, text) => {
    expect(rowsOf([text])).toEqual([
      { line: 1, cells: ["a", "b"] },
      { line: 2, cells: ["1", "2"] },
    ]);
  });

  it("leaves empty lines out and counts them", () => {
    expect(rowsOf(["a\n\n\r\nb\n"])).toEqual([
      { line: 1, cells: ["a"] },
      { line: 4, cells: ["b"] },
    ]);
  });

  it("keeps delimiters, quotes and line ends inside quotes, and says where the row began", () => {
    expect(rowsOf(['"a,1","say ""go""","two\nlines",4\nnext,,,\n'])).toEqual([
      { line: 1, cells: ["a,1", 'say "go"', "two\nlines", "4"] },
      { line: 3, cells: ["next", "", "", ""] },
    ]);
  });

  it("takes a quote that is never closed for a stray one and goes on with the next line", () => {
    const lines = Array.from({ length: 40 }, (_, k) => `${k},x`);
    const rows = rowsOf([['5,"open', ...lines].join("\n")]);
    expect(rows[0]).toEqual({ line: 1, cells: ["5", '"open'], unclosed: true });
    expect(rows.slice(1)).toEqual(lines.map((text, k) => ({ line: k + 2, cells: text.split(",") })));
  });

  it("does the same when the text ends before the quote is given up", () => {
    expect(rowsOf(['1,2\n3,"4\n5,6'])).toEqual([
      { line: 1, cells: ["1", "2"] },
      { line: 2, cells: ["3", '"4'], unclosed: true },
      { line: 3, cells: ["5", "6"] },
    ]);
  });

  const cell = fc.string({ unit: fc.constantFrom("a", "7", " ", ";", ",", '"', "\n", "é", "0") });
  it("gives back what was written, however it is cut into pieces", () => {
    fc.assert(
      fc.property(
        fc.array(fc.array(cell, { minLength: 2, maxLength: 4 }), { minLength: 1, maxLength: 12 }),
        fc.constantFrom(",", ";"),
        fc.constantFrom("\n", "\r\n"),
        fc.infiniteStream(fc.integer({ min: 1, max: 7 })),
        (table, delimiter, lineEnd, sizes) => {
          const text = table.map((cells) => cells.map((value) => `"${value.replaceAll('"', '""')}"`).join(delimiter)).join(lineEnd);
          const pieces: string[] = [];
          for (let at = 0; at < text.length; ) {
            const size = sizes.next().value as number;
            pieces.push(text.slice(at, at + size));
            at += size;
          }
          expect(rowsOf(pieces, delimiter).map(({ cells }) => cells)).toEqual(table);
        },
      ),
      { seed: 7, numRuns: 300 },
    );
  });
});
