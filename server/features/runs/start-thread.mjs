// Threads do not inherit the loader that lets Node.js read TypeScript.
import { register } from "tsx/esm/api";

register();
await import("./run-thread.ts");
