/** From typed text to stored values and back: numbers in the units of the screen, and given sequences. */
import { type FieldSpec, fieldSpec } from "./field-spec.ts";
import type { Path } from "./json-path.ts";
import { numberText, toScreen, toStored } from "./screen-unit.ts";

export type Read = { ok: true; value: unknown } | { ok: false; problem: string };

const quoted = (text: string): string => `\u201c${text.length > 24 ? `${text.slice(0, 23)}\u2026` : text}\u201d`;

/** A number of the field, or nothing where the field may be left empty (null). */
export function readNumber(text: string, spec: FieldSpec, nullable: boolean): Read {
  if (text.trim() === "") return nullable ? { ok: true, value: null } : { ok: false, problem: `${spec.label} is empty.` };
  const value = toStored(text, spec.unit);
  if (value === null) return { ok: false, problem: `${quoted(text.trim())} is no number.` };
  return { ok: true, value };
}

/** 1 and 0, with spaces, commas and line breaks as people like them. */
export function readBits(text: string): Read {
  const value: number[] = [];
  let line = 1;
  for (const character of text) {
    if (character === "1" || character === "0") value.push(character === "1" ? 1 : 0);
    else if (character === "\n") line++;
    else if (!/[\s,;]/.test(character))
      return {
        ok: false,
        problem: `${quoted(character)} in line ${line}, after ${value.length} rounds: only 1 (delivered) and 0 (lost) stand here.`,
      };
  }
  return { ok: true, value };
}

const ROUNDS_IN_A_GROUP = 10;
const GROUPS_IN_A_LINE = 5;

/** Groups of ten, fifty rounds a line. */
export function bitsText(value: unknown): string {
  if (!Array.isArray(value)) return "";
  const groups: string[] = [];
  for (let at = 0; at < value.length; at += ROUNDS_IN_A_GROUP) groups.push(value.slice(at, at + ROUNDS_IN_A_GROUP).join(""));
  const lines: string[] = [];
  for (let at = 0; at < groups.length; at += GROUPS_IN_A_LINE) lines.push(groups.slice(at, at + GROUPS_IN_A_LINE).join(" "));
  return lines.join("\n");
}

function readRow(text: string, spec: FieldSpec): number[] | { bad: string } {
  const row: number[] = [];
  for (const word of text.trim().split(/[\s;]+|,/)) {
    if (word === "") continue;
    const value = toStored(word, spec.unit);
    if (value === null) return { bad: word };
    row.push(value);
  }
  return row;
}

/** Numbers in order, divided by spaces, commas or line breaks. */
export function readNumbers(text: string, spec: FieldSpec): Read {
  const row = readRow(text, spec);
  if (!Array.isArray(row)) return { ok: false, problem: `${quoted(row.bad)} is no number.` };
  return row.length === 0 ? { ok: false, problem: `${spec.label}: at least one value is needed.` } : { ok: true, value: row };
}

/** One row a line, one number a column. */
export function readRows(text: string, spec: FieldSpec, columns: number): Read {
  const rows: number[][] = [];
  const lines = text.split("\n");
  for (const [i, line] of lines.entries()) {
    if (line.trim() === "") continue;
    const row = readRow(line, spec);
    if (!Array.isArray(row)) return { ok: false, problem: `Line ${i + 1}: ${quoted(row.bad)} is no number.` };
    if (row.length !== columns) return { ok: false, problem: `Line ${i + 1} has ${row.length} numbers; ${columns} are needed, one for each signal.` };
    rows.push(row);
  }
  return rows.length === 0 ? { ok: false, problem: `${spec.label}: at least one line is needed.` } : { ok: true, value: rows };
}

const plain = (value: unknown, spec: FieldSpec): string => (typeof value === "number" ? numberText(toScreen(value, spec.unit)) : "");

export const numbersText = (value: unknown, spec: FieldSpec): string => (Array.isArray(value) ? value.map((one) => plain(one, spec)).join(" ") : "");
export const rowsText = (value: unknown, spec: FieldSpec): string =>
  Array.isArray(value) ? value.map((row) => numbersText(row, spec)).join("\n") : "";

/** Does typed text still stand for the value that the JSON holds? It does not after an undo or an edit from elsewhere. */
export const standsFor = (json: unknown, path: Path, text: string, value: number): boolean => toStored(text, fieldSpec(json, path).unit) === value;
