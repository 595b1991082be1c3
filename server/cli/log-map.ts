/** --map number=seq,time=t_ms:ms,source=src,receiver=dst,received=ok,rssi=rssi: how the columns of a log are read. */
import type { LogPreview } from "#shared/reception/guess.ts";
import { type ColumnMapping, columnMappingSchema, DELIMITERS, TIME_UNITS } from "#shared/reception/types.ts";
import { Refused } from "./input.ts";

export const MAP_WORDS =
  "number=COLUMN or round=COLUMN, time=COLUMN:s|ms|us|ns|iso, source=COLUMN, receiver=COLUMN, received=COLUMN or lost=COLUMN, rssi=COLUMN, " +
  "wraps=N, interval=SECONDS, delimiter=comma|semicolon|tab|bar, decimal=point|comma, header=yes|no; COLUMN is a name or a place counted from 1";

const DELIMITER_WORDS: Record<string, ColumnMapping["delimiter"]> = { comma: ",", semicolon: ";", tab: "\t", bar: "|" };
const SIGNS: Record<string, ColumnMapping["decimal"]> = { point: ".", comma: "," };

interface Mapping {
  mapping: ColumnMapping;
  /** What was guessed, and why; null when the user said all. */
  guessed: string[] | null;
}

/** Without --map everything is guessed from the beginning of the file; with it only delimiter, decimal sign and header are. */
export function mappingOf(text: string | undefined, seen: LogPreview): Mapping {
  const guess = seen.guess;
  if (text === undefined) {
    if (!guess.mapping) {
      const columns = seen.header ? `Its columns are ${seen.header.map((name) => `"${name}"`).join(", ")}.` : "It has no header.";
      throw new Refused(`No column looks like a packet number or like received/lost. ${columns} Say what they are: --map ${MAP_WORDS}.`);
    }
    return { mapping: guess.mapping, guessed: guess.reasons };
  }
  const fields: Record<string, unknown> = { delimiter: seen.delimiter, decimal: seen.decimal, header: seen.header !== null };
  const number: Record<string, unknown> = {};
  for (const part of text.split(",")) {
    const [, key = "", value = ""] = /^\s*([a-z]+)\s*=\s*(.*?)\s*$/.exec(part) ?? [];
    if (value === "") throw new Refused(`--map has "${part}"; permitted: ${MAP_WORDS}.`);
    put(key, value, fields, number);
  }
  if (Object.keys(number).length > 0) fields.number = number;
  const parsed = columnMappingSchema.safeParse(fields);
  if (parsed.success) return { mapping: parsed.data, guessed: null };
  throw new Refused(parsed.error.issues.map(({ path, message }) => `--map${path.length > 0 ? `, ${path.join(".")}` : ""}: ${message}`).join("\n"));
}

function put(key: string, value: string, fields: Record<string, unknown>, number: Record<string, unknown>): void {
  switch (key) {
    case "number":
    case "round":
      number.column = column(value);
      number.kind = key === "round" ? "round" : "sequence";
      return;
    case "wraps":
      number.wrapsAt = Number(value);
      return;
    case "interval":
      fields.periodS = Number(value);
      return;
    case "time": {
      const [, name = "", unit = "s"] = /^(.*?)(?::([a-z]+))?$/.exec(value) ?? [];
      fields.time = { column: column(name), unit: among(TIME_UNITS, unit, "time's unit") };
      return;
    }
    case "source":
    case "receiver":
    case "rssi":
      fields[key] = column(value);
      return;
    case "received":
    case "lost":
      fields.received = column(value);
      fields.receivedMarks = key;
      return;
    case "delimiter":
      fields.delimiter = DELIMITER_WORDS[value] ?? among(DELIMITERS, value, "delimiter", Object.keys(DELIMITER_WORDS));
      return;
    case "decimal":
      fields.decimal = SIGNS[value] ?? among([".", ","], value, "decimal sign", Object.keys(SIGNS));
      return;
    case "header":
      fields.header = among(["yes", "no"], value, "header") === "yes";
      return;
    default:
      throw new Refused(`--map has "${key}"; permitted: ${MAP_WORDS}.`);
  }
}

/** A place when it is a whole number, else a name. */
const column = (text: string): string | number => (/^\d+$/.test(text) ? Number(text) : text);

function among<T extends string>(permitted: readonly T[], value: string, what: string, words: readonly string[] = permitted): T {
  if (permitted.includes(value as T)) return value as T;
  throw new Refused(`--map says ${value} for the ${what}; permitted: ${words.join(", ")}.`);
}
