/** Calls to a worker that always end: what a stopped worker leaves open is settled, and one that broke answers at once. */
export class WorkerBroken extends Error {
  override name = "WorkerBroken";
}

export interface Guard {
  /** The call's own answer, or `onDispose` when the worker is stopped before it comes. */
  call<T>(call: () => Promise<T>, onDispose: T): Promise<T>;
  /** The page may still want to give up a job while it goes away, after the worker did. */
  readonly disposed: boolean;
  dispose(): void;
}

export function guardWorker(worker: Worker, name: string): Guard {
  const open = new Set<(error: WorkerBroken | null) => void>();
  let disposed = false;
  /** Set for good when the worker could not start or broke: calls to it would never be answered. */
  let broken: WorkerBroken | null = null;
  worker.addEventListener("error", (event) => {
    broken = new WorkerBroken(event.message || `the ${name}'s worker could not start`);
    for (const settle of [...open]) settle(broken);
  });
  return {
    get disposed() {
      return disposed;
    },
    call<T>(call: () => Promise<T>, onDispose: T): Promise<T> {
      if (disposed) return Promise.resolve(onDispose);
      if (broken) return Promise.reject(broken);
      return new Promise<T>((resolve, reject) => {
        const settle = (error: WorkerBroken | null) => {
          open.delete(settle);
          if (error) reject(error);
          else resolve(onDispose);
        };
        open.add(settle);
        call().then(
          (value) => {
            open.delete(settle);
            resolve(value);
          },
          (cause: unknown) => {
            open.delete(settle);
            reject(new WorkerBroken(cause instanceof Error ? cause.message : String(cause)));
          },
        );
      });
    },
    dispose() {
      disposed = true;
      for (const settle of [...open]) settle(null);
    },
  };
}
