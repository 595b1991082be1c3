import { Worker, type WorkerOptions } from "node:worker_threads";

/** A thread of the server that runs a TypeScript module. */
export const startThread = (module: URL, options: Pick<WorkerOptions, "resourceLimits"> = {}): Worker =>
  new Worker(new URL("./start.mjs", import.meta.url), { ...options, execArgv: [], workerData: { module: module.href } });
