/** Reception ratios as text: pasted from a table or CSV, row = sender, column = receiver, 0 to 1 or per cent. */
import { counted } from "#src/lib/format.ts";

export type MatrixRead = { ok: true; prr: number[][] } | { ok: false; problem: string };

const MOST = 120;

/** What stands between two values. A comma may also be the decimal sign: "0,9 0,8". */
function delimiterOf(text: string): string | RegExp {
  if (text.includes("\t")) return "\t";
  if (text.includes(";")) return ";";
  const decimalCommas = /^[\d\s,%]+$/.test(text) && /\d,\d+%?[ ]+\d/.test(text) && !/,\s|\s,/.test(text);
  return text.includes(",") && !decimalCommas ? "," : /\s+/;
}

const cells = (line: string, by: string | RegExp): string[] =>
  (typeof by === "string" ? line : line.trim()).split(by).map((part) =>
    part
      .trim()
      .replace(/^"(.*)"$/, "$1")
      .trim(),
  );

function numberIn(text: string, decimalComma: boolean): number | null {
  const percent = text.endsWith("%");
  const plain = (percent ? text.slice(0, -1).trim() : text).replace(decimalComma ? "," : /$^/, ".");
  if (plain === "" || plain === "-" || plain === "–") return 0;
  const value = Number(plain);
  if (!Number.isFinite(value)) return null;
  return percent ? value / 100 : value;
}

/** `nodes`: how many rows there have to be; null: as many as there are. The diagonal is not read. */
export function readMatrix(text: string, nodes: number | null): MatrixRead {
  const lines = text.split(/\r?\n/).filter((line) => line.trim() !== "");
  if (lines.length === 0) return { ok: false, problem: "Nothing is entered." };
  const by = delimiterOf(lines.join("\n"));
  const decimalComma = by !== ",";
  let table = lines.map((line) => cells(line, by));
  const isNumber = (cell: string) => numberIn(cell, decimalComma) !== null;
  // Names of nodes in the first row and column are taken for what they are; one word among numbers is a mistake, not a name.
  const width = Math.max(...table.map((row) => row.length));
  const headed = table.length === width + 1 || (table.length === width && width - 1 === nodes) || !table[0].slice(1).some(isNumber);
  if (headed && table.length > 1) table = table.slice(1);
  const rowsNamed = table.every((row) => row.length === table.length + 1);
  if (rowsNamed) table = table.map((row) => row.slice(1));
  const count = table.length;
  if (nodes !== null && count !== nodes)
    return { ok: false, problem: `${counted(count, "row")} entered; the floor has ${counted(nodes, "node")}, so ${nodes} are needed.` };
  if (count < 2 || count > MOST) return { ok: false, problem: `${counted(count, "row")} entered; permitted 2 to ${MOST}, one for each node.` };
  const prr: number[][] = [];
  let most = 0;
  for (const [i, row] of table.entries()) {
    if (row.length !== count)
      return { ok: false, problem: `Row ${i + 1} has ${counted(row.length, "value")}; ${count} are needed, one for each node.` };
    const read: number[] = [];
    for (const [j, cell] of row.entries()) {
      const value = i === j ? 0 : numberIn(cell, decimalComma);
      if (value === null) return { ok: false, problem: `Row ${i + 1}, column ${j + 1}: “${cell.slice(0, 20)}” is no number.` };
      if (value < 0) return { ok: false, problem: `Row ${i + 1}, column ${j + 1} is ${value}; permitted 0 to 1, or 0 to 100 for per cent.` };
      most = Math.max(most, value);
      read.push(value);
    }
    prr.push(read);
  }
  if (most > 100) return { ok: false, problem: `The largest value is ${most}; permitted 0 to 1, or 0 to 100 for per cent.` };
  // More than 1 anywhere: all of it is per cent.
  return { ok: true, prr: most > 1 ? prr.map((row) => row.map((value) => value / 100)) : prr };
}

export const matrixText = (prr: readonly number[][]): string => prr.map((row) => row.map((value) => Number(value.toFixed(4))).join("\t")).join("\n");
