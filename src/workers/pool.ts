/** The page's side of the engine worker. A call never hangs: what a stopped worker leaves open is settled as cancelled. */
import { proxy, type Remote, releaseProxy, wrap } from "comlink";
import type { EngineProgress, EngineWorker, FloorTasks, TaskKind, TaskOutcome, TaskProgress, WorkerOutcome } from "./contract.ts";
import { guardWorker } from "./guard.ts";

export interface EngineClient extends FloorTasks {
  /** Simulates; a newer call cancels an older one. Rejects only when the worker itself cannot start or broke. */
  run(scenario: unknown, seed: number | null, onProgress?: (progress: EngineProgress) => void): Promise<WorkerOutcome>;
  cancel(): void;
  cancelTask(kind: TaskKind): void;
  digest(scenario: unknown, seed: number | null): Promise<string | null>;
  /** Stops the worker for good. */
  dispose(): void;
}

export function createEngine(): EngineClient {
  const worker = new Worker(new URL("./engine.worker.ts", import.meta.url), { type: "module", name: "holdfast-engine" });
  const remote: Remote<EngineWorker> = wrap<EngineWorker>(worker);
  const guard = guardWorker(worker, "engine");

  const task = <T>(call: () => Promise<unknown>) => guard.call<TaskOutcome<T>>(call as () => Promise<TaskOutcome<T>>, { ok: false, cancelled: true });
  const telling = (onProgress?: TaskProgress) => onProgress && proxy(onProgress);

  return {
    floods: (scenario, seed, onProgress) => task(() => remote.floods(scenario, seed, telling(onProgress))),
    survey: (scenario, options, onProgress) => task(() => remote.survey(scenario, options, telling(onProgress))),
    contours: (scenario, slotId, options) => task(() => remote.contours(scenario, slotId, options)),
    links: (scenario, atS) => task(() => remote.links(scenario, atS)),
    cancelTask: (kind) => {
      if (!guard.disposed) void remote.cancelTask(kind);
    },
    run: (scenario, seed, onProgress) =>
      guard.call<WorkerOutcome>(() => remote.run(scenario, seed, onProgress && proxy(onProgress)) as Promise<WorkerOutcome>, {
        ok: false,
        cancelled: true,
      }),
    cancel: () => void remote.cancel(),
    digest: (scenario, seed) => guard.call<string | null>(() => remote.digest(scenario, seed), null),
    dispose() {
      guard.dispose();
      remote[releaseProxy]();
      worker.terminate();
    },
  };
}
