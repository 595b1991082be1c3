import { Worker, type WorkerOptions } from "node:worker_threads";

/** A thread of the server that runs a TypeScript module; the module finds `data` beside its own address in workerData. */
export const startThread = (module: URL, { data, ...options }: Omit<WorkerOptions, "workerData" | "execArgv"> & { data?: object } = {}): Worker =>
  new Worker(new URL("./start.mjs", import.meta.url), { ...options, execArgv: [], workerData: { ...data, module: module.href } });
