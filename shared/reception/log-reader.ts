/**
 * Reads a reception log that arrives in pieces: text in, links and report out. Keeps run lengths, counters and the first
 * troubles, so that memory grows with the number of bursts, not with the file. The same in worker, server and command line.
 */
import type { Issue } from "#shared/scenario/issues.ts";
import { decimalNumber, type Instant, RECEIVED_WORDS, readInstant, saysItself, wholeNumber, yesOrNo } from "./cells.ts";
import { type Columns, resolveColumns } from "./columns.ts";
import { type CsvRow, csvRows } from "./csv-rows.ts";
import { type Counter, LinkReader, type Packet } from "./link-reader.ts";
import { HIGHEST_DBM, LOWEST_DBM } from "./rssi-meter.ts";
import {
  type ColumnMapping,
  type LinkTrace,
  type LogContent,
  linkName,
  MAX_LINKS,
  MAX_PREAMBLE,
  MAX_TROUBLES,
  type ReadReport,
  TROUBLE_KINDS,
  type TroubleKind,
} from "./types.ts";
import { counted } from "./words.ts";

export type LogOutcome = { ok: true; value: LogContent } | { ok: false; issues: Issue[] };

export interface LogReader {
  push(text: string): void;
  /** Issues: the mapping does not fit the file, or nothing in it could be used. */
  finish(): LogOutcome;
}

