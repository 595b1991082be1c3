/** The mapping that a person used last for files with the same columns, kept in the browser. */
import { z } from "zod";
import { type ColumnMapping, columnMappingSchema } from "#shared/reception/types.ts";

const MOST = 20;
const storedSchema = z.array(z.strictObject({ columns: z.string(), mapping: columnMappingSchema }));
const keyOf = (personId: string) => `holdfast.log-columns.${personId}`;

/** Names of the columns, or their number where there is no header. */
export const columnsKey = (names: readonly string[] | null, width: number): string =>
  names ? names.map((name) => name.trim()).join("\u001f") : `${width} columns`;

function read(personId: string): z.infer<typeof storedSchema> {
  try {
    const parsed = storedSchema.safeParse(JSON.parse(localStorage.getItem(keyOf(personId)) ?? "[]"));
    return parsed.success ? parsed.data : [];
  } catch {
    return [];
  }
}

export const rememberedMapping = (personId: string, columns: string): ColumnMapping | null =>
  read(personId).find((one) => one.columns === columns)?.mapping ?? null;

export function rememberMapping(personId: string, columns: string, mapping: ColumnMapping): void {
  const others = read(personId).filter((one) => one.columns !== columns);
  try {
    localStorage.setItem(keyOf(personId), JSON.stringify([{ columns, mapping }, ...others].slice(0, MOST)));
  } catch {
    // Storage is full or switched off: the columns are guessed the next time.
  }
}
