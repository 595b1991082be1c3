/** A thread in which reception logs are read, one after the other. Chunks come in as messages; each is acknowledged when it has been taken. */
import { parentPort } from "node:worker_threads";
import { type ReadLog, type RefusedLog, readLog } from "./read.ts";
import type { Reading } from "./reader.ts";

export type ToReader = { begin: Reading } | Uint8Array<ArrayBuffer> | "end";
export type FromReader = { taken: number } | { read: ReadLog | RefusedLog } | { failed: string };

const port = parentPort;
if (!port) throw new Error("This is a thread of the server, not a program.");
const tell = (message: FromReader, transfer: ArrayBuffer[] = []) => port.postMessage(message, transfer);

/** What is sent of one log. */
function inbox() {
  const waiting: (Uint8Array<ArrayBuffer> | "end")[] = [];
  let wake: () => void = () => undefined;
  return {
    put(part: Uint8Array<ArrayBuffer> | "end"): void {
      waiting.push(part);
      wake();
    },
    async *chunks(): AsyncGenerator<Uint8Array> {
      for (;;) {
        const next = waiting.shift();
        if (next === "end") return;
        if (next === undefined) {
          await new Promise<void>((resolve) => {
            wake = resolve;
          });
          continue;
        }
        yield next;
        tell({ taken: next.length });
      }
    },
  };
}

let current = inbox();
port.on("message", (message: ToReader) => {
  if (message === "end" || message instanceof Uint8Array) return current.put(message);
  // What is left of a log that was refused in its middle is left behind.
  current = inbox();
  const { mapping, packed } = message.begin;
  readLog(current.chunks(), mapping, packed).then(
    (read) => tell({ read }, read.ok ? read.pieces.map(({ buffer }) => buffer) : []),
    (error) => tell({ failed: error instanceof Error ? (error.stack ?? error.message) : String(error) }),
  );
});
