/** The log worker in the test's own process, where there are no workers. */
import { Blob as NodeBlob } from "node:buffer";
import type { LogClient } from "#src/workers/log-client.ts";
import { packFile, previewFile, readFile } from "#src/workers/log-reading.ts";
import { studyRuns } from "#src/workers/log-study.ts";

/** jsdom's files cannot be read as streams; Node's can. */
const streamed = async (file: File) => new NodeBlob([new Uint8Array(await file.arrayBuffer())]) as unknown as Blob;

export const createLogClient = (): LogClient => {
  let newest = 0;
  const begin = (tell: Parameters<LogClient["pack"]>[1]) => {
    const mine = ++newest;
    return { wanted: () => mine === newest, tell: (progress: Parameters<NonNullable<typeof tell>>[0]) => tell?.(progress) };
  };
  return {
    preview: async (file, split) => previewFile(await streamed(file), split),
    read: async (file, mapping, tell) => {
      const task = begin(tell);
      return readFile(await streamed(file), mapping, task);
    },
    pack: async (file, tell) => {
      const task = begin(tell);
      return packFile(await streamed(file), task);
    },
    study: async (runs) => ({ ok: true, study: studyRuns(runs) }),
    cancel() {
      newest++;
    },
    dispose() {},
  };
};
