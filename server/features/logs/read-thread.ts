/** The thread in which one reception log is read. Chunks come in as messages; each is acknowledged when it has been taken. */
import { parentPort, workerData } from "node:worker_threads";
import { type ReadLog, type RefusedLog, readLog } from "./read.ts";
import type { ReaderData } from "./reader.ts";

export type ToReader = Uint8Array<ArrayBuffer> | "end";
export type FromReader = { taken: number } | { read: ReadLog | RefusedLog } | { failed: string };

const port = parentPort;
if (!port) throw new Error("This is a thread of the server, not a program.");
const { mapping, packed } = workerData as ReaderData;
const tell = (message: FromReader, transfer: ArrayBuffer[] = []) => port.postMessage(message, transfer);

const waiting: ToReader[] = [];
let wake: () => void = () => undefined;
port.on("message", (message: ToReader) => {
  waiting.push(message);
  wake();
});

async function* chunks(): AsyncGenerator<Uint8Array> {
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
}

readLog(chunks(), mapping, packed).then(
  (read) => tell({ read }, read.ok ? read.pieces.map(({ buffer }) => buffer) : []),
  (error) => tell({ failed: error instanceof Error ? (error.stack ?? error.message) : String(error) }),
);