export function logReader(mapping: ColumnMapping): LogReader {
  const report = emptyReport();
  const links = new Map<string, Map<string, LinkReader>>();
  const shared: Counter = counterOf(mapping);
  const isRound = mapping.number?.kind === "round";
  const packet: Packet = { number: 0, received: true, timeS: Number.NaN, hour: -1, rssiDbm: Number.NaN, line: 0, text: "", timeText: "" };
  const instant: Instant = { seconds: 0, hour: -1 };
  let columns: Columns | null = null;
  let issues: Issue[] | null = null;
  /** Why the first row is not where the table begins. */
  let refused: Issue[] | null = null;
  const preamble: { line: number; text: string }[] = [];
  let width = 0;
  /** Cells up to the last one that a packet cannot do without; an RSSI may be left out at the end of a row. */
  let needed = 0;
  let linkCount = 0;
  let lastLink: LinkReader | null = null;
  let unnumbered = 0;

  function trouble(kind: TroubleKind, line: number, link: string, value: string, message: () => string): void {
    const { first } = report.troubles[kind];
    report.troubles[kind].count++;
    if (first.length < MAX_TROUBLES) first.push({ line, link, message: kept(message()), value: kept(short(value)) });
  }

  const splitter = csvRows(mapping.delimiter, takeRow);

  function takeRow(row: CsvRow): void {
    if (issues) return;
    if (!columns) {
      columns = beginning(row);
      if (!columns || mapping.header) return;
    }
    // An empty line of a spreadsheet still has its delimiters.
    if (row.cells[0] === "" && row.cells.every(isEmpty)) return;
    report.rows++;
    if (read(row, columns)) {
      linkOf(row, columns)?.take(packet);
    }
  }

  function bad(line: number, value: string, message: () => string): false {
    trouble("bad-row", line, "", value, message);
    return false;
  }

  /** The columns when the table begins with this row. Rows before it, such as a logger's remarks, are left out. */
  function beginning({ cells, line }: CsvRow): Columns | null {
    const resolved = resolveColumns(mapping, mapping.header ? cells : null, cells.length);
    if (!resolved.ok) {
      // What the first row lacks is the answer when none fits.
      refused ??= resolved.issues;
      if (preamble.length < MAX_PREAMBLE) preamble.push({ line, text: cells.join(mapping.delimiter) });
      else issues = refused;
      return null;
    }
    for (const { line: before, text } of preamble) bad(before, text, () => "The line stands before the table; it is left out.");
    report.rows += preamble.length;
    width = cells.length;
    needed = 1 + Math.max(...Object.entries(resolved.columns).map(([what, at]) => (what === "rssi" ? -1 : at)));
    return resolved.columns;
  }

  /** Fills `packet`; false when the row cannot be used. */
  function read(row: CsvRow, at: Columns): boolean {
    const { cells, line } = row;
    if (row.unclosed) return bad(line, cells.join(mapping.delimiter), () => "A quote is opened and not closed; the row is left out.");
    if (cells.length < needed || (cells.length > width && cells.slice(width).some((cell) => cell.trim() !== ""))) {
      return bad(
        line,
        cells.join(mapping.delimiter),
        () => `The row has ${counted(cells.length, "cell")}, the first row has ${width}; it is left out.`,
      );
    }
    packet.line = line;
    packet.received = true;
    if (at.received >= 0) {
      const cell = cells[at.received];
      const said = yesOrNo(cell);
      if (said === null)
        return bad(
          line,
          cell,
          () => `"${short(cell)}" does not say whether the packet was received; permitted: ${RECEIVED_WORDS}. The row is left out.`,
        );
      packet.received = mapping.receivedMarks === "received" || saysItself(cell) ? said : !said;
    }
    if (at.number >= 0) {
      const cell = cells[at.number];
      const number = wholeNumber(cell);
      const { wrapsAt } = shared;
      if (Number.isNaN(number))
        return bad(line, cell, () => `"${short(cell)}" is no packet number; permitted: whole numbers from 0. The row is left out.`);
      if (shared.fixed && wrapsAt && number >= wrapsAt) {
        return bad(
          line,
          cell,
          () => `Packet number ${short(cell)} lies outside of the counter; permitted: 0 to ${wrapsAt - 1}. The row is left out.`,
        );
      }
      packet.number = number;
      packet.text = cell;
    } else {
      packet.number = unnumbered++;
      packet.text = "";
    }
    packet.timeS = Number.NaN;
    packet.hour = -1;
    packet.timeText = "";
    if (at.time >= 0 && mapping.time) {
      const cell = cells[at.time];
      if (readInstant(cell, mapping.time.unit, mapping.decimal, instant)) {
        packet.timeS = instant.seconds;
        packet.hour = instant.hour;
        packet.timeText = cell;
      } else if (packet.received || cell.trim() !== "") {
        bad(
          line,
          cell,
          () =>
            `"${short(cell)}" is no time ${mapping.time?.unit === "iso" ? "(YYYY-MM-DD hh:mm:ss)" : `in ${mapping.time?.unit}`}; the packet counts, its time does not.`,
        );
      }
    }
    packet.rssiDbm = Number.NaN;
    if (at.rssi >= 0 && packet.received) {
      const cell = cells[at.rssi] ?? "";
      const dbm = decimalNumber(cell, mapping.decimal);
      if (dbm >= LOWEST_DBM && dbm <= HIGHEST_DBM) packet.rssiDbm = dbm;
      else if (cell.trim() !== "") {
        bad(line, cell, () => `"${short(cell)}" is no RSSI; permitted: ${LOWEST_DBM} to ${HIGHEST_DBM} dBm. The packet counts, its RSSI does not.`);
      }
    }
    return true;
  }

  function linkOf({ cells, line }: CsvRow, at: Columns): LinkReader | null {
    const source = at.source >= 0 ? cells[at.source].trim() : "";
    const receiver = at.receiver >= 0 ? cells[at.receiver].trim() : "";
    report.rowsUsed++;
    if (lastLink?.source === source && lastLink.receiver === receiver) return lastLink;
    const known = links.get(source)?.get(receiver);
    if (known) {
      lastLink = known;
      return known;
    }
    if (linkCount >= MAX_LINKS || source.length > 120 || receiver.length > 120) {
      report.rowsUsed--;
      trouble("bad-row", line, "", `${source} > ${receiver}`, () =>
        linkCount >= MAX_LINKS
          ? `There are more than ${MAX_LINKS} links; are source and receiver the right columns? The row is left out.`
          : "A node's name has more than 120 characters; are source and receiver the right columns? The row is left out.",
      );
      return null;
    }
    linkCount++;
    const link = newLink(kept(source), kept(receiver));
    let bySource = links.get(link.source);
    if (!bySource) {
      bySource = new Map();
      links.set(link.source, bySource);
    }
    bySource.set(link.receiver, link);
    lastLink = link;
    return link;
  }

  function newLink(source: string, receiver: string): LinkReader {
    const name = linkName({ source, receiver });
    const before = lastLink;
    return new LinkReader(source, receiver, {
      counter: isRound ? shared : counterOf(mapping),
      numbered: mapping.number !== null,
      intervalS: mapping.periodS,
      report: (kind, line, value, message) => {
        // A stray number, of which only later rows show that it is one.
        if (kind === "bad-row") report.rowsUsed--;
        trouble(kind, line, name, value, message);
      },
      begin: (number) => (isRound && before && !before.restarted && shared.wrapsAt ? nearest(number, before.lastNumber, shared.wrapsAt) : number),
    });
  }

  function finish(): LogOutcome {
    splitter.end();
    const wrong = issues ?? (columns ? null : refused);
    if (wrong) return { ok: false, issues: wrong };
    if (!columns) return { ok: false, issues: [{ code: "empty-log", path: "file", message: "The file has no rows." }] };
    const readers = [...links.values()].flatMap((bySource) => [...bySource.values()]);
    const traces = readers.map((reader) => reader.finish());
    if (traces.length === 0) {
      const found = report.troubles["bad-row"].first[0];
      const why = found ? ` Line ${found.line}: ${found.message}` : "";
      return { ok: false, issues: [{ code: "empty-log", path: "file", message: `None of ${report.rows} rows can be used.${why}` }] };
    }
    if (isRound) fillEnds(traces, readers);
    return { ok: true, value: { links: traces, report } };
  }

  return { push: splitter.push, finish };
}

