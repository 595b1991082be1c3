import type { z } from "zod";
import type { Issue } from "./issues.ts";
import { permittedRange, type QuantityMeta, quantityMeta } from "./quantity.ts";
import { type Scenario, scenarioSchema } from "./schema.ts";

export type Parsed<T> = { ok: true; value: T } | { ok: false; issues: Issue[] };

/** ["loops", 0, "plant"] as "loops[0].plant". */
export function pathText(path: readonly PropertyKey[]): string {
  return path.reduce<string>((text, key) => (typeof key === "number" ? `${text}[${key}]` : text ? `${text}.${String(key)}` : String(key)), "");
}

function valueAt(input: unknown, path: readonly PropertyKey[]): unknown {
  return path.reduce<unknown>((at, key) => (at !== null && typeof at === "object" ? (at as Record<PropertyKey, unknown>)[key] : undefined), input);
}

const show = (value: unknown): string => {
  if (value === undefined) return "nothing";
  const text = JSON.stringify(value);
  return text === undefined ? String(value) : text.length > 80 ? `${text.slice(0, 77)}...` : text;
};

/** "an object": what a schema expects, with its article. */
const oneOf = (expected: string): string => `${/^[aeiou]/.test(expected) ? "an" : "a"} ${expected}`;

type Def = {
  type: string;
  innerType?: z.ZodType;
  element?: z.ZodType;
  shape?: Record<string, z.ZodType>;
  options?: z.ZodType[];
  discriminator?: string;
};

/** The schema that governs a path of the input, or undefined where the path leaves the schema. */
export function schemaAt(schema: z.ZodType, path: readonly PropertyKey[], input: unknown): z.ZodType | undefined {
  let at: z.ZodType | undefined = schema;
  let here: unknown = input;
  for (let i = 0; at; ) {
    const def: Def = (at as unknown as { def: Def }).def;
    if (i === path.length && quantityMeta(at)) return at;
    if (def.innerType) {
      if (i === path.length) return at;
      at = def.innerType;
    } else if (def.options && def.discriminator) {
      if (i === path.length) return at;
      const key: string = def.discriminator;
      const tag = (here as Record<string, unknown> | null)?.[key];
      at = def.options.find((option) => (option as unknown as { def: Def }).def.shape?.[key]?.safeParse(tag).success);
    } else {
      if (i === path.length) return at;
      const key = path[i++];
      here = here !== null && typeof here === "object" ? (here as Record<PropertyKey, unknown>)[key] : undefined;
      at = def.shape ? def.shape[String(key)] : def.element;
    }
  }
  return undefined;
}

function quantityIssue(meta: QuantityMeta, value: unknown, path: string): Issue {
  const label = meta.label.charAt(0).toUpperCase() + meta.label.slice(1);
  const permitted = permittedRange(meta);
  if (typeof value !== "number")
    return { code: "not-a-number", path, message: `${label} has to be a number, found ${show(value)}; permitted ${permitted}.` };
  if (meta.integer && !Number.isInteger(value))
    return { code: "not-whole", path, message: `${label} has to be a whole number, found ${value}; permitted ${permitted}.` };
  return { code: "out-of-range", path, message: `${label} is ${value}${meta.unit ? ` ${meta.unit}` : ""}; permitted ${permitted}.` };
}

/** Turns a schema's complaints into issues that name field, value and permitted range. */
export function describeIssues(schema: z.ZodType, error: z.ZodError, input: unknown): Issue[] {
  return error.issues.flatMap((issue): Issue[] => {
    const path = pathText(issue.path);
    const value = valueAt(input, issue.path);
    if (issue.code === "unrecognized_keys") {
      return issue.keys.map((key) => ({
        code: "unknown-field",
        path: pathText([...issue.path, key]),
        message: `"${key}" is not a field here. Remove it or correct its name.`,
      }));
    }
    const governing = schemaAt(schema, issue.path, input);
    const meta = governing && quantityMeta(governing);
    if (meta) return [quantityIssue(meta, value, path)];
    if (issue.code === "invalid_value") {
      return [
        {
          code: "not-a-choice",
          path,
          message: `${path || "The file"} is ${show(value)}; permitted: ${issue.values.map((choice) => show(choice)).join(", ")}.`,
        },
      ];
    }
    if (issue.code === "invalid_union") {
      const choices = "options" in issue && Array.isArray(issue.options) ? issue.options.map(show).join(", ") : null;
      return [
        {
          code: "not-a-choice",
          path,
          message: `${path || "The file"} is ${show(value)}; ${choices ? `permitted: ${choices}` : "none of the permitted forms fits"}.`,
        },
      ];
    }
    if (issue.code === "invalid_type") {
      return [
        {
          code: value === undefined ? "missing-field" : "wrong-type",
          path,
          message:
            value === undefined
              ? `${path || "The file"} is missing; ${oneOf(issue.expected)} is expected.`
              : `${path || "The file"} has to be ${oneOf(issue.expected)}, found ${show(value)}.`,
        },
      ];
    }
    if (issue.code === "too_small" || issue.code === "too_big") {
      const bound = issue.code === "too_small" ? `at least ${issue.minimum}` : `at most ${issue.maximum}`;
      const what = issue.origin === "array" ? "entries" : issue.origin === "string" ? "characters" : "";
      const found = Array.isArray(value) || typeof value === "string" ? value.length : show(value);
      return [
        {
          code: "out-of-range",
          path,
          message: `${path} has ${found} ${what}; permitted ${issue.code === "too_big" && issue.origin === "array" && issue.exact ? `exactly ${issue.maximum}` : bound}.`,
        },
      ];
    }
    return [{ code: "invalid", path, message: `${path || "The file"} is ${show(value)}: ${issue.message}.` }];
  });
}

/** Checks the shape and the ranges of a scenario. Rules that span several fields are in check.ts. */
export function parseScenario(input: unknown): Parsed<Scenario> {
  const parsed = scenarioSchema.safeParse(input);
  return parsed.success ? { ok: true, value: parsed.data } : { ok: false, issues: describeIssues(scenarioSchema, parsed.error, input) };
}
