/** An unexpected console error or warning fails the test. A test that expects one replaces console.error by a spy of its own. */
import { format } from "node:util";
import { afterEach, beforeEach, expect } from "vitest";

const said: string[] = [];
const original = { error: console.error, warn: console.warn };

beforeEach(() => {
  said.length = 0;
  console.error = (...words: unknown[]) => said.push(`error: ${format(...words)}`);
  console.warn = (...words: unknown[]) => said.push(`warning: ${format(...words)}`);
});

afterEach(() => {
  Object.assign(console, original);
  expect(said, "nothing unexpected on the console").toEqual([]);
});
