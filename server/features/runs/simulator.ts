/** Runs the engine inside the server without keeping other requests waiting: a few milliseconds at a time. */
import { setImmediate } from "node:timers/promises";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunOutcome } from "#shared/simulation/result.ts";
import { prepareRun } from "#shared/simulation/simulate.ts";

const TURN_MS = 8;
const ROUNDS_AT_ONCE = 4;
const AT_THE_SAME_TIME = 4;

export class Stopped extends Error {}

export function createSimulator() {
  const waiting: (() => void)[] = [];
  const stop = new AbortController();
  let running = 0;

  const enter = async () => {
    if (running >= AT_THE_SAME_TIME) await new Promise<void>((resolve) => waiting.push(resolve));
    else running++;
  };
  const leave = () => {
    const next = waiting.shift();
    if (next) next();
    else running--;
  };

  return {
    async simulate(scenario: Scenario, seed: number): Promise<RunOutcome> {
      await enter();
      try {
        const prepared = prepareRun(scenario, seed);
        if (!prepared.ok) return prepared;
        for (let done = false; !done; ) {
          if (stop.signal.aborted) throw new Stopped("The server is stopping.");
          const until = performance.now() + TURN_MS;
          while (!done && performance.now() < until) done = prepared.run.advance(ROUNDS_AT_ONCE);
          await setImmediate();
        }
        return { ok: true, result: prepared.run.result() };
      } finally {
        leave();
      }
    },
    stop: () => stop.abort(),
  };
}
export type Simulator = ReturnType<typeof createSimulator>;
