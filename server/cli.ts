/**
 * The command line for scripts and CI: JSON on standard output, errors on standard error with a non-zero exit.
 *   run FILE [--seed N] [--series out.csv] [--rounds out.csv] [--explicit out.json]
 *   round FILE
 *   schema
 */
import { readFileSync, writeFileSync } from "node:fs";
import { parseArgs } from "node:util";
import { z } from "zod";
import { parseJson } from "#shared/api/json.ts";
import { roundTiming } from "#shared/network/round.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import { type Scenario, scenarioSchema } from "#shared/scenario/schema.ts";
import { roundsCsv, seriesCsv } from "#shared/simulation/csv.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import { explicitScenario } from "#shared/simulation/explicit.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { verdictSentence } from "#shared/simulation/verdict-text.ts";

const USAGE = `holdfast run FILE [--seed N] [--series out.csv] [--rounds out.csv] [--explicit out.json]
holdfast round FILE
holdfast schema
FILE may be - for standard input. JSON goes to standard output.`;

/** The format as JSON Schema; what only our own forms need of a number is left out. */
function jsonSchema(): unknown {
  return z.toJSONSchema(scenarioSchema, {
    io: "input",
    override: ({ jsonSchema: part }) => {
      delete part.quantity;
    },
  });
}

/** Something the caller can put right; printed as it is. */
class Refused extends Error {}

function readScenario(file: string): unknown {
  let text: string;
  try {
    text = readFileSync(file === "-" ? 0 : file, "utf8");
  } catch (cause) {
    throw new Refused(`${file} cannot be read: ${cause instanceof Error ? cause.message : String(cause)}`);
  }
  const parsed = parseJson(text);
  if (!parsed.ok) throw new Refused(`${file}: ${parsed.message}`);
  return parsed.value;
}

const listed = (issues: readonly Issue[]): string =>
  issues.map(({ path, message, help }) => [`${path || "file"}: ${message}`, ...(help ?? []).map((line) => `  ${line}`)].join("\n")).join("\n");

function parsed(file: string): Scenario {
  const result = parseScenario(readScenario(file));
  if (!result.ok) throw new Refused(listed(result.issues));
  return result.value;
}

function seedOf(text: string | undefined): number | null {
  if (text === undefined) return null;
  const seed = Number(text);
  if (!/^\d+$/.test(text) || seed > 4_294_967_295) throw new Refused(`--seed is ${text}; permitted: whole numbers 0 to 4294967295.`);
  return seed;
}

function save(file: string, text: string): void {
  try {
    writeFileSync(file, text);
  } catch (cause) {
    throw new Refused(`${file} cannot be written: ${cause instanceof Error ? cause.message : String(cause)}`);
  }
}

function run(file: string, options: { seed?: string; series?: string; rounds?: string; explicit?: string }): unknown {
  const scenario = parsed(file);
  const outcome = simulate(scenario, seedOf(options.seed));
  if (!outcome.ok) throw new Refused(listed(outcome.issues));
  const { result } = outcome;
  if (options.series) save(options.series, seriesCsv(result));
  if (options.rounds) save(options.rounds, roundsCsv(result, scenario));
  if (options.explicit) save(options.explicit, `${JSON.stringify(explicitScenario(scenario, result), null, 2)}\n`);
  const { engine, seed, durationS, endedAtS, ended, verdict, limits, figures, events, rounds } = result;
  return {
    scenario: scenario.name,
    engine,
    seed,
    durationS,
    endedAtS,
    ended,
    verdict,
    ...verdictSentence(scenario, result),
    limits: limits.map((limit) => ({ ...limit, limit: scenario.limits[limit.index] })),
    figures,
    events,
    rounds: {
      count: rounds.count,
      periodS: rounds.periodS,
      sampleAtS: rounds.sampleAtS,
      latencyS: rounds.latencyS,
      commandDelay: rounds.commandDelay,
    },
    digest: digestRun(result),
  };
}

function round(file: string): unknown {
  const { issues, ns, ...timing } = roundTiming(parsed(file));
  if (!timing.fits || issues.length > 0) process.exitCode = 1;
  if (issues.length > 0) process.stderr.write(`${listed(issues)}\n`);
  return timing;
}

function main(): unknown {
  const { values, positionals } = parseArgs({
    allowPositionals: true,
    options: {
      seed: { type: "string" },
      series: { type: "string" },
      rounds: { type: "string" },
      explicit: { type: "string" },
      help: { type: "boolean", short: "h" },
    },
  });
  const [command, file, ...rest] = positionals;
  const misplaced = command === "run" ? [] : ["seed", "series", "rounds", "explicit"].filter((name) => name in values);
  if (misplaced.length > 0) throw new Refused(`--${misplaced.join(", --")}: only for run.\n${USAGE}`);
  if (values.help) return USAGE;
  if (rest.length > 0) throw new Refused(`${rest.join(" ")}: one file at a time.\n${USAGE}`);
  if (command === "schema" && !file) return jsonSchema();
  if (!file || (command !== "run" && command !== "round")) throw new Refused(USAGE);
  return command === "run" ? run(file, values) : round(file);
}

// A reader such as head may close the pipe early; that is not an error of ours.
process.stdout.on("error", () => {});

try {
  const answer = main();
  process.stdout.write(typeof answer === "string" ? `${answer}\n` : `${JSON.stringify(answer, null, 2)}\n`);
} catch (cause) {
  const refused = cause instanceof Refused || (cause instanceof TypeError && "code" in cause);
  process.stderr.write(`${refused ? (cause as Error).message : cause instanceof Error ? cause.stack : String(cause)}\n`);
  process.exitCode = refused ? 2 : 3;
}
