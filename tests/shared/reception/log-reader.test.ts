import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { logReader } from "#shared/reception/log-reader.ts";
import { countTrace } from "#shared/reception/trace.ts";
import {
  type ColumnMapping,
  columnMappingSchema,
  type LogContent,
  linkTraceSchema,
  readReportSchema,
  TROUBLE_KINDS,
} from "#shared/reception/types.ts";

type MappingInput = Parameters<typeof columnMappingSchema.parse>[0];
const SEQ: MappingInput = { number: { column: "seq" } };
const TIMED: MappingInput = { number: { column: "seq" }, time: { column: "t" } };

function outcome(text: string, mapping: MappingInput) {
  const reader = logReader(columnMappingSchema.parse(mapping) as ColumnMapping);
  reader.push(text);
  return reader.finish();
}
function read(text: string, mapping: MappingInput): LogContent {
  const result = outcome(text, mapping);
  if (!result.ok) throw new Error(JSON.stringify(result.issues));
  return result.value;
}
const numbers = (...values: (number | string)[]): string => ["seq", ...values].join("\n");
const counts = ({ report }: LogContent) =>
  Object.fromEntries(TROUBLE_KINDS.filter((kind) => report.troubles[kind].count > 0).map((kind) => [kind, report.troubles[kind].count]));
const runs = (content: LogContent): number[][] => content.links.map((link) => link.runs);
const span = (from: number, until: number): number[] => Array.from({ length: until - from }, (_, k) => from + k);
/** Rows "seq,t" with one packet each 20 ms from a time on. */
const timed = (values: readonly number[], fromS: number): string[] => values.map((value, k) => `${value},${(fromS + 0.02 * k).toFixed(3)}`);

describe("packets and losses", () => {
  it("counts missing numbers as lost", () => {
    const content = read(numbers(10, 11, 14, 15, 17), SEQ);
    expect(content.links).toMatchObject([{ firstNumber: 10, runs: [2, 2, 2, 1, 1], packets: 8, lost: 3 }]);
    expect(counts(content)).toEqual({});
  });
  it("takes received or lost from its column, and missing numbers as lost too", () => {
    const content = read("seq,ok\n0,0\n1,yes\n2,lost\n4,1\n", { number: { column: "seq" }, received: "ok" });
    expect(runs(content)).toEqual([[0, 1, 1, 2, 1]]);
  });
  it("reads a column in which a 1 means lost, unless the cell says it in words", () => {
    expect(runs(read("seq,lost\n0,0\n1,1\n2,0\n", { number: { column: "seq" }, received: "lost", receivedMarks: "lost" }))).toEqual([[1, 1, 1]]);
    expect(runs(read("seq,lost\n0,ok\n1,lost\n2,ok\n", { number: { column: "seq" }, received: "lost", receivedMarks: "lost" }))).toEqual([[1, 1, 1]]);
  });
  it("needs no number where every row says what became of its packet", () => {
    expect(runs(read("ok\n1\n1\n0\n1\n", { received: "ok" }))).toEqual([[2, 1, 1]]);
  });
  it("keeps sources and receivers apart, rows in any mixture", () => {
    const content = read("seq,from,to\n0,a,x\n0,a,y\n5,b,x\n1,a,x\n3,a,y\n6,b,x\n", { number: { column: "seq" }, source: "from", receiver: "to" });
    expect(content.links.map(({ source, receiver, runs: lengths }) => [source, receiver, lengths])).toEqual([
      ["a", "x", [2]],
      ["a", "y", [1, 2, 1]],
      ["b", "x", [2]],
    ]);
  });
  it("reads a file without a header by places, with semicolons and decimal commas", () => {
    const content = read("0;0,00;-70,5\n1;0,02;-71,5\n3;0,06;-69,5\n", {
      header: false,
      delimiter: ";",
      decimal: ",",
      number: { column: 1 },
      time: { column: 2 },
      rssi: 3,
    });
    expect(content.links[0]).toMatchObject({ runs: [2, 1, 1], rssi: { count: 3, meanDbm: -70.5, minDbm: -71.5, maxDbm: -69.5 } });
    expect(content.links[0].rssi?.stdDb).toBeCloseTo(1, 12);
  });
  it("measures the interval, jitter and losses notwithstanding", () => {
    const rows = span(0, 2000)
      .filter((k) => k % 7 !== 3)
      .map((k) => `${k},${(20 * k + ((k * 7919) % 10)).toFixed(1)}`);
    const content = read(["seq,t", ...rows].join("\n"), { number: { column: "seq" }, time: { column: "t", unit: "ms" } });
    expect(content.links[0].intervalS).toBeCloseTo(0.02, 4);
    expect(read(numbers(0, 1), { ...(SEQ as object), periodS: 0.1 }).links[0].intervalS).toBe(0.1);
    expect(read(numbers(0, 1), SEQ).links[0].intervalS).toBeNull();
  });
  it("counts packets and losses by the hour of the day", () => {
    const content = read("seq,t\n0,2026-03-11T05:59:59.99\n1,2026-03-11T06:00:00.01\n3,2026-03-11T06:00:00.05\n", {
      number: { column: "seq" },
      time: { column: "t", unit: "iso" },
    });
    const { hours } = content.links[0];
    expect(hours?.[5]).toEqual({ packets: 1, lost: 0 });
    expect(hours?.[6]).toEqual({ packets: 3, lost: 1 });
    expect(hours?.reduce((sum, { packets }) => sum + packets, 0)).toBe(content.links[0].packets);
  });
});

