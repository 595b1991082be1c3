/** What a file looks like: its delimiter, decimal sign and header, and which column is probably what. A guess; the user has the last word. */
import { decimalNumber, readInstant, saysItself, wholeNumber, yesOrNo } from "./cells.ts";
import { csvRows } from "./csv-rows.ts";
import { type ColumnMapping, DELIMITERS, MAX_PREAMBLE, type Mapped } from "./types.ts";

export interface LogPreview {
  delimiter: ColumnMapping["delimiter"];
  decimal: ColumnMapping["decimal"];
  header: string[] | null;
  /** First rows after the header. */
  rows: string[][];
  guess: MappingGuess;
}

export interface MappingGuess {
  /** null: no column looks like a packet number or like received/lost. */
  mapping: ColumnMapping | null;
  /** One sentence per guess. */
  reasons: string[];
}

/** From the beginning of a file (64 kB are plenty). The last line may be cut off. */
export function previewLog(text: string, rowsWanted = 50): LogPreview {
  const delimiter = guessDelimiter(text);
  const all = firstRows(text, delimiter, rowsWanted + MAX_PREAMBLE);
  const rows = all.slice(preambleRows(all), preambleRows(all) + rowsWanted + 1);
  const decimal = guessDecimal(rows, delimiter);
  const header = rows.length > 0 && looksLikeHeader(rows, decimal) ? rows[0].map((cell) => cell.trim()) : null;
  const sample = header ? rows.slice(1) : rows.slice(0, rowsWanted);
  return { delimiter, decimal, header, rows: sample, guess: guessMapping(header, sample, { delimiter, decimal }) };
}

/** Loggers write a few lines about themselves before the header: rows at the beginning that are narrower than the usual one. */
export function preambleRows(rows: readonly (readonly string[])[]): number {
  const usual = mostFrequent(rows.map((cells) => cells.length));
  const first = rows.findIndex((cells) => cells.length >= usual);
  return first > 0 && first <= MAX_PREAMBLE ? first : 0;
}

/** The first rows of a text, split as the reader will split them. */
export function firstRows(text: string, delimiter: string, wanted: number): string[][] {
  const rows: string[][] = [];
  const splitter = csvRows(delimiter, ({ cells }) => {
    if (rows.length < wanted) rows.push(cells);
  });
  // A line that the sample cuts off is not a row.
  const end = Math.max(text.lastIndexOf("\n"), text.lastIndexOf("\r"));
  const whole = text.length < 1000 || end < 0 ? text : text.slice(0, end + 1);
  splitter.push(whole);
  splitter.end();
  return rows;
}

/** The one that gives most of the first lines the same number of cells, and more than one. */
function guessDelimiter(text: string): ColumnMapping["delimiter"] {
  let best: ColumnMapping["delimiter"] = ",";
  let bestScore = 0;
  for (const delimiter of DELIMITERS) {
    const widths = firstRows(text, delimiter, 40).map((cells) => cells.length);
    const usual = mostFrequent(widths);
    if (usual < 2) continue;
    const agreeing = widths.filter((width) => width === usual).length / widths.length;
    // A comma may be the decimal sign: then any other delimiter that fits as well is the true one.
    const score = agreeing + (delimiter === "," ? 0 : 0.05) + usual / 10_000;
    if (score > bestScore) {
      best = delimiter;
      bestScore = score;
    }
  }
  return best;
}

function mostFrequent(values: readonly number[]): number {
  const counts = new Map<number, number>();
  for (const value of values) counts.set(value, (counts.get(value) ?? 0) + 1);
  return [...counts].sort((a, b) => b[1] - a[1])[0]?.[0] ?? 0;
}

function guessDecimal(rows: readonly string[][], delimiter: string): "." | "," {
  if (delimiter === ",") return ".";
  const cells = rows.flat();
  const commas = cells.filter((cell) => /^\s*-?\d+,\d+\s*$/.test(cell)).length;
  const points = cells.filter((cell) => /^\s*-?\d+\.\d+\s*$/.test(cell)).length;
  return commas > points ? "," : ".";
}

/** A header has no number and no time in it, while the row below has. */
function looksLikeHeader(rows: readonly string[][], decimal: "." | ","): boolean {
  const isValue = (cell: string): boolean => !Number.isNaN(decimalNumber(cell, decimal)) || isIso(cell);
  return !rows[0].some(isValue) && (rows.length === 1 || rows[1].some(isValue) || rows[1].some((cell) => yesOrNo(cell) !== null));
}

