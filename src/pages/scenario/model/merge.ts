/** Two drafts from one base, put together: what only one of them changed is taken from it. */
import { pathText } from "#shared/scenario/parse.ts";
import { sameJson } from "./json-path.ts";

export interface Merged {
  json: unknown;
  /** Settings that both changed, each in another way; `mine` is taken there. */
  clashes: string[];
}

type Node = Record<string, unknown>;
const isNode = (value: unknown): value is Node => value !== null && typeof value === "object" && !Array.isArray(value);
const form = (value: Node): unknown => value.type ?? value.policy;

export function mergeDrafts(base: unknown, mine: unknown, theirs: unknown): Merged {
  const clashes: string[] = [];
  const merge = (from: unknown, own: unknown, other: unknown, path: (string | number)[]): unknown => {
    if (sameJson(own, from) || sameJson(own, other)) return other;
    if (sameJson(other, from)) return own;
    if (isNode(from) && isNode(own) && isNode(other) && form(from) === form(own) && form(own) === form(other)) {
      const keys = new Set([...Object.keys(own), ...Object.keys(other)]);
      return Object.fromEntries([...keys].map((key) => [key, merge(from[key], own[key], other[key], [...path, key])]));
    }
    const lists = Array.isArray(from) && Array.isArray(own) && Array.isArray(other);
    if (lists && from.length === own.length && own.length === other.length) return own.map((_, i) => merge(from[i], own[i], other[i], [...path, i]));
    clashes.push(pathText(path));
    return own;
  };
  return { json: merge(base, mine, theirs, []), clashes };
}
