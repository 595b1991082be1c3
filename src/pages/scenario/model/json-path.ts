/** Reading and changing plain JSON by path, without touching what was there before. */
import { pathText } from "#shared/scenario/parse.ts";

export type Path = readonly (string | number)[];
type Node = Record<PropertyKey, unknown>;

const isNode = (value: unknown): value is Node => value !== null && typeof value === "object";

export function getAt(json: unknown, path: Path): unknown {
  return path.reduce<unknown>((at, key) => (isNode(at) ? at[key] : undefined), json);
}

/** The same JSON with another value at the path. Containers on the way that are missing are made. */
export function setAt(json: unknown, path: Path, value: unknown): unknown {
  if (path.length === 0) return value;
  const [key, ...rest] = path;
  const here: object = isNode(json) ? json : typeof key === "number" ? [] : {};
  const next = setAt((here as Node)[key], rest, value);
  if ((here as Node)[key] === next && key in here) return json;
  if (Array.isArray(here)) {
    const copy: unknown[] = here.slice();
    copy[key as number] = next;
    return copy;
  }
  return { ...here, [key]: next };
}

/** "loops[0].plant.cartMassKg" as ["loops", 0, "plant", "cartMassKg"]. */
export function parsePath(text: string): (string | number)[] {
  return [...text.matchAll(/([^.[\]]+)|\[(\d+)\]/g)].map(([, name, index]) => (index === undefined ? name : Number(index)));
}

/** Is the path the same as the other one, or inside it? */
export const isWithin = (path: string, outer: string): boolean => path === outer || path.startsWith(`${outer}.`) || path.startsWith(`${outer}[`);

/** "loops[].plant.cartMassKg": one name for the same field of every list entry. */
export const patternOf = (path: Path): string => pathText(path).replace(/\[\d+\]/g, "[]");

export function sameJson(a: unknown, b: unknown): boolean {
  if (Object.is(a, b)) return true;
  if (!isNode(a) || !isNode(b) || Array.isArray(a) !== Array.isArray(b)) return false;
  const keys = Object.keys(a);
  return keys.length === Object.keys(b).length && keys.every((key) => Object.hasOwn(b, key) && sameJson(a[key], b[key]));
}