const scratch = { seconds: 0, hour: 0 };
const isIso = (cell: string): boolean => readInstant(cell, "iso", ".", scratch);

/** Names as people write them, without what is not a letter or digit. Order: the surest first. */
const NAMES: Record<Mapped, readonly string[]> = {
  number: [
    ...["seq", "seqno", "seqnr", "seqnum", "sequence", "sequenceno", "sequencenumber", "packetno", "packetnumber", "pktno", "pktid", "packetid"],
    ...["round", "roundno", "roundnr", "roundnumber", "rnd", "cycle", "packet", "pkt", "counter", "count", "number", "nr", "no", "n", "id", "index"],
  ],
  time: ["time", "t", "timestamp", "ts", "datetime", "date", "rxtime", "clock", "elapsed"],
  source: ["source", "src", "sender", "from", "transmitter", "origin", "initiator", "tx", "txnode", "sourcenode", "node", "nodeid", "sensor"],
  receiver: ["receiver", "dst", "dest", "destination", "to", "sink", "rx", "rxnode", "receivernode", "target", "actuator"],
  received: ["received", "ok", "rcvd", "recv", "delivered", "success", "rxok", "crcok", "status", "result", "state", "lost", "loss", "missed"],
  rssi: ["rssi", "rssidbm", "rss", "dbm", "rxpower", "signal", "level", "power"],
};
const ROUND_NAMES = new Set(["round", "roundno", "roundnr", "roundnumber", "rnd", "cycle"]);
const LOST_NAMES = new Set(["lost", "loss", "missed"]);
const UNIT_ENDING = /(?:^|[_ ([.-])(ns|us|µs|μs|ms|s|sec|seconds|dbm|db)[)\]]*$/i;

const bare = (name: string): string => name.toLowerCase().replace(/[^a-z0-9]/g, "");

export function guessMapping(
  header: readonly string[] | null,
  rows: readonly (readonly string[])[],
  style: { delimiter: ColumnMapping["delimiter"]; decimal: ColumnMapping["decimal"] } = { delimiter: ",", decimal: "." },
): MappingGuess {
  const { decimal } = style;
  const width = Math.max(header?.length ?? 0, ...rows.slice(0, 20).map((row) => row.length), 0);
  const columns = Array.from({ length: width }, (_, at) => rows.map((row) => row[at] ?? "").filter((cell) => cell.trim() !== ""));
  const taken = new Map<Mapped, number>();
  const reasons: string[] = [];
  const free = (at: number): boolean => ![...taken.values()].includes(at);
  const ref = (at: number): string | number => (header?.[at] && header.indexOf(header[at]) === header.lastIndexOf(header[at]) ? header[at] : at + 1);
  const name = (at: number): string => (typeof ref(at) === "number" ? `column ${ref(at)}` : `column "${ref(at)}"`);

  const fits: Record<Mapped, (cells: readonly string[]) => boolean> = {
    number: (cells) => mostly(cells, (cell) => !Number.isNaN(wholeNumber(cell))),
    time: (cells) => mostly(cells, (cell) => isIso(cell) || !Number.isNaN(decimalNumber(cell, decimal))),
    source: () => true,
    receiver: () => true,
    received: (cells) => mostly(cells, (cell) => yesOrNo(cell) !== null),
    rssi: (cells) => mostly(cells, (cell) => !Number.isNaN(decimalNumber(cell, decimal))),
  };
  const byName = (what: Mapped): void => {
    if (!header) return;
    for (const wanted of NAMES[what]) {
      const at = header.findIndex((title, column) => {
        const short = bare(title.replace(UNIT_ENDING, ""));
        return free(column) && (short === wanted || bare(title) === wanted) && (columns[column].length === 0 || fits[what](columns[column]));
      });
      if (at < 0) continue;
      taken.set(what, at);
      reasons.push(`${name(at)} is taken for ${WORDS[what]}, by its name.`);
      return;
    }
  };
  const byContent = (what: Mapped, looks: (cells: readonly string[]) => boolean): void => {
    if (taken.has(what)) return;
    const at = columns.findIndex((cells, column) => free(column) && cells.length > 0 && looks(cells));
    if (at < 0) return;
    taken.set(what, at);
    reasons.push(`${name(at)} is taken for ${WORDS[what]}, by what stands in it.`);
  };

  for (const what of ["number", "rssi", "received", "time", "source", "receiver"] as const) byName(what);
  byContent("time", (cells) => cells.every(isIso));
  byContent("received", (cells) => cells.every((cell) => yesOrNo(cell) !== null) && (!header || cells.some(saysItself)));
  byContent("rssi", (cells) =>
    mostly(cells, (cell) => {
      const dbm = decimalNumber(cell, decimal);
      return dbm <= -15 && dbm >= -127;
    }),
  );
  byContent("number", (cells) => mostly(cells, (cell) => !Number.isNaN(wholeNumber(cell))) && counts(cells));

  const at = (what: Mapped): string | number | null => {
    const column = taken.get(what);
    return column === undefined ? null : ref(column);
  };
  const number = at("number");
  const received = at("received");
  const time = at("time");
  if (number === null && received === null) return { mapping: null, reasons };
  const title = (what: Mapped): string => header?.[taken.get(what) ?? -1] ?? "";
  const isRound = ROUND_NAMES.has(bare(title("number").replace(UNIT_ENDING, "")));
  const marksLost = LOST_NAMES.has(bare(title("received"))) && !columns[taken.get("received") ?? -1]?.some(saysItself);
  const unit = time === null ? "s" : guessUnit(title("time"), columns[taken.get("time") as number], decimal);
  if (isRound) reasons.push("The number counts rounds, one counter for all links.");
  if (marksLost) reasons.push("A 1 in that column is taken for a lost packet.");
  if (time !== null) reasons.push(unit === "iso" ? "Times are dates (ISO 8601)." : `Times are taken to be in ${unit}.`);
  return {
    mapping: {
      ...style,
      header: header !== null,
      number: number === null ? null : { column: number, kind: isRound ? "round" : "sequence", wrapsAt: null },
      time: time === null ? null : { column: time, unit },
      source: at("source"),
      receiver: at("receiver"),
      received,
      receivedMarks: marksLost ? "lost" : "received",
      rssi: at("rssi"),
      periodS: null,
    },
    reasons,
  };
}