const isEmpty = (cell: string): boolean => cell === "";

const counterOf = (mapping: ColumnMapping): Counter => ({
  wrapsAt: mapping.number?.wrapsAt ?? null,
  fixed: (mapping.number?.wrapsAt ?? null) !== null,
});

/** A cell may be a whole page. */
const short = (text: string): string => (text.length > 80 ? `${text.slice(0, 79)}…` : text);

/** Slices of a file keep the whole piece of it alive; what is kept has to be a text of its own. */
const kept = (text: string): string => JSON.parse(JSON.stringify(text)) as string;

function emptyReport(): ReadReport {
  const troubles = Object.fromEntries(TROUBLE_KINDS.map((kind) => [kind, { count: 0, first: [] }]));
  return { rows: 0, rowsUsed: 0, troubles: troubles as unknown as ReadReport["troubles"] };
}

/** The number that is `raw` modulo wrapsAt and lies nearest to another one. */
function nearest(raw: number, other: number, wrapsAt: number): number {
  return raw + wrapsAt * Math.max(0, Math.round((other - raw) / wrapsAt));
}

/** Rounds are the same for all: one that others saw before a link's first or after its last packet was lost there. */
function fillEnds(traces: LinkTrace[], readers: readonly LinkReader[]): void {
  const comparable = traces
    .map((trace, k) => ({ trace, last: readers[k].lastNumber, restarted: readers[k].restarted }))
    .filter((link) => !link.restarted)
    .sort((a, b) => a.trace.firstNumber - b.trace.firstNumber);
  // Ranges that do not touch, not even by way of others, are recordings of different times, or counters that began anew.
  for (let begin = 0; begin < comparable.length; ) {
    const from = comparable[begin].trace.firstNumber;
    let until = comparable[begin].last;
    let end = begin + 1;
    for (; end < comparable.length && comparable[end].trace.firstNumber <= until; end++) until = Math.max(until, comparable[end].last);
    for (; begin < end; begin++) lengthen(comparable[begin].trace, comparable[begin].trace.firstNumber - from, until - comparable[begin].last);
  }
}

function lengthen(trace: LinkTrace, before: number, after: number): void {
  if (before > 0) {
    if (trace.runs[0] === 0) trace.runs[1] += before;
    else trace.runs.unshift(0, before);
  }
  if (after > 0) {
    if (trace.runs.length % 2 === 0) trace.runs[trace.runs.length - 1] += after;
    else trace.runs.push(after);
  }
  trace.firstNumber -= before;
  trace.lostBefore = before;
  trace.lostAfter = after;
  trace.packets += before + after;
  trace.lost += before + after;
}