describe("numbers that do not simply count on", () => {
  it("puts late rows in their place", () => {
    const content = read(numbers(1, 2, 5, 4, 3, 6), SEQ);
    expect(runs(content)).toEqual([[6]]);
    expect(counts(content)).toEqual({ "out-of-order": 2 });
    expect(content.report.troubles["out-of-order"].first[0]).toMatchObject({ line: 5, value: "4" });
  });
  it("lets the trace begin earlier when the first rows are unordered", () => {
    expect(read(numbers(7, 5, 6, 8), SEQ).links[0]).toMatchObject({ firstNumber: 5, runs: [4] });
  });
  it("counts a number that is there twice once, as received when one of them was", () => {
    const content = read("seq,ok\n0,1\n1,0\n1,1\n2,1\n2,0\n3,1\n", { number: { column: "seq" }, received: "ok" });
    expect(runs(content)).toEqual([[4]]);
    expect(counts(content)).toEqual({ duplicate: 2 });
  });
  it.each([
    [8, 256],
    [16, 65_536],
    [32, 4_294_967_296],
  ])("recognises a counter of %i bits that wraps", (_, wrapsAt) => {
    const content = read(numbers(...span(wrapsAt - 5, wrapsAt - 1), 1, 2, 3), SEQ);
    expect(runs(content)).toEqual([[4, 2, 3]]);
    expect(counts(content)).toEqual({ wrapped: 1 });
  });
  it("wraps where the user says so", () => {
    const content = read(numbers(97, 98, 99, 0, 2), { number: { column: "seq", wrapsAt: 100 } });
    expect(runs(content)).toEqual([[4, 1, 1]]);
    expect(counts(content)).toEqual({ wrapped: 1 });
  });
  it("refuses a number outside of the counter, with the permitted ones", () => {
    const content = read(numbers(97, 98, 140, 99), { number: { column: "seq", wrapsAt: 100 } });
    expect(content.report.troubles["bad-row"].first).toEqual([
      { line: 4, link: "", value: "140", message: "Packet number 140 lies outside of the counter; permitted: 0 to 99. The row is left out." },
    ]);
  });
  it("puts a late row from before a wrap in its place", () => {
    const content = read(numbers(65_533, 65_534, 0, 65_535, 1), SEQ);
    expect(runs(content)).toEqual([[5]]);
    expect(counts(content)).toEqual({ wrapped: 1, "out-of-order": 1 });
  });
  it("takes a fall to a number that is counted on from for a restart, and counts no loss there", () => {
    const content = read(numbers(...span(5000, 5100), ...span(0, 50)), SEQ);
    expect(runs(content)).toEqual([[150]]);
    expect(counts(content)).toEqual({ reset: 1 });
    expect(content.report.troubles.reset.first[0]).toMatchObject({ line: 102, value: "0" });
  });
  it("takes a fall to 0 for a restart also where the counter could have come round with many losses", () => {
    const content = read(numbers(...span(55_000, 55_050), ...span(0, 20)), { number: { column: "seq", wrapsAt: 65_536 } });
    expect(runs(content)).toEqual([[70]]);
    expect(counts(content)).toEqual({ reset: 1 });
  });
  it("counts losses over a wrap of the counter", () => {
    const content = read(numbers(...span(65_400, 65_450), ...span(100, 120)), { number: { column: "seq", wrapsAt: 65_536 } });
    expect(runs(content)).toEqual([[50, 186, 20]]);
    expect(counts(content)).toEqual({ wrapped: 1, gap: 1 });
  });
  it("recognises a restart soon after the beginning, whose numbers were all there already", () => {
    const content = read(numbers(...span(0, 300), ...span(0, 100)), SEQ);
    expect(runs(content)).toEqual([[400]]);
    expect(counts(content)).toEqual({ reset: 1 });
  });
  it("does not count a stray number as used, in the middle nor at the end", () => {
    expect(read(numbers(1, 2, 900_000, 3, 4, 700_000), SEQ).report).toMatchObject({ rows: 6, rowsUsed: 4, troubles: { "bad-row": { count: 2 } } });
  });
  it("leaves a number out that fits neither before nor after", () => {
    const content = read(numbers(1, 2, 987_654, 3, 4), SEQ);
    expect(runs(content)).toEqual([[4]]);
    expect(counts(content)).toEqual({ "bad-row": 1 });
    expect(content.report.troubles["bad-row"].first[0]).toMatchObject({ line: 4, value: "987654" });
  });
  it("leaves a last number out that nothing confirms", () => {
    expect(runs(read(numbers(1, 2, 3, 500_000), SEQ))).toEqual([[3]]);
  });
  it("counts an outage as lost and reports it as a gap", () => {
    const content = read(numbers(1, 2, ...span(300, 310)), SEQ);
    expect(runs(content)).toEqual([[2, 297, 10]]);
    expect(counts(content)).toEqual({ gap: 1 });
  });
  it("counts an outage longer than its window of late rows", () => {
    expect(runs(read(numbers(1, 2, ...span(5000, 5010)), SEQ))).toEqual([[2, 4997, 10]]);
  });
  it("does not take ten bad rows for ten restarts", () => {
    const content = read(numbers(...span(0, 100), 70_000, 100, 80_000, 101, 102), SEQ);
    expect(runs(content)).toEqual([[103]]);
    expect(counts(content)).toEqual({ "bad-row": 2 });
  });
});

