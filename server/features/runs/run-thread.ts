/** The thread in which runs are computed, a few milliseconds of each in turn: a short run never waits for a long one. */
import { setImmediate } from "node:timers/promises";
import { parentPort } from "node:worker_threads";
import { prepareRun } from "#shared/simulation/simulate.ts";
import { recordOf } from "./record.ts";
import type { Answered, Asked, Computed } from "./simulator.ts";

const TURN_MS = 8;
const ROUNDS_AT_ONCE = 4;

async function compute({ scenario, seed }: Asked): Promise<Computed> {
  const prepared = prepareRun(scenario, seed);
  if (!prepared.ok) return prepared;
  for (let done = false; !done; ) {
    const until = performance.now() + TURN_MS;
    while (!done && performance.now() < until) done = prepared.run.advance(ROUNDS_AT_ONCE);
    await setImmediate();
  }
  return { ok: true, record: await recordOf(scenario, prepared.run.result()) };
}

const port = parentPort;
if (!port) throw new Error("This is a thread of the server, not a program.");
const answer = (message: Answered, transfer: ArrayBuffer[] = []) => port.postMessage(message, transfer);

port.on("message", async (asked: Asked) => {
  try {
    const computed = await compute(asked);
    answer({ id: asked.id, computed }, computed.ok ? [computed.record.bytes.buffer as ArrayBuffer] : []);
  } catch (error) {
    answer({ id: asked.id, failed: error instanceof Error ? (error.stack ?? error.message) : String(error) });
  }
});
answer("ready");
