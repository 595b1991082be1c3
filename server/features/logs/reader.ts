/** Has reception logs read in threads, three at a time, each with a limit on memory and time: nothing else waits for them. */
import type { Worker } from "node:worker_threads";
import type { ColumnMapping } from "#shared/reception/types.ts";
import { HttpError } from "../../http/errors.ts";
import { startThread } from "../../threads/thread.ts";
import type { ReadLog, RefusedLog } from "./read.ts";
import type { FromReader, ToReader } from "./read-thread.ts";

export interface Reading {
  mapping: ColumnMapping;
  /** It has to be gzip; otherwise its first bytes say. */
  packed: boolean;
}

const AT_THE_SAME_TIME = 3;
const MOST_WAITING = 8;
/** Sent to the thread and not yet taken by it. */
const MOST_BYTES_AHEAD = 4_000_000;
const MEMORY_MB = 768;
/** After the last byte has come. */
const READ_WITHIN_MS = 120_000;
/** A thread that read more than this goes, with the memory that it took. */
const SMALL_BYTES = 5_000_000;

/** A place in the line; given back when its holder is done. */
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

/** What the thread makes of what it is sent; refuses as well when it runs out of memory. */
function listenTo(thread: Worker) {
  let ahead = 0;
  let wake: () => void = () => undefined;
  let over = false;
  const answer = new Promise<ReadLog | RefusedLog>((resolve, reject) => {
    thread.on("message", (message: FromReader) => {
      if ("taken" in message) ahead -= message.taken;
      else if ("read" in message) resolve(message.read);
      else reject(new Error(message.failed));
      wake();
    });
    thread.on("error", (error) => {
      if ((error as NodeJS.ErrnoException).code !== "ERR_WORKER_OUT_OF_MEMORY") return reject(error);
      const message = `Reading this log takes more than the ${MEMORY_MB} MB of memory that the server gives to one. Split it into shorter logs.`;
      resolve({ ok: false, code: "log-invalid", message });
    });
    thread.on("exit", () => reject(new Error("The thread that read a log ended.")));
  }).finally(() => {
    over = true;
    wake();
  });
  // Whoever leaves early has a reason of its own.
  answer.catch(() => undefined);
  return {
    answer,
    isOver: () => over,
    async send(chunk: Buffer): Promise<void> {
      // Buffers of the network share memory; what is sent to a thread has to be its own.
      const own = new Uint8Array(chunk);
      ahead += own.length;
      thread.postMessage(own satisfies ToReader, [own.buffer]);
      while (ahead > MOST_BYTES_AHEAD && !over) {
        await new Promise<void>((resolve) => {
          wake = resolve;
        });
      }
    },
  };
}

export function createLogReader() {
  const place = places();
  const busy = new Set<Worker>();
  /** One that has read a small log waits for the next: starting it takes longer than most logs. */
  let idle: Worker | null = null;
  let stopped = false;

  const takeThread = (): Worker => {
    const thread = idle ?? startThread(new URL("./read-thread.ts", import.meta.url), { resourceLimits: { maxOldGenerationSizeMb: MEMORY_MB } });
    idle = null;
    busy.add(thread);
    return thread;
  };
  const giveBack = async (thread: Worker, clean: boolean): Promise<void> => {
    busy.delete(thread);
    const forget = () => {
      if (idle === thread) idle = null;
    };
    for (const event of ["message", "error", "exit"]) thread.removeAllListeners(event);
    thread.on("error", forget).on("exit", forget);
    if (clean && !idle && !stopped) idle = thread;
    else await thread.terminate();
  };

  const readInThread = async (chunks: AsyncIterable<Buffer>, reading: Reading): Promise<ReadLog | RefusedLog> => {
    const thread = takeThread();
    const { answer, send, isOver } = listenTo(thread);
    let impatience: NodeJS.Timeout | undefined;
    let sent = 0;
    let clean = false;
    try {
      thread.postMessage({ begin: reading } satisfies ToReader);
      for await (const chunk of chunks) {
        await send(chunk);
        sent += chunk.length;
        if (isOver()) return await answer;
      }
      thread.postMessage("end" satisfies ToReader);
      const tooLong = new Promise<RefusedLog>((resolve) => {
        const message = `The server gives a log ${READ_WITHIN_MS / 1000} s of reading; this one takes longer. Split it into shorter logs.`;
        impatience = setTimeout(() => resolve({ ok: false, code: "log-invalid", message }), READ_WITHIN_MS);
      });
      const read = await Promise.race([answer, tooLong]);
      clean = isOver() && sent <= SMALL_BYTES;
      return read;
    } finally {
      clearTimeout(impatience);
      await giveBack(thread, clean);
    }
  };

  return {
    async read(chunks: AsyncIterable<Buffer>, reading: Reading): Promise<ReadLog | RefusedLog> {
      await place.take();
      try {
        if (stopped) throw new Error("The server is stopping.");
        return await readInThread(chunks, reading);
      } finally {
        place.give();
      }
    },

    async stop(): Promise<void> {
      stopped = true;
      await Promise.all([...busy, ...(idle ? [idle] : [])].map((thread) => thread.terminate()));
    },
  };
}
export type LogReader = ReturnType<typeof createLogReader>;
