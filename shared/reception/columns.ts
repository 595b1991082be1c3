/** From a mapping by names to places in a row; says what is missing. */
import type { Issue } from "#shared/scenario/issues.ts";
import { type ColumnMapping, MAPPED, type Mapped } from "./types.ts";

/** Place of each mapped column, counted from 0; -1: not mapped. */
export type Columns = Record<Mapped, number>;
export type ResolvedColumns = { ok: true; columns: Columns } | { ok: false; issues: Issue[] };

/** The column that a mapping names, or null. */
export function chosenColumn(mapping: ColumnMapping, what: Mapped): string | number | null {
  const chosen = mapping[what];
  return chosen !== null && typeof chosen === "object" ? chosen.column : chosen;
}

const LABELS: Record<Mapped, string> = {
  number: "packet number",
  time: "time",
  source: "source",
  receiver: "receiver",
  received: "received",
  rssi: "RSSI",
};

/** header: the first row of the file, null when it has none; width: how many columns there are. */
export function resolveColumns(mapping: ColumnMapping, header: readonly string[] | null, width: number): ResolvedColumns {
  const issues: Issue[] = [];
  const names = header?.map((name) => name.trim()) ?? [];
  const columns = {} as Columns;
  const users = new Map<number, Mapped>();
  for (const what of MAPPED) {
    columns[what] = -1;
    const chosen = chosenColumn(mapping, what);
    if (chosen === null) continue;
    const at = typeof chosen === "number" ? chosen - 1 : names.indexOf(chosen);
    const problem = typeof chosen === "number" ? outside(chosen, width) : header ? missing(chosen, names) : nameless(chosen, width);
    const other = users.get(at);
    if (problem) issues.push({ code: "unknown-column", path: what, message: `The ${LABELS[what]} ${problem}` });
    else if (other) {
      issues.push({
        code: "column-used-twice",
        path: what,
        message: `Column ${typeof chosen === "number" ? chosen : `"${chosen}"`} is chosen for the ${LABELS[other]} and for the ${LABELS[what]}; one column can be one of them.`,
      });
    } else {
      columns[what] = at;
      users.set(at, what);
    }
  }
  return issues.length > 0 ? { ok: false, issues } : { ok: true, columns };
}

const outside = (chosen: number, width: number): string | null =>
  chosen > width ? `is said to stand in column ${chosen}; the file has ${width} ${width === 1 ? "column" : "columns"}.` : null;

const nameless = (chosen: string, width: number): string =>
  `is said to stand in column "${chosen}", but the file is read as having no header; permitted: column 1 to ${width}.`;

function missing(chosen: string, names: readonly string[]): string | null {
  const found = names.filter((name) => name === chosen).length;
  if (found === 1) return null;
  if (found > 1) return `is said to stand in column "${chosen}", of which the file has ${found}; choose it by its place, 1 to ${names.length}.`;
  return `is said to stand in column "${chosen}", which the file does not have; it has ${names.map((name) => `"${name}"`).join(", ")}.`;
}
