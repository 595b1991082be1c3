/**
 * Splits CSV text that arrives in pieces into rows (RFC 4180, and what people really write): quoted cells with delimiters,
 * quotes and line ends inside, LF, CRLF or CR, a byte order mark, empty lines. Only the piece at hand is kept.
 */

/** A quote that is not closed within so many lines is a stray one: the rest of the file is not one cell. */
const MAX_QUOTED_LINES = 20;

export interface CsvRow {
  cells: string[];
  /** Line of the file on which the row begins, counted from 1. */
  line: number;
  /** A quote was opened and never closed; the cells are split as if it stood for itself. */
  unclosed: boolean;
}

export interface CsvRows {
  push(text: string): void;
  end(): void;
}

export function csvRows(delimiter: string, take: (row: CsvRow) => void): CsvRows {
  let rest = "";
  let line = 0;
  let begun = false;
  /** Lines of a row whose quote is still open. */
  let open: string[] = [];
  const row: CsvRow = { cells: [], line: 0, unclosed: false };

  function give(cells: string[], at: number, unclosed: boolean): void {
    row.cells = cells;
    row.line = at;
    row.unclosed = unclosed;
    take(row);
  }

  function addLine(text: string): void {
    line++;
    if (open.length === 0) {
      if (text.indexOf('"') < 0) {
        if (text !== "") give(text.split(delimiter), line, false);
        return;
      }
      const cells = quotedCells(text, delimiter);
      if (cells) give(cells, line, false);
      else open = [text];
      return;
    }
    open.push(text);
    const cells = quotedCells(open.join("\n"), delimiter);
    if (cells) {
      const at = line - open.length + 1;
      open = [];
      give(cells, at, false);
    } else if (open.length > MAX_QUOTED_LINES) giveUp();
  }

  /** The first line's quote stands for itself; the lines after it are read again. */
  function giveUp(): void {
    const [first, ...others] = open;
    line -= open.length;
    open = [];
    line++;
    give(first.split(delimiter), line, true);
    for (const text of others) addLine(text);
  }

  function push(text: string): void {
    let buffer = rest + text;
    if (!begun && buffer !== "") {
      begun = true;
      if (buffer.charCodeAt(0) === 0xfeff) buffer = buffer.slice(1);
    }
    let from = 0;
    let lf = buffer.indexOf("\n");
    let cr = buffer.indexOf("\r");
    while (lf >= 0 || cr >= 0) {
      if (cr >= 0 && (lf < 0 || cr < lf)) {
        // A CR at the very end may be half of a CRLF.
        if (cr === buffer.length - 1) break;
        addLine(buffer.slice(from, cr));
        from = buffer.charCodeAt(cr + 1) === 10 ? cr + 2 : cr + 1;
        if (lf >= 0 && lf < from) lf = buffer.indexOf("\n", from);
        cr = buffer.indexOf("\r", from);
      } else {
        addLine(buffer.slice(from, lf));
        from = lf + 1;
        lf = buffer.indexOf("\n", from);
      }
    }
    rest = buffer.slice(from);
  }

  function end(): void {
    if (rest.endsWith("\r")) rest = rest.slice(0, -1);
    if (rest !== "") addLine(rest);
    rest = "";
    while (open.length > 0) giveUp();
  }

  return { push, end };
}

/** Cells of a line with quotes; null when a quote is still open at its end. */
function quotedCells(text: string, delimiter: string): string[] | null {
  const cells: string[] = [];
  let at = 0;
  for (;;) {
    if (text.charCodeAt(at) !== 34) {
      const end = text.indexOf(delimiter, at);
      cells.push(end < 0 ? text.slice(at) : text.slice(at, end));
      if (end < 0) return cells;
      at = end + delimiter.length;
      continue;
    }
    let cell = "";
    let from = at + 1;
    for (;;) {
      const quote = text.indexOf('"', from);
      if (quote < 0) return null;
      cell += text.slice(from, quote);
      if (text.charCodeAt(quote + 1) !== 34) {
        at = quote + 1;
        break;
      }
      cell += '"';
      from = quote + 2;
    }
    // What stands between the closing quote and the next delimiter belongs to the cell.
    const end = text.indexOf(delimiter, at);
    cells.push(cell + (end < 0 ? text.slice(at) : text.slice(at, end)));
    if (end < 0) return cells;
    at = end + delimiter.length;
  }
}
