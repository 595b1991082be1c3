import { describe, expect, it } from "vitest";
import { filesBelow, read } from "./files.ts";
import { breaches } from "./rules.ts";

describe("the rooms", () => {
  for (const room of ["shared", "server", "src"]) {
    it(`${room} keeps its rules`, () => {
      const files = filesBelow(room, /\.tsx?$/);
      expect(files.length).toBeGreaterThan(5);
      expect(files.flatMap((path) => breaches(path, read(path)))).toEqual([]);
    });
  }
});

describe("the check of the rooms fires", () => {
  const bad: [string, string, string, RegExp][] = [
    ["shared importing the page", "shared/a/b.ts", 'import { x } from "#src/lib/x.ts";', /shared may not import #src/],
    ["shared importing the server by a relative path", "shared/a/b.ts", 'import { x } from "../../server/x.ts";', /shared may not import \.\.\//],
    ["the server importing the page", "server/a.ts", 'export { x } from "#src/lib/x.ts";', /server may not import/],
    ["the page importing the server", "src/a.tsx", 'const x = await import("../server/db/client.ts");', /src may not import/],
    ["the page importing a package of the server", "src/a.tsx", 'import express from "express";', /may not import express/],
    ["shared importing Node", "shared/a.ts", 'import { readFileSync } from "node:fs";', /package node:fs/],
    ["shared importing a package that is not on the list", "shared/a.ts", 'import _ from "lodash";', /package lodash/],
    ["an import without a file ending", "shared/a.ts", 'import { x } from "./b";', /no file ending/],
    ["an import from outside of the rooms", "src/a.ts", 'import { x } from "../scripts/x.ts";', /src may not import/],
    ["a sine of the engine's own", "shared/a.ts", "export const f = (x: number) => Math.sin(x);", /Math\.sin/],
    ["hypot", "shared/a.ts", "export const f = (x: number) => Math.hypot(x, 1);", /Math\.hypot/],
    ["random numbers without a seed", "shared/a.ts", "export const f = () => Math.random();", /Math\.random/],
    ["Math taken apart", "shared/a.ts", "const { sin } = Math; export { sin };", /Math is not the same/],
    ["Math by a computed name", "shared/a.ts", 'export const f = (x: number) => Math["sin"](x);', /Math is not the same/],
    ["a power operator", "shared/a.ts", "export const f = (x: number) => x ** 3;", /\*\* is not/],
    ["a power assignment", "shared/a.ts", "export let x = 2; x **= 3;", /\*\* is not/],
    ["the date", "shared/a.ts", "export const now = () => new Date();", /the clock/],
    ["the clock", "shared/a.ts", "export const now = () => performance.now();", /the clock/],
  ];
  it.each(bad)("on %s", (_what, path, text, message) => {
    expect(breaches(path, text).join("\n")).toMatch(message);
  });

  const good: [string, string, string][] = [
    ["exact functions", "shared/a.ts", "export const f = (x: number) => Math.sqrt(Math.abs(x)) * Math.PI;"],
    ["text that speaks of them", "shared/a.ts", '// Math.sin, new Date(), x ** 2\nexport const text = "Math.sin(x ** 2) of import x from y";'],
    ["fields of that name", "shared/a.ts", "export const x = { Date: 1, performance: 2 }; export const y = x.Date + x.performance;"],
    ["a sine in a picture", "src/a.tsx", "export const f = (x: number) => Math.sin(x) ** 2;"],
    ["a style sheet", "src/a.tsx", 'import "./a.css";'],
  ];
  it.each(good)("but not on %s", (_what, path, text) => {
    expect(breaches(path, text)).toEqual([]);
  });
});
