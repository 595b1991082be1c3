/** The mapping as the page edits it: a role for every column, and what the file itself is like. */
import { type ColumnMapping, columnMappingSchema, type DELIMITERS, type TIME_UNITS } from "#shared/reception/types.ts";

export const ROLES = ["unused", "sequence", "round", "time", "source", "receiver", "received", "rssi"] as const;
export type Role = (typeof ROLES)[number];
export const ROLE_WORDS: Record<Role, string> = {
  unused: "not used",
  sequence: "packet number",
  round: "round",
  time: "time",
  source: "source",
  receiver: "receiver",
  received: "received",
  rssi: "RSSI",
};

export type TimeUnit = (typeof TIME_UNITS)[number];
export const UNIT_WORDS: Record<TimeUnit, string> = { s: "s", ms: "ms", us: "µs", ns: "ns", iso: "date and time" };

export type Delimiter = (typeof DELIMITERS)[number];
export const DELIMITER_WORDS: Record<Delimiter, string> = { ",": "comma", ";": "semicolon", "\t": "tab", "|": "bar" };

export interface Columns {
  delimiter: Delimiter;
  decimal: "." | ",";
  header: boolean;
  /** By column, from the left. */
  roles: readonly Role[];
  timeUnit: TimeUnit;
  /** null: wraps of 8, 16 and 32 bits are recognised by themselves. */
  wrapsAt: number | null;
  /** What a 1, true or yes of the received column says. */
  marks: "received" | "lost";
  periodS: number | null;
}

/** How a column is named in a mapping: by its header where that is one of its kind, else by its place. */
function reference(names: readonly string[] | null, index: number): string | number {
  const name = names?.[index]?.trim() ?? "";
  const alone = names?.filter((other) => other.trim() === name).length === 1;
  return name !== "" && name.length <= 120 && alone ? name : index + 1;
}

function indexOf(names: readonly string[] | null, column: string | number | null | undefined): number {
  if (column === null || column === undefined) return -1;
  if (typeof column === "number") return column - 1;
  return names?.findIndex((name) => name.trim() === column) ?? -1;
}

/** `names`: the header, or null where the file has none. */
export function columnsOf(mapping: ColumnMapping, names: readonly string[] | null, width: number): Columns {
  const roles: Role[] = Array(width).fill("unused");
  const put = (column: string | number | null | undefined, role: Role) => {
    const index = indexOf(names, column);
    if (index >= 0 && index < width) roles[index] = role;
  };
  put(mapping.rssi, "rssi");
  put(mapping.receiver, "receiver");
  put(mapping.source, "source");
  put(mapping.received, "received");
  put(mapping.time?.column, "time");
  put(mapping.number?.column, mapping.number?.kind ?? "sequence");
  return {
    delimiter: mapping.delimiter,
    decimal: mapping.decimal,
    header: mapping.header,
    roles,
    timeUnit: mapping.time?.unit ?? "s",
    wrapsAt: mapping.number?.wrapsAt ?? null,
    marks: mapping.receivedMarks,
    periodS: mapping.periodS,
  };
}

/** Nothing is known of the columns yet. */
export const blankColumns = ({
  delimiter,
  decimal,
  header,
  width,
}: Pick<Columns, "delimiter" | "decimal" | "header"> & { width: number }): Columns => ({
  delimiter,
  decimal,
  header,
  roles: Array(width).fill("unused"),
  timeUnit: "s",
  wrapsAt: null,
  marks: "received",
  periodS: null,
});

export interface MappingProblem {
  /** The control that it stands at. */
  at: "roles" | "periodS" | "wrapsAt";
  message: string;
}
export type MappingOutcome = { ok: true; mapping: ColumnMapping } | { ok: false; problem: MappingProblem };

export function mappingOf(columns: Columns, names: readonly string[] | null): MappingOutcome {
  const at = (role: Role) => {
    const index = columns.roles.indexOf(role);
    return index < 0 ? null : reference(columns.header ? names : null, index);
  };
  const kind = columns.roles.includes("round") ? "round" : "sequence";
  const number = at(kind);
  const time = at("time");
  const parsed = columnMappingSchema.safeParse({
    delimiter: columns.delimiter,
    decimal: columns.decimal,
    header: columns.header,
    number: number === null ? null : { column: number, kind, wrapsAt: columns.wrapsAt },
    time: time === null ? null : { column: time, unit: columns.timeUnit },
    source: at("source"),
    receiver: at("receiver"),
    received: at("received"),
    receivedMarks: columns.marks,
    rssi: at("rssi"),
    periodS: columns.periodS,
  });
  if (parsed.success) return { ok: true, mapping: parsed.data };
  const issue = parsed.error.issues[0];
  const where = String(issue?.path.at(-1) ?? "");
  return {
    ok: false,
    problem: { at: where === "periodS" || where === "wrapsAt" ? where : "roles", message: issue?.message ?? "The columns make no mapping." },
  };
}

/** One column has a role; the one that had it before gives it up. A number is either per packet or per round. */
export function withRole(columns: Columns, index: number, role: Role): Columns {
  const taken = (other: Role) => role !== "unused" && (other === role || (isNumber(other) && isNumber(role)));
  return { ...columns, roles: columns.roles.map((other, i) => (i === index ? role : taken(other) ? "unused" : other)) };
}

const isNumber = (role: Role) => role === "sequence" || role === "round";
