/** Has runs computed in a thread of their own, so that no run keeps any other request waiting. */
import { once } from "node:events";
import type { Worker } from "node:worker_threads";
import type { Issue } from "#shared/scenario/issues.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { startThread } from "../../threads/thread.ts";
import type { RunRecord } from "./record.ts";

export interface Asked {
  id: number;
  scenario: Scenario;
  seed: number;
}
export type Computed = { ok: true; record: RunRecord } | { ok: false; issues: Issue[] };
export type Answered = "ready" | { id: number; computed: Computed } | { id: number; failed: string };

const AT_THE_SAME_TIME = 4;

interface Waiting {
  resolve(computed: Computed): void;
  reject(error: Error): void;
}

export function createSimulator() {
  const pending = new Map<number, Waiting>();
  const queue: (() => void)[] = [];
  let thread: Worker | null = null;
  let stopped = false;
  let asked = 0;

  /** A thread that ended takes its runs with it; the next run starts a new one. */
  const abandon = (reason: string) => {
    thread = null;
    for (const { reject } of pending.values()) reject(new Error(reason));
    pending.clear();
  };

  const start = (): Worker => {
    if (thread) return thread;
    const started = startThread(new URL("./run-thread.ts", import.meta.url));
    started.on("message", (answer: Answered) => {
      if (answer === "ready") return;
      const waiting = pending.get(answer.id);
      pending.delete(answer.id);
      if ("computed" in answer) waiting?.resolve(answer.computed);
      else waiting?.reject(new Error(answer.failed));
    });
    started.on("error", (error) => started === thread && abandon(`The thread of the runs failed: ${error.message}`));
    started.on("exit", () => started === thread && abandon("The thread of the runs ended."));
    thread = started;
    return started;
  };

  return {
    /** Starts the thread ahead of the first run, which would wait for it otherwise. */
    async warmUp(): Promise<void> {
      await once(start(), "message");
    },

    async simulate(scenario: Scenario, seed: number): Promise<Computed> {
      if (pending.size >= AT_THE_SAME_TIME) await new Promise<void>((resolve) => queue.push(resolve));
      try {
        if (stopped) throw new Error("The server is stopping.");
        const id = ++asked;
        const answer = new Promise<Computed>((resolve, reject) => pending.set(id, { resolve, reject }));
        start().postMessage({ id, scenario, seed } satisfies Asked);
        return await answer;
      } finally {
        queue.shift()?.();
      }
    },

    async stop(): Promise<void> {
      stopped = true;
      const running = thread;
      abandon("The server is stopping.");
      await running?.terminate();
    },
  };
}
export type Simulator = ReturnType<typeof createSimulator>;
