/**
 * The command line for scripts and CI: JSON on standard output, errors on standard error with a non-zero exit: 1 for a
 * round that does not fit, 2 for what the caller can put right, 3 for a fault of ours.
 */
import { type ParseArgsConfig, parseArgs } from "node:util";
import { floods } from "./cli/floods.ts";
import { Refused } from "./cli/input.ts";
import { log } from "./cli/log.ts";
import { round } from "./cli/round.ts";
import { run } from "./cli/run.ts";
import { jsonSchema } from "./cli/schema.ts";

const OPTIONS = {
  seed: { type: "string" },
  series: { type: "string" },
  rounds: { type: "string" },
  explicit: { type: "string" },
  steps: { type: "boolean" },
  map: { type: "string" },
  period: { type: "string" },
  link: { type: "string" },
  help: { type: "boolean", short: "h" },
} as const satisfies ParseArgsConfig["options"];

type Values = ReturnType<typeof parseArgs<{ options: typeof OPTIONS }>>["values"];
interface Command {
  usage: string;
  /** Names of the options that it takes. */
  options: readonly string[];
  takesFile: boolean;
  answer(file: string, values: Values): unknown;
}

const COMMANDS: Record<string, Command> = {
  run: {
    usage: "run FILE [--seed N] [--series out.csv] [--rounds out.csv] [--explicit out.json]",
    options: ["seed", "series", "rounds", "explicit"],
    takesFile: true,
    answer: run,
  },
  round: { usage: "round FILE [--seed N]", options: ["seed"], takesFile: true, answer: round },
  floods: {
    usage: "floods FILE [--rounds N] [--seed N] [--steps]",
    options: ["rounds", "seed", "steps"],
    takesFile: true,
    answer: floods,
  },
  log: {
    usage: 'log FILE [--map number=seq,time=t_ms:ms,source=src,receiver=dst,received=ok,rssi=rssi] [--period S] [--link "3 > 7"]',
    options: ["map", "period", "link"],
    takesFile: true,
    answer: log,
  },
  schema: { usage: "schema", options: [], takesFile: false, answer: jsonSchema },
};

const USAGE = `${Object.values(COMMANDS)
  .map(({ usage }) => `holdfast ${usage}`)
  .join("\n")}
FILE may be - for standard input. JSON goes to standard output.`;

function main(): unknown {
  const { values, positionals } = parseArgs({ allowPositionals: true, options: OPTIONS });
  if (values.help) return USAGE;
  const [name, file, ...rest] = positionals;
  const command = name !== undefined && Object.hasOwn(COMMANDS, name) ? COMMANDS[name] : null;
  if (!command) throw new Refused(name === undefined ? USAGE : `${name} is not a command.\n${USAGE}`);
  const misplaced = Object.keys(values).filter((option) => !command.options.includes(option));
  if (misplaced.length > 0) {
    const takers = Object.entries(COMMANDS).filter(([, { options }]) => misplaced.every((option) => options.includes(option)));
    const only = takers.length > 0 ? `only for ${takers.map(([taker]) => taker).join(" and ")}` : "not together";
    throw new Refused(`--${misplaced.join(", --")}: ${only}.\n${USAGE}`);
  }
  const files = file === undefined ? rest : [file, ...rest];
  if (files.length > (command.takesFile ? 1 : 0)) {
    throw new Refused(`${files.join(" ")}: ${command.takesFile ? "one file at a time" : `${name} takes no file`}.\n${USAGE}`);
  }
  if (command.takesFile && file === undefined) throw new Refused(`holdfast ${command.usage}`);
  return command.answer(file ?? "", values);
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
