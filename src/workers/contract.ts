/** What the page may ask of the engine worker. Types only. Outcomes are data: comlink loses fields of thrown errors. */
import type { RunOutcome } from "#shared/simulation/result.ts";

export interface EngineProgress {
  round: number;
  rounds: number;
}

export type WorkerOutcome = RunOutcome | { ok: false; cancelled: true };

export interface EngineWorker {
  /** Simulates a scenario (any JSON; it is checked). Calling again cancels what is under way. */
  run(scenario: unknown, seed: number | null, onProgress?: (progress: EngineProgress) => void): Promise<WorkerOutcome>;
  cancel(): void;
  /** SHA-256 over the run's numbers, hex; equal for the same scenario, seed and engine in every browser and in Node. */
  digest(scenario: unknown, seed: number | null): Promise<string | null>;
}
