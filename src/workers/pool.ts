/** The page's side of the engine worker. A call never hangs: what a stopped worker leaves open is settled as cancelled. */
import { proxy, type Remote, releaseProxy, wrap } from "comlink";
import type { EngineProgress, EngineWorker, FloorTasks, TaskKind, TaskOutcome, TaskProgress, WorkerOutcome } from "./contract.ts";

export interface EngineClient extends FloorTasks {
  /** Simulates; a newer call cancels an older one. Rejects only when the worker itself cannot start or broke. */
  run(scenario: unknown, seed: number | null, onProgress?: (progress: EngineProgress) => void): Promise<WorkerOutcome>;
  cancel(): void;
  cancelTask(kind: TaskKind): void;
  digest(scenario: unknown, seed: number | null): Promise<string | null>;
  /** Stops the worker for good. */
  dispose(): void;
}

export class EngineBroken extends Error {
  override name = "EngineBroken";
}

export function createEngine(): EngineClient {
  const worker = new Worker(new URL("./engine.worker.ts", import.meta.url), { type: "module", name: "holdfast-engine" });
  const remote: Remote<EngineWorker> = wrap<EngineWorker>(worker);
  const open = new Set<(error: EngineBroken | null) => void>();
  let disposed = false;
  /** Set for good when the worker could not start or broke: calls to it would never be answered. */
  let broken: EngineBroken | null = null;
  worker.addEventListener("error", (event) => {
    broken = new EngineBroken(event.message || "the engine's worker could not start");
    for (const settle of [...open]) settle(broken);
  });

  function guarded<T>(call: Promise<T>, onDispose: T): Promise<T> {
    if (disposed) return Promise.resolve(onDispose);
    if (broken) return Promise.reject(broken);
    return new Promise<T>((resolve, reject) => {
      const settle = (error: EngineBroken | null) => {
        open.delete(settle);
        if (error) reject(error);
        else resolve(onDispose);
      };
      open.add(settle);
      call.then(
        (value) => {
          open.delete(settle);
          resolve(value);
        },
        (cause: unknown) => {
          open.delete(settle);
          reject(new EngineBroken(cause instanceof Error ? cause.message : String(cause)));
        },
      );
    });
  }

  const task = <T>(call: Promise<unknown>) => guarded<TaskOutcome<T>>(call as Promise<TaskOutcome<T>>, { ok: false, cancelled: true });
  const telling = (onProgress?: TaskProgress) => onProgress && proxy(onProgress);

  return {
    floods: (scenario, seed, onProgress) => task(remote.floods(scenario, seed, telling(onProgress))),
    survey: (scenario, options, onProgress) => task(remote.survey(scenario, options, telling(onProgress))),
    contours: (scenario, slotId, options) => task(remote.contours(scenario, slotId, options)),
    links: (scenario, atS) => task(remote.links(scenario, atS)),
    // The page may still give up a job while it goes away, after the worker did.
    cancelTask: (kind) => {
      if (!disposed) void remote.cancelTask(kind);
    },
    run: (scenario, seed, onProgress) =>
      guarded<WorkerOutcome>(remote.run(scenario, seed, onProgress && proxy(onProgress)) as Promise<WorkerOutcome>, { ok: false, cancelled: true }),
    cancel: () => void remote.cancel(),
    digest: (scenario, seed) => guarded(remote.digest(scenario, seed), null),
    dispose() {
      disposed = true;
      for (const settle of [...open]) settle(null);
      remote[releaseProxy]();
      worker.terminate();
    },
  };
}