describe("what the clock decides", () => {
  const header = ["seq,t"];
  it("counts an outage that is longer than the counter, by the time that passed", () => {
    // 8 bits at 20 ms: the counter comes round every 5.12 s; the link is away for 1000 packets
    const before = timed(
      span(0, 200).map((k) => k % 256),
      0,
    );
    const after = timed(
      span(1200, 1300).map((k) => k % 256),
      0.02 * 1200,
    );
    const content = read([...header, ...before, ...after].join("\n"), { number: { column: "seq", wrapsAt: 256 }, time: { column: "t" } });
    expect(runs(content)).toEqual([[200, 1000, 100]]);
    expect(content.report.troubles.gap.count).toBe(1);
  });
  it("takes a jump ahead without the time for it for a restart", () => {
    const content = read([...header, ...timed(span(0, 100), 0), ...timed(span(20_000, 20_050), 2)].join("\n"), TIMED);
    expect(runs(content)).toEqual([[150]]);
    expect(counts(content)).toEqual({ reset: 1 });
  });
  it("takes the same jump with the time for it for an outage", () => {
    const content = read([...header, ...timed(span(0, 100), 0), ...timed(span(20_000, 20_050), 400)].join("\n"), TIMED);
    expect(runs(content)).toEqual([[100, 19_900, 50]]);
    expect(counts(content)).toEqual({ gap: 1 });
  });
  it("reports a clock that is set ahead or back, and loses nothing by it", () => {
    const content = read([...header, ...timed(span(0, 100), 0), ...timed(span(100, 200), 3602), ...timed(span(200, 300), 10)].join("\n"), TIMED);
    expect(runs(content)).toEqual([[300]]);
    expect(counts(content)).toEqual({ "clock-jump": 2 });
    const [ahead, back] = content.report.troubles["clock-jump"].first;
    expect(ahead).toMatchObject({ line: 102, value: "3602.000" });
    expect(ahead.message).toMatch(/goes ahead by/);
    expect(back.message).toMatch(/goes back by/);
  });
  it("reports a pause where there are no numbers to say what was lost", () => {
    const rows = [...span(0, 50).map((k) => `1,${0.02 * k}`), ...span(0, 50).map((k) => `1,${60 + 0.02 * k}`)];
    const content = read(["ok,t", ...rows].join("\n"), { received: "ok", time: { column: "t" } });
    expect(counts(content)).toEqual({ gap: 1 });
  });
});

