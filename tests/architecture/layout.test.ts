import { describe, expect, it } from "vitest";
import { filesBelow, read, topLevel } from "./files.ts";

const FIXED = [
  ...[
    "README.md",
    "DEVELOPERS.md",
    "package.json",
    "package-lock.json",
    "tsconfig.json",
    "vite.config.ts",
    "tailwind.config.ts",
    "drizzle.config.ts",
  ],
  ...["index.html", "biome.json", "LICENSE", "src", "server", "shared", "drizzle", "tests", "examples", "scripts"],
];

describe("the project's folder", () => {
  it("has no other top-level entries than the fixed ones and dotfiles", () => {
    expect(topLevel().filter((name) => !name.startsWith(".") && !FIXED.includes(name))).toEqual([]);
  });

  it("has file names in kebab-case", () => {
    const files = ["src", "server", "shared", "tests", "scripts"].flatMap((room) => filesBelow(room, /\.(tsx?|mjs|css)$/));
    expect(files.filter((path) => !/^([a-z0-9]+(-[a-z0-9]+)*)(\.[a-z0-9]+)+$/.test(path.split("/").at(-1) as string))).toEqual([]);
  });

  it("names no package registry and no folder of the machine that it was written on", () => {
    // Put together here, or this file would be the first to break the rule.
    const hosts = ["registry." + "npmjs", "deb." + "debian.org", "pypi" + ".org", "npm" + "mirror"];
    const folders = ["/wo" + "rk/", "/ro" + "ot/"];
    const text = filesBelow(".", /\.(tsx?|mjs|json|md|html|css|sql|py|m|csv|sh|svg|c)$|^(run|\.gitignore)$/);
    const found = text.flatMap((path) => [...hosts, ...folders].filter((word) => read(path).includes(word)).map((word) => `${path}: ${word}`));
    expect(found).toEqual([]);
  });
});
