/** Checks of the source text: types, style and rules, unused code. Each is one line in the sum of `npm test`. */
import { run } from "./system.mjs";

const node = (...args) => run(process.execPath, args, { quiet: true });

const CHECKS = {
  types: () => node("node_modules/typescript/bin/tsc", "--noEmit"),
  "types of shared": () => node("node_modules/typescript/bin/tsc", "-p", "shared"),
  lint: () => node("node_modules/@biomejs/biome/bin/biome", "check", "--colors=off"),
  "unused code": () => node("node_modules/knip/bin/knip.js", "--no-progress"),
};

/** Runs all of them; a failing one shows what it said. */
export async function checkSource() {
  const sum = { passed: 0, failed: 0 };
  const said = await Promise.all(Object.entries(CHECKS).map(async ([name, check]) => ({ name, ...(await check()) })));
  for (const { name, code, output } of said) {
    process.stdout.write(code === 0 ? `  ${name}: fine\n` : `  ${name}: FAILED\n${output}\n`);
    sum[code === 0 ? "passed" : "failed"] += 1;
  }
  return sum;
}
