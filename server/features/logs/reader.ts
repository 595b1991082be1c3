/** Has reception logs read in threads of their own: one a log, three at a time, each with a limit on memory and time. */

import type { ColumnMapping } from "#shared/reception/types.ts";
import { HttpError } from "../../http/errors.ts";
import { startThread } from "../../threads/thread.ts";
import type { ReadLog, RefusedLog } from "./read.ts";
import type { FromReader, ToReader } from "./read-thread.ts";

export interface ReaderData {
  mapping: ColumnMapping;
  packed: boolean | null;
}

const AT_THE_SAME_TIME = 3;
const MOST_WAITING = 8;
/** Sent to the thread and not yet taken by it. */
const MOST_BYTES_AHEAD = 4_000_000;
const MEMORY_MB = 768;
/** After the last byte has come. */
const READ_WITHIN_MS = 120_000;

/** A place in the line; given back when the promise's holder is done. */
function places() {
  const line: (() => void)[] = [];
  let taken = 0;
  return {
    async take(): Promise<void> {
      if (taken < AT_THE_SAME_TIME) taken++;
      else if (line.length >= MOST_WAITING) {
        const message = `The server is reading ${taken} reception logs, and ${line.length} more are waiting. Try again in a moment.`;
        throw new HttpError("too-many-attempts", message, { retryAfterS: 15 });
      } else await new Promise<void>((resolve) => line.push(resolve));
    },
    give(): void {
      const next = line.shift();
      if (next) next();
      else taken--;
    },
  };
}

export function createLogReader() {
  const place = places();
  const threads = new Set<ReturnType<typeof startThread>>();
  let stopped = false;

  const readInThread = async (chunks: AsyncIterable<Buffer>, data: ReaderData): Promise<ReadLog | RefusedLog> => {
    const thread = startThread(new URL("./read-thread.ts", import.meta.url), { data, resourceLimits: { maxOldGenerationSizeMb: MEMORY_MB } });
    threads.add(thread);
    let ahead = 0;
    let taken: () => void = () => undefined;
    let over = false;
    const answer = new Promise<ReadLog | RefusedLog>((resolve, reject) => {
      thread.on("message", (message: FromReader) => {
        if ("taken" in message) ahead -= message.taken;
        else if ("read" in message) resolve(message.read);
        else reject(new Error(message.failed));
        taken();
      });
      thread.on("error", (error) => {
        const outOfMemory = (error as NodeJS.ErrnoException).code === "ERR_WORKER_OUT_OF_MEMORY";
        if (outOfMemory)
          resolve({
            ok: false,
            code: "log-invalid",
            message: `Reading this log takes more than the ${MEMORY_MB} MB of memory that the server gives to one. Split it into shorter logs.`,
          });
        else reject(error);
      });
      thread.on("exit", () => reject(new Error("The thread that read a log ended.")));
    }).finally(() => {
      over = true;
      taken();
    });
    // Whoever leaves early has a reason of its own.
    answer.catch(() => undefined);
    let impatience: NodeJS.Timeout | undefined;
    try {
      for await (const chunk of chunks) {
        // Buffers of the network share memory; what is sent to a thread has to be its own.
        const own = new Uint8Array(chunk);
        ahead += own.length;
        thread.postMessage(own satisfies ToReader, [own.buffer]);
        while (ahead > MOST_BYTES_AHEAD && !over) {
          await new Promise<void>((resolve) => {
            taken = resolve;
          });
        }
        if (over) break;
      }
      thread.postMessage("end" satisfies ToReader);
      const tooLong = new Promise<RefusedLog>((resolve) => {
        const message = `The server gives a log ${READ_WITHIN_MS / 1000} s of reading; this one takes longer. Split it into shorter logs.`;
        impatience = setTimeout(() => resolve({ ok: false, code: "log-invalid", message }), READ_WITHIN_MS);
      });
      return await Promise.race([answer, tooLong]);
    } finally {
      clearTimeout(impatience);
      threads.delete(thread);
      await thread.terminate();
    }
  };

  return {
    async read(chunks: AsyncIterable<Buffer>, data: ReaderData): Promise<ReadLog | RefusedLog> {
      await place.take();
      try {
        if (stopped) throw new Error("The server is stopping.");
        return await readInThread(chunks, data);
      } finally {
        place.give();
      }
    },

    async stop(): Promise<void> {
      stopped = true;
      await Promise.all([...threads].map((thread) => thread.terminate()));
    },
  };
}
export type LogReader = ReturnType<typeof createLogReader>;
