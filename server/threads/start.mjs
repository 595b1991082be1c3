// Threads do not inherit the loader that lets Node.js read TypeScript.
import { workerData } from "node:worker_threads";
import { register } from "tsx/esm/api";

register();
await import(workerData.module);
