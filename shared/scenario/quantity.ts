import { z } from "zod";

/** What a form field, an error message and the JSON Schema need to know of a number. Stored values are in SI units. */
export interface QuantityMeta {
  label: string;
  /** Unit of the stored value, "" when it has none. */
  unit: string;
  min: number;
  max: number;
  integer: boolean;
}

const format = (value: number): string =>
  Math.abs(value) >= 1e5 || (value !== 0 && Math.abs(value) < 1e-3) ? value.toExponential().replace("e+", "e") : String(value);

/** "0.01 to 1e5 kg" */
export const permittedRange = (meta: QuantityMeta): string => `${format(meta.min)} to ${format(meta.max)}${meta.unit ? ` ${meta.unit}` : ""}`;

function quantityOf(meta: QuantityMeta) {
  const base = meta.integer ? z.int() : z.number();
  return base
    .min(meta.min)
    .max(meta.max)
    .meta({ title: meta.label, description: `${meta.label}, ${permittedRange(meta)}`, quantity: meta });
}

/** A real number with its label, SI unit and permitted range (both ends included). */
export const quantity = (label: string, unit: string, min: number, max: number) => quantityOf({ label, unit, min, max, integer: false });

/** A whole number with its label, unit and permitted range (both ends included). */
export const count = (label: string, unit: string, min: number, max: number) => quantityOf({ label, unit, min, max, integer: true });

/** The quantity behind a schema, through any default or nullable around it; undefined when the schema is not a quantity. */
export function quantityMeta(schema: z.ZodType): QuantityMeta | undefined {
  let at: unknown = schema;
  while (at instanceof z.ZodDefault || at instanceof z.ZodNullable || at instanceof z.ZodOptional) {
    const own = (at as z.ZodType).meta()?.quantity;
    if (own) return own as QuantityMeta;
    at = at.unwrap();
  }
  return at instanceof z.ZodType ? (at.meta()?.quantity as QuantityMeta | undefined) : undefined;
}