describe("rounds, one counter for all links", () => {
  const ROUND: MappingInput = { number: { column: "seq", kind: "round" }, source: "from" };
  it("counts rounds that others saw as lost at both ends", () => {
    const content = read("seq,from\n0,a\n1,a\n2,a\n2,b\n3,a\n3,b\n4,a\n", ROUND);
    expect(content.links).toMatchObject([
      { source: "a", runs: [5], lostBefore: 0, lostAfter: 0 },
      { source: "b", runs: [0, 2, 2, 1], packets: 5, lost: 3, lostBefore: 2, lostAfter: 1 },
    ]);
  });
  it("fills the ends of links that lie apart by their own neighbours only, and by way of others", () => {
    const from = (source: string, begin: number, end: number) => span(begin, end).map((k) => `${k},${source}`);
    const rows = [...from("a", 0, 10), ...from("b", 8, 20), ...from("c", 18, 30), ...from("late", 500, 510)];
    expect(read(["seq,from", ...rows].join("\n"), ROUND).links).toMatchObject([
      { source: "a", firstNumber: 0, runs: [10, 20], lostBefore: 0, lostAfter: 20 },
      { source: "b", firstNumber: 0, runs: [0, 8, 12, 10], lostBefore: 8, lostAfter: 10 },
      { source: "c", firstNumber: 0, runs: [0, 18, 12], lostBefore: 18, lostAfter: 0 },
      { source: "late", firstNumber: 500, runs: [10], lostBefore: 0, lostAfter: 0 },
    ]);
  });
  it("leaves the ends alone where each source counts for itself", () => {
    const content = read("seq,from\n0,a\n1,a\n2,a\n2,b\n3,a\n3,b\n4,a\n", { number: { column: "seq" }, source: "from" });
    expect(content.links[1]).toMatchObject({ runs: [2], lost: 0 });
  });
  it("compares numbers of a link that begins after the counter wrapped", () => {
    const rows = [...span(65_530, 65_546).map((k) => `${k % 65_536},a`)];
    rows.push("12,a", "12,b", "13,a", "13,b");
    const content = read(["seq,from", ...rows].join("\n"), { ...(ROUND as object), number: { column: "seq", kind: "round", wrapsAt: 65_536 } });
    expect(content.links[1]).toMatchObject({ runs: [0, 18, 2], lostBefore: 18 });
  });
});

describe("rows that cannot be read", () => {
  it("are named by line with what is wrong, the value and what is permitted", () => {
    const text = "seq,t,ok,rssi\n0,0,1,-70\nx,0.02,1,-70\n2,0.04,maybe,-70\n3,0.06\n4,later,1,-70\n5,0.1,1,loud\n6,0.12,1,-70,9\n7,0.14,1,\n";
    const content = read(text, { number: { column: "seq" }, time: { column: "t" }, received: "ok", rssi: "rssi" });
    expect(content.report.troubles["bad-row"].first.map(({ line, value, message }) => `${line} ${value}: ${message}`)).toEqual([
      '3 x: "x" is no packet number; permitted: whole numbers from 0. The row is left out.',
      '4 maybe: "maybe" does not say whether the packet was received; permitted: 1/0, true/false, yes/no, ok/lost, received/lost. The row is left out.',
      "5 3,0.06: The row has 2 cells, the first row has 4; it is left out.",
      '6 later: "later" is no time in s; the packet counts, its time does not.',
      '7 loud: "loud" is no RSSI; permitted: -150 to 50 dBm. The packet counts, its RSSI does not.',
      "8 6,0.12,1,-70,9: The row has 5 cells, the first row has 4; it is left out.",
    ]);
    expect(content.report).toMatchObject({ rows: 8, rowsUsed: 4 });
    expect(content.links[0].rssi?.count).toBe(2);
  });
  it("may stand before the header, as a logger's remarks do", () => {
    const content = read("# logger 2\nfirmware 1.4, bay 3\nseq,t,from\n0,0,a\n1,0.02,a\n3,0.06,a\n", {
      number: { column: "seq" },
      time: { column: "t" },
      source: "from",
    });
    expect(runs(content)).toEqual([[2, 1, 1]]);
    expect(content.report).toMatchObject({ rows: 5, rowsUsed: 3 });
    expect(content.report.troubles["bad-row"].first).toMatchObject([
      { line: 1, value: "# logger 2", message: "The line stands before the table; it is left out." },
      { line: 2, value: "firmware 1.4, bay 3" },
    ]);
  });
  it("may leave the RSSI out at their end", () => {
    const content = read("seq,ok,rssi\n0,1,-70\n1,0\n2,1\n", { number: { column: "seq" }, received: "ok", rssi: "rssi" });
    expect(runs(content)).toEqual([[1, 1, 1]]);
    expect(content.links[0].rssi?.count).toBe(1);
    expect(counts(content)).toEqual({});
  });
  it("are no trouble when they are empty or only end with a delimiter", () => {
    const content = read("seq,t\n0,1,\n,\n1,2,\n\n", { number: { column: "seq" } });
    expect(content.report).toMatchObject({ rows: 2, rowsUsed: 2 });
    expect(counts(content)).toEqual({});
  });
  it("are all counted, and the first 200 of a kind kept", () => {
    const content = read(numbers(1, 2, ...Array.from({ length: 500 }, () => "?"), 3), SEQ);
    expect(content.report.troubles["bad-row"].count).toBe(500);
    expect(content.report.troubles["bad-row"].first).toHaveLength(200);
  });
});

