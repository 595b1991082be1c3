import { useSyncExternalStore } from "react";
import { bytesText } from "#src/lib/format.ts";
import type { LogProgress } from "#src/workers/log-contract.ts";

/** How far something is: told often, and heard by its bar alone, so that the page around it stands still. */
export interface Progress {
  tell: (progress: LogProgress) => void;
  now: () => LogProgress;
  subscribe: (listener: () => void) => () => void;
}

export function createProgress(ofBytes: number): Progress {
  let now: LogProgress = { bytes: 0, ofBytes };
  const listeners = new Set<() => void>();
  return {
    tell(progress) {
      now = progress;
      for (const listener of [...listeners]) listener();
    },
    now: () => now,
    subscribe(listener) {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
  };
}

interface ProgressBarProps {
  /** "Reading the whole file" */
  what: string;
  progress: Progress;
}

export function ProgressBar({ what, progress }: ProgressBarProps) {
  const { bytes, ofBytes } = useSyncExternalStore(progress.subscribe, progress.now);
  return (
    <label>
      <span>
        {what}: {bytesText(bytes)} of {bytesText(ofBytes)}
      </span>
      <progress value={bytes} max={Math.max(1, ofBytes)} />
    </label>
  );
}
