import { expose } from "comlink";
import type { LogProgress, LogWorker } from "./log-contract.ts";
import { packFile, previewFile, readFile } from "./log-reading.ts";
import { studyRuns } from "./log-study.ts";

/** Between two tellings of how far it is. */
const TELL_MS = 80;

let newest = 0;

/** A task that a newer one, or `cancel`, ends. */
function begin(onProgress?: (progress: LogProgress) => void) {
  const mine = ++newest;
  let told = 0;
  return {
    wanted: () => mine === newest,
    tell: (progress: LogProgress) => {
      if (!onProgress || performance.now() - told < TELL_MS) return;
      told = performance.now();
      onProgress(progress);
    },
  };
}

const worker: LogWorker = {
  preview: previewFile,
  read: (file, mapping, onProgress) => readFile(file, mapping, begin(onProgress)),
  pack: (file, onProgress) => packFile(file, begin(onProgress)),
  study: async (runs) => ({ ok: true, study: studyRuns(runs) }),
  cancel() {
    newest++;
  },
};

expose(worker);
