/**
 * npm test: everything, from an empty clone; the last line is the sum. `--only=source,unit,page,server,browser` picks
 * parts; anything after that goes to vitest (`npm test -- --only=unit tests/shared/network`).
 */
import { existsSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { checkSource } from "./lib/checks.mjs";
import { ensureChromium } from "./lib/chromium.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { ensurePostgres } from "./lib/postgres.mjs";
import { command, onClose, run, say, seconds, Trouble } from "./lib/system.mjs";

const reports = mkdtempSync(join(tmpdir(), "holdfast-reports-"));
onClose(() => rmSync(reports, { recursive: true, force: true }));

/** Runs vitest projects and reads the sum from its report. A file that cannot be loaded or a stray error counts as one failure. */
async function vitest(part, projects, filters) {
  const report = join(reports, `${part}.json`);
  const { code } = await run(
    process.execPath,
    [
      ...["node_modules/vitest/vitest.mjs", "run", ...projects.flatMap((project) => ["--project", project]), ...filters],
      ...["--reporter=default", "--reporter=json", `--outputFile.json=${report}`],
    ],
    { stdio: ["ignore", 1, 2], env: process.stdout.isTTY ? process.env : { ...process.env, NO_COLOR: "1" } },
  );
  if (!existsSync(report)) return { passed: 0, failed: 1 };
  const { numPassedTests: passed, numFailedTests, numPendingTests, numTodoTests, testResults } = JSON.parse(readFileSync(report, "utf8"));
  const unloadable = testResults.filter((file) => file.status === "failed" && file.assertionResults.length === 0).length;
  const failed = numFailedTests + unloadable;
  return { passed, failed: failed === 0 && code !== 0 ? 1 : failed, skipped: numPendingTests + numTodoTests };
}

const PARTS = {
  source: { title: "Types, lint, unused code", run: checkSource },
  unit: { title: "Engine, references, architecture", run: (filters) => vitest("unit", ["unit"], filters) },
  page: { title: "Page components", run: (filters) => vitest("page", ["page"], filters) },
  server: { title: "Server and database", needs: [ensurePostgres], run: (filters) => vitest("server", ["server"], filters) },
  browser: { title: "Browser", needs: [ensurePostgres, ensureChromium], run: (filters) => vitest("browser", ["browser"], filters) },
};

/** A part whose needs cannot be had has failed; the others still run. */
async function runPart({ needs = [], run: runIt }, filters) {
  try {
    for (const install of needs) await install();
    return await runIt(filters);
  } catch (error) {
    if (!(error instanceof Trouble)) throw error;
    process.stdout.write(`${error.message}\n`);
    return { passed: 0, failed: 1 };
  }
}

function chosen(args) {
  const only = args.filter((arg) => arg.startsWith("--only=")).flatMap((arg) => arg.slice("--only=".length).split(","));
  const unknown = only.find((part) => !(part in PARTS));
  if (unknown !== undefined) throw new Trouble(`--only=${unknown} is not a part; permitted: ${Object.keys(PARTS).join(", ")}.`);
  return { parts: only.length > 0 ? only : Object.keys(PARTS), filters: args.filter((arg) => !arg.startsWith("--only=")) };
}

await command(async () => {
  const { parts, filters } = chosen(process.argv.slice(2));
  await ensurePackages();
  const sums = [];
  for (const part of parts) {
    process.stdout.write(`\n${PARTS[part].title}\n`);
    const began = Date.now();
    sums.push({ part, ...(await runPart(PARTS[part], filters)), took: seconds(began) });
  }
  const total = (kind) => sums.reduce((sum, line) => sum + (line[kind] ?? 0), 0);
  process.stdout.write("\n");
  for (const { part, passed, failed, took } of sums) {
    process.stdout.write(`  ${part.padEnd(10)}${String(passed).padStart(5)} passed ${String(failed).padStart(3)} failed   ${took}\n`);
  }
  const [passed, failed, skipped] = [total("passed"), total("failed"), total("skipped")];
  if (failed > 0 || passed === 0) process.exitCode = 1;
  if (passed + failed === 0) say("tests", "no test was run");
  process.stdout.write(`\n${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ""}\n`);
});
