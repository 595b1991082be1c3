/** What every command needs: a sentence for the person, and running other programs. Plain Node, since nothing may be installed yet. */
import { spawn } from "node:child_process";
import { once } from "node:events";
import { dirname } from "node:path";
import { fileURLToPath } from "node:url";

export const ROOT = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

/** Something that the person at the keyboard has to know or do: shown as a sentence, without a stack. */
export class Trouble extends Error {}

/** Progress goes to standard error, so that standard output holds results only. */
export function say(topic, text) {
  process.stderr.write(`  ${topic.padEnd(12)}${text}\n`);
}

export const seconds = (sinceMs) => `${((Date.now() - sinceMs) / 1000).toFixed(1)} s`;

export const isRoot = () => process.getuid?.() === 0;

/** Both ranges of `engines` in package.json: 20.19 up to the end of the 20 line, and 22.12 or later. */
export function checkNode() {
  const [major, minor] = process.versions.node.split(".").map(Number);
  const fine = (major === 20 && minor >= 19) || (major === 22 && minor >= 12) || major > 22;
  if (!fine) throw new Trouble(`Holdfast needs Node.js 20.19 or later in the 20 line, or 22.12 or later; this is ${process.versions.node}.`);
}

const children = new Set();

/**
 * Runs a program to its end. `quiet` keeps its output and gives it back; otherwise it goes to standard error.
 * `whole`: out of reach of Ctrl-C, and waited for when this command is stopped, since broken off it would leave a mess.
 * A program that cannot be found counts as code 127, as in a shell.
 */
export function run(command, args, { quiet = false, whole = false, ...options } = {}) {
  const ended = new Promise((resolve) => {
    const child = spawn(command, args, {
      cwd: ROOT,
      detached: whole,
      stdio: ["ignore", quiet ? "pipe" : 2, quiet ? "pipe" : 2],
      ...options,
    });
    if (!whole) children.add(child);
    let output = "";
    child.stdout?.on("data", (chunk) => (output += chunk));
    child.stderr?.on("data", (chunk) => (output += chunk));
    child.on("error", (error) => resolve({ code: 127, output: `${output}${error.message}` }));
    child.on("close", (code) => {
      children.delete(child);
      resolve({ code: code ?? 1, output: output.trim() });
    });
  });
  if (whole) onClose(() => ended);
  return ended;
}

export const lastLines = (text, count = 15) => text.trimEnd().split("\n").slice(-count).join("\n");

const closers = [];
let closing = null;

/** To be undone when this process ends, whatever ends it; the latest first. */
export function onClose(close) {
  closers.push(close);
}

function close() {
  closing ??= (async () => {
    for (const child of children) child.kill();
    await Promise.all([...children].map((child) => once(child, "close")));
    while (closers.length > 0) {
      await Promise.resolve(closers.pop()()).catch((error) => say("stop", error.message));
    }
  })();
  return closing;
}

/** npm can be killed without a word to its script; what it started ends all the same. */
function endWithNpm() {
  if (process.env.npm_lifecycle_event === undefined) return;
  const parent = process.ppid;
  setInterval(() => process.ppid !== parent && process.kill(process.pid, "SIGTERM"), 500).unref();
}

/** The frame of every command: orderly end on Ctrl-C, on SIGTERM and when the terminal is closed; troubles as sentences. */
export async function command(main) {
  for (const stream of [process.stdout, process.stderr]) stream.on("error", () => {});
  for (const [signal, number] of Object.entries({ SIGINT: 2, SIGTERM: 15, SIGHUP: 1 })) {
    process.on(signal, async () => {
      await close();
      process.exit(128 + number);
    });
  }
  endWithNpm();
  try {
    checkNode();
    await main();
  } catch (error) {
    // What a signal broke off is no trouble.
    if (!closing) process.stderr.write(`\n${error instanceof Trouble ? error.message : error.stack}\n`);
    process.exitCode = 1;
  }
  await close();
  process.exit();
}
