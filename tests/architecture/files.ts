/** The project's own files: what a clone would bring, without what is installed, built or kept as data. */
import { readdirSync, readFileSync } from "node:fs";
import { join, relative, sep } from "node:path";
import { fileURLToPath } from "node:url";

export const ROOT = fileURLToPath(new URL("../..", import.meta.url));

/** As in .gitignore. */
const NOT_OURS = new Set([".git", "node_modules", ".data", "dist"]);

export const topLevel = (): string[] => readdirSync(ROOT).filter((name) => !NOT_OURS.has(name));

/** Paths below a folder of the project, with "/" on every system. */
export function filesBelow(folder: string, pattern: RegExp = /./): string[] {
  return readdirSync(join(ROOT, folder), { withFileTypes: true }).flatMap((entry) => {
    const path = join(folder, entry.name);
    if (NOT_OURS.has(entry.name) || path === join("tests", "output")) return [];
    if (entry.isDirectory()) return filesBelow(path, pattern);
    return pattern.test(entry.name) ? [relative(".", path).split(sep).join("/")] : [];
  });
}

export const read = (path: string): string => readFileSync(join(ROOT, path), "utf8");
