/** The page's side of the log worker. */
import { proxy, type Remote, releaseProxy, wrap } from "comlink";
import { guardWorker } from "./guard.ts";
import type { Failed, LogWorker, PackOutcome, PreviewOutcome, ReadOutcome, StudyOutcome } from "./log-contract.ts";

export interface LogClient extends LogWorker {
  /** Stops the worker for good. */
  dispose(): void;
}

const CANCELLED: Failed = { ok: false, cancelled: true };

export function createLogClient(): LogClient {
  const worker = new Worker(new URL("./log.worker.ts", import.meta.url), { type: "module", name: "holdfast-log" });
  const remote: Remote<LogWorker> = wrap<LogWorker>(worker);
  const guard = guardWorker(worker, "reception log");
  return {
    preview: (file, split) => guard.call<PreviewOutcome>(() => remote.preview(file, split) as Promise<PreviewOutcome>, CANCELLED),
    read: (file, mapping, onProgress) =>
      guard.call<ReadOutcome>(() => remote.read(file, mapping, onProgress && proxy(onProgress)) as Promise<ReadOutcome>, CANCELLED),
    pack: (file, onProgress) => guard.call<PackOutcome>(() => remote.pack(file, onProgress && proxy(onProgress)) as Promise<PackOutcome>, CANCELLED),
    study: (runs) => guard.call<StudyOutcome>(() => remote.study(runs) as Promise<StudyOutcome>, CANCELLED),
    cancel() {
      if (!guard.disposed) void remote.cancel();
    },
    dispose() {
      guard.dispose();
      remote[releaseProxy]();
      worker.terminate();
    },
  };
}