const WORDS: Record<Mapped, string> = {
  number: "the packet number",
  time: "the time",
  source: "the source",
  receiver: "the receiver",
  received: "received or lost",
  rssi: "the RSSI",
};

/** Bad rows occur; nine tenths suffice. */
const mostly = (cells: readonly string[], test: (cell: string) => boolean): boolean => cells.filter(test).length >= 0.9 * cells.length;

/** Grows from row to row, or stays, in nearly all rows. */
function counts(cells: readonly string[]): boolean {
  const values = cells.map(wholeNumber);
  const up = values.filter((value, k) => k > 0 && value >= values[k - 1] && value - values[k - 1] <= 50).length;
  return values.length > 1 && up >= 0.7 * (values.length - 1) && values[0] !== values[values.length - 1];
}

/** From the header's ending, else from how large the values are and how far apart. */
function guessUnit(title: string, cells: readonly string[], decimal: "." | ","): "s" | "ms" | "us" | "ns" | "iso" {
  if (cells.length > 0 && mostly(cells, isIso)) return "iso";
  const ending = UNIT_ENDING.exec(title)?.[1]?.toLowerCase();
  if (ending === "ms" || ending === "ns") return ending;
  if (ending === "us" || ending === "µs" || ending === "μs") return "us";
  if (ending === "s" || ending === "sec" || ending === "seconds") return "s";
  const values = cells.map((cell) => decimalNumber(cell, decimal)).filter((value) => !Number.isNaN(value));
  const largest = Math.max(...values, 0);
  if (largest >= 1e17) return "ns";
  if (largest >= 1e14) return "us";
  if (largest >= 1e11) return "ms";
  if (largest >= 1e9 || values.some((value) => value !== Math.floor(value))) return "s";
  const steps = values.slice(1).map((value, k) => value - values[k]);
  const typical = steps.filter((step) => step > 0).sort((a, b) => a - b);
  const median = typical[Math.floor(typical.length / 2)] ?? 0;
  return median >= 2000 ? "us" : median >= 2 ? "ms" : "s";
}