describe("a mapping that does not fit the file", () => {
  const refused = (text: string, mapping: MappingInput): string[] => {
    const result = outcome(text, mapping);
    return result.ok ? [] : result.issues.map(({ message }) => message);
  };
  it("is refused with the columns that there are", () => {
    expect(refused("n,t\n1,2\n", SEQ)).toEqual([
      'The packet number is said to stand in column "seq", which the file does not have; it has "n", "t".',
    ]);
    expect(refused("n,t\n1,2\n", { number: { column: 3 } })).toEqual(["The packet number is said to stand in column 3; the file has 2 columns."]);
    expect(refused("1,2\n", { header: false, number: { column: "n" } })).toEqual([
      'The packet number is said to stand in column "n", but the file is read as having no header; permitted: column 1 to 2.',
    ]);
    expect(refused("n,n\n1,2\n", { number: { column: "n" } })[0]).toMatch(/of which the file has 2; choose it by its place, 1 to 2/);
    expect(refused("n,t\n1,2\n", { number: { column: "n" }, time: { column: 1 } })[0]).toMatch(/chosen for the packet number and for the time/);
  });
  it("is refused without a number and without a received column", () => {
    expect(columnMappingSchema.safeParse({ time: { column: "t" } }).error?.issues[0].message).toMatch(
      /Neither a packet number nor a received column/,
    );
  });
  it("is refused when no row can be used, with the first reason", () => {
    expect(refused(numbers("a", "b"), SEQ)).toEqual([
      'None of 2 rows can be used. Line 2: "a" is no packet number; permitted: whole numbers from 0. The row is left out.',
    ]);
    expect(refused("", SEQ)).toEqual(["The file has no rows."]);
  });
  it("names too many links instead of filling the memory", () => {
    const content = read(["seq,from", ...span(0, 2100).map((k) => `${k},node ${k}`)].join("\n"), { number: { column: "seq" }, source: "from" });
    expect(content.links).toHaveLength(2000);
    expect(content.report.troubles["bad-row"].count).toBe(100);
    expect(content.report.troubles["bad-row"].first[0].message).toMatch(/more than 2000 links; are source and receiver the right columns/);
  });
});

