/**
 * Rules that keep the rooms apart and the engine the same bit for bit in every browser and in Node. They read the syntax
 * tree, so that text in comments and strings does not count.
 */
import { posix } from "node:path";
import { parseSync } from "vite";

const ROOMS = ["src", "server", "shared"] as const;
type Room = (typeof ROOMS)[number];
const MAY_IMPORT: Record<Room, readonly Room[]> = { src: ["src", "shared"], server: ["server", "shared"], shared: ["shared"] };

/** Packages without DOM, Node, clock or engine-dependent arithmetic of their own. */
const SHARED_PACKAGES = [/^zod$/, /^seedrandom(\/|$)/, /^ode45-cash-karp$/, /^@stdlib\//, /^@noble\/hashes(\/|$)/, /^ml-matrix$/, /^mathjs(\/|$)/];
const SERVER_ONLY = /^(node:|express|pg$|drizzle-orm|pino|bcryptjs|helmet|connect-pg-simple)/;

/**
 * What IEEE 754 and ECMAScript leave no choice about. Not sin, exp, pow, hypot, cbrt and their like: their last bits differ between engines.
 */
const EXACT_MATH = new Set(["sqrt", "abs", "min", "max", "floor", "ceil", "round", "trunc", "sign", "imul", "fround", "PI"]);
const NOT_IN_SHARED: Record<string, string> = {
  Date: "the clock; pass the time in",
  performance: "the clock; pass the time in",
  globalThis: "the surroundings; pass in what is needed",
  Intl: "the engine's own tables; format in the page",
};

interface Node {
  type: string;
  [key: string]: unknown;
}
const isNode = (value: unknown): value is Node => value !== null && typeof value === "object" && typeof (value as Node).type === "string";

function walk(node: Node, visit: (node: Node, parent: Node | null) => void, parent: Node | null = null): void {
  visit(node, parent);
  for (const value of Object.values(node)) {
    for (const child of Array.isArray(value) ? value : [value]) if (isNode(child)) walk(child, visit, node);
  }
}

const nameOf = (node: unknown): string | null => (isNode(node) && node.type === "Identifier" ? String(node.name) : null);

/** `Math.sqrt`, but neither `Math[name]` nor `const { sin } = Math`. */
function mathBreach(node: Node, parent: Node | null): string | null {
  if (nameOf(node) !== "Math" || isPropertyName(node, parent)) return null;
  const member = parent?.type === "MemberExpression" && parent.object === node && parent.computed === false ? nameOf(parent.property) : null;
  if (member && EXACT_MATH.has(member)) return null;
  return `Math${member ? `.${member}` : ""} is not the same bit for bit in every engine; take it from shared/math/elementary.ts`;
}

function isPropertyName(node: Node, parent: Node | null): boolean {
  if (!parent) return false;
  if (parent.type === "MemberExpression") return parent.property === node && parent.computed === false;
  return (
    (parent.type === "Property" || parent.type === "TSPropertySignature") && parent.key === node && parent.computed !== true && !parent.shorthand
  );
}

function purityBreach(node: Node, parent: Node | null): string | null {
  if ((node.type === "BinaryExpression" || node.type === "AssignmentExpression") && /^\*\*=?$/.test(String(node.operator)))
    return "** is not the same bit for bit in every engine; multiply, or let pow in by shared/math/elementary.ts";
  const name = nameOf(node);
  if (name !== null && Object.hasOwn(NOT_IN_SHARED, name) && !isPropertyName(node, parent)) return `${name} reaches ${NOT_IN_SHARED[name]}`;
  return mathBreach(node, parent);
}

/** The specifier of an import, export-from or import(). */
function importedBy(node: Node): string | null {
  if (!/^(Import(Declaration|Expression)|Export(Named|All)Declaration)$/.test(node.type)) return null;
  return isNode(node.source) && typeof node.source.value === "string" ? node.source.value : null;
}

function importBreach(path: string, room: Room, specifier: string): string | null {
  const inside = specifier.startsWith("#") ? specifier.slice(1) : specifier.startsWith(".") ? posix.join(posix.dirname(path), specifier) : null;
  if (inside === null) {
    if (room === "shared" && !SHARED_PACKAGES.some((allowed) => allowed.test(specifier))) return `shared may not import the package ${specifier}`;
    if (room === "src" && SERVER_ONLY.test(specifier)) return `the page may not import ${specifier}`;
    return null;
  }
  const target = ROOMS.find((name) => inside.startsWith(`${name}/`));
  if (!target || !MAY_IMPORT[room].includes(target)) return `${room} may not import ${specifier}`;
  return /\.(ts|tsx|css|svg|json|woff2)(\?\w+)?$/.test(inside) ? null : `${specifier} has no file ending`;
}

/** What a file of src, server or shared does that its room forbids, one sentence each. */
export function breaches(path: string, text: string): string[] {
  const room = ROOMS.find((name) => path.startsWith(`${name}/`));
  if (!room) return [];
  const { program, errors } = parseSync(path, text);
  if (errors.length > 0) return [`${path} cannot be parsed`];
  const found: string[] = [];
  walk(program as unknown as Node, (node, parent) => {
    const specifier = importedBy(node);
    const breach = specifier !== null ? importBreach(path, room, specifier) : room === "shared" ? purityBreach(node, parent) : null;
    if (breach) found.push(`${path}:${text.slice(0, Number(node.start)).split("\n").length}: ${breach}`);
  });
  return found;
}
