/** The thread in which runs are computed, a few milliseconds of each in turn: a short run never waits for a long one. */
import { setImmediate } from "node:timers/promises";
import { parentPort } from "node:worker_threads";
import { prepareRun } from "#shared/simulation/simulate.ts";
import { recordOf } from "./record.ts";
import type { Answered, Asked, Computed } from "./simulator.ts";

const TURN_MS = 8;
const ROUNDS_AT_ONCE = 4;
/** Computing time after which a run is given up: a stiff machine could otherwise hold the thread for hours. */
const LIMIT_MS = 60_000;

async function compute({ scenario, seed }: Asked): Promise<Computed> {
  const prepared = prepareRun(scenario, seed);
  if (!prepared.ok) return prepared;
  const { run } = prepared;
  let spent = 0;
  for (let done = false; !done; ) {
    const from = performance.now();
    while (!done && performance.now() < from + TURN_MS) done = run.advance(ROUNDS_AT_ONCE);
    spent += performance.now() - from;
    if (!done && spent > LIMIT_MS) {
      const message = `The server gives a run ${LIMIT_MS / 1000} s of computing; this one had reached round ${run.round} of ${run.rounds}. Shorten the run, or allow larger tolerances.`;
      return { ok: false, issues: [{ code: "takes-too-long", path: "run.durationS", message }] };
    }
    await setImmediate();
  }
  return { ok: true, record: await recordOf(scenario, run.result()) };
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
