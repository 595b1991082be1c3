import { useCallback, useEffect, useRef, useState } from "react";
import type { RoundTiming } from "#shared/network/round.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import type { EngineProgress } from "#src/workers/contract.ts";
import type { EngineClient } from "#src/workers/pool.ts";

export interface BenchRun {
  scenario: Scenario;
  timing: RoundTiming;
  result: RunResult;
  /** From asking the worker to its answer, ms. */
  elapsedMs: number;
  at: Date;
}

export interface Bench {
  /** The last good run. */
  run: BenchRun | null;
  /** A run that takes long enough to be told of. */
  progress: EngineProgress | null;
  /** The user stopped the run of what is on the screen. */
  cancelled: boolean;
  /** Why the engine refused a scenario that the form found nothing wrong with. */
  refused: Issue[];
  /** The worker itself failed. */
  broken: boolean;
  cancel(): void;
  again(): void;
}

const LONG_MS = 500;

/** Runs what is edited as soon as it is edited: the newest edit wins, older runs are given up. */
export function useBench(
  engine: Pick<EngineClient, "run" | "cancel"> | null,
  scenario: Scenario | null,
  timing: RoundTiming | null,
  seed: number | null,
): Bench {
  const [run, setRun] = useState<BenchRun | null>(null);
  const [progress, setProgress] = useState<EngineProgress | null>(null);
  const [cancelled, setCancelled] = useState(false);
  const [refused, setRefused] = useState<Issue[]>([]);
  const [broken, setBroken] = useState(false);
  const [attempt, setAttempt] = useState(0);
  const turn = useRef(0);

  // biome-ignore lint/correctness/useExhaustiveDependencies: a new attempt runs the same scenario again; timing comes with its scenario
  useEffect(() => {
    const mine = ++turn.current;
    const isNewest = () => turn.current === mine;
    setProgress(null);
    setCancelled(false);
    setRefused([]);
    setBroken(false);
    if (!engine) return;
    if (!scenario || !timing) {
      engine.cancel();
      return;
    }
    const began = performance.now();
    // Progress comes through a channel of its own and may arrive after the answer.
    let answered = false;
    const onProgress = (now: EngineProgress) => {
      if (isNewest() && !answered && performance.now() - began > LONG_MS) setProgress(now);
    };
    engine.run(scenario, seed, onProgress).then(
      (outcome) => {
        answered = true;
        if (!isNewest()) return;
        setProgress(null);
        if (outcome.ok) setRun({ scenario, timing, result: outcome.result, elapsedMs: performance.now() - began, at: new Date() });
        else if ("issues" in outcome) setRefused(outcome.issues);
        else setCancelled(true);
      },
      () => {
        answered = true;
        if (!isNewest()) return;
        setProgress(null);
        setBroken(true);
      },
    );
  }, [engine, scenario, seed, attempt]);

  return {
    run,
    progress,
    cancelled,
    refused,
    broken,
    cancel: useCallback(() => engine?.cancel(), [engine]),
    again: useCallback(() => setAttempt((count) => count + 1), []),
  };
}