describe("any file at all", () => {
  const number = fc.oneof(
    fc.nat(300),
    fc.integer({ min: 65_500, max: 65_560 }),
    fc.constantFrom("", "x", "-1", "4294967295", "9007199254740991", "99999999999999999999"),
  );
  const time = fc.oneof(
    fc.double({ min: -10, max: 1e10, noNaN: true }),
    fc.constantFrom("", "0", "1773208720", "2026-03-11T05:58:40.02Z", "soon"),
    fc.integer({ min: 0, max: 50 }),
  );
  const row = fc
    .tuple(
      number,
      time,
      fc.constantFrom("a", "b", "", '"q'),
      fc.constantFrom("1", "0", "ok", "lost", "?", ""),
      fc.constantFrom("-70", "-71.5", "", "loud", "1e300"),
    )
    .map((cells) => cells.join(","));
  const anyFile = fc
    .array(fc.oneof({ weight: 20, arbitrary: row }, { weight: 1, arbitrary: fc.string() }), { maxLength: 150 })
    .map((rows) => ["seq,t,from,ok,rssi", ...rows].join("\n"));

  it("gives content that the schemas take, whose counts agree with its run lengths", () => {
    fc.assert(
      fc.property(
        anyFile,
        fc.constantFrom("sequence", "round"),
        fc.constantFrom("s", "iso"),
        fc.constantFrom(null, 256, 65_536),
        fc.boolean(),
        (text, kind, unit, wrapsAt, marked) => {
          const result = outcome(text, {
            number: { column: "seq", kind, wrapsAt },
            time: { column: "t", unit },
            source: "from",
            received: marked ? "ok" : null,
            rssi: "rssi",
          });
          if (!result.ok) return;
          const { links, report } = result.value;
          expect(readReportSchema.parse(report)).toEqual(report);
          expect(report.rowsUsed).toBeLessThanOrEqual(report.rows);
          for (const link of links) {
            expect(linkTraceSchema.parse(link)).toEqual(link);
            expect(link.runs.slice(1).every((length) => length > 0)).toBe(true);
            expect(countTrace(link.runs)).toMatchObject({ packets: link.packets, lost: link.lost });
          }
        },
      ),
      { seed: 13, numRuns: 600 },
    );
  });
});

describe("any process, written down and read again", () => {
  /** Bits of a Gilbert-Elliott channel whose first and last packets arrive. */
  const traces = fc
    .record({ bits: fc.array(fc.integer({ min: 0, max: 9 }), { minLength: 3, maxLength: 400 }), loss: fc.integer({ min: 0, max: 6 }) })
    .map(({ bits, loss }) => bits.map((value, k) => (k === 0 || k === bits.length - 1 ? 0 : value < loss ? 1 : 0)));

  const runsOf = (bits: readonly number[]): number[] => {
    const lengths = [0];
    for (const bit of bits) {
      if ((lengths.length % 2 === 0) === (bit === 1)) lengths[lengths.length - 1]++;
      else lengths.push(1);
    }
    return lengths;
  };

  it("has the same run lengths with numbers that wrap and neighbours that change places", () => {
    fc.assert(
      fc.property(
        traces,
        fc.constantFrom(256, 65_536, 4_294_967_296),
        fc.nat(300),
        fc.boolean(),
        fc.nat(3),
        (bits, wrapsAt, before, said, stride) => {
          const begin = Math.max(0, wrapsAt - before);
          const received = bits.flatMap((bit, k) => (bit === 0 ? [(begin + k) % wrapsAt] : []));
          if (stride > 0) for (let i = 1; i + 2 < received.length; i += stride + 1) received.splice(i, 2, received[i + 1], received[i]);
          const content = read(numbers(...received), { number: { column: "seq", wrapsAt: said ? wrapsAt : null } });
          expect(runs(content)).toEqual([runsOf(bits)]);
          expect(counts(content).reset).toBeUndefined();
        },
      ),
      { seed: 11, numRuns: 400 },
    );
  });

  it("has the same run lengths with one row per packet, each row twice, over links in any mixture", () => {
    fc.assert(
      fc.property(traces, traces, fc.infiniteStream(fc.boolean()), (a, b, turns) => {
        const rows: string[] = [];
        let [i, j] = [0, 0];
        while (i < a.length || j < b.length) {
          if (j >= b.length || (i < a.length && turns.next().value)) rows.push(`${i},a,${1 - a[i++]}`);
          else rows.push(`${j},b,${1 - b[j++]}`);
        }
        const text = ["seq,from,ok", ...rows.flatMap((row) => [row, row])].join("\r\n");
        const content = read(text, { number: { column: "seq" }, source: "from", received: "ok" });
        expect(new Map(content.links.map(({ source, runs: lengths }) => [source, lengths]))).toEqual(
          new Map([
            [content.links[0].source, runsOf(content.links[0].source === "a" ? a : b)],
            [content.links[1].source, runsOf(content.links[1].source === "a" ? a : b)],
          ]),
        );
        expect(counts(content)).toEqual({ duplicate: a.length + b.length });
      }),
      { seed: 12, numRuns: 200 },
    );
  });
});
