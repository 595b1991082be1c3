/** What the page may ask of the engine worker. Types only. Outcomes are data: comlink loses fields of thrown errors. */
import type { ContourOptions, FloodContours } from "#shared/network/contours.ts";
import type { FloodRecord } from "#shared/network/floods.ts";
import type { LinkRow } from "#shared/network/link-table.ts";
import type { FloodSurvey, SurveyOptions } from "#shared/network/survey.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import type { RunOutcome } from "#shared/simulation/result.ts";

export interface EngineProgress {
  round: number;
  rounds: number;
}

export type WorkerOutcome = RunOutcome | { ok: false; cancelled: true };

/** What a longer job came to. A job is given up when a newer one of its kind is asked for, or by cancelTask. */
export type TaskOutcome<T> = { ok: true; value: T } | { ok: false; issues: Issue[] } | { ok: false; cancelled: true };
export type TaskKind = "floods" | "links" | "survey" | "contours";
/** 0 to 1. */
export type TaskProgress = (share: number) => void;

/** Jobs on a floor. The scenario is any JSON; its floor, radio and round are checked, its machine need not be in order. */
export interface FloorTasks {
  /** Every flood of a run with this seed; null: the scenario's own. */
  floods(scenario: unknown, seed: number | null, onProgress?: TaskProgress): Promise<TaskOutcome<FloodRecord>>;
  /** Many floods in figures with intervals, and what would help. */
  survey(scenario: unknown, options: SurveyOptions, onProgress?: TaskProgress): Promise<TaskOutcome<FloodSurvey>>;
  /** By which step half of the slot's floods reach a place of the plan; null where links are given and places mean nothing. */
  contours(scenario: unknown, slotId: string, options: ContourOptions): Promise<TaskOutcome<FloodContours | null>>;
  /** All ordered pairs of nodes at an instant, for the longest payload of the round. */
  links(scenario: unknown, atS: number): Promise<TaskOutcome<LinkRow[]>>;
}

export interface EngineWorker extends FloorTasks {
  /** Simulates a scenario (any JSON; it is checked). Calling again cancels what is under way. */
  run(scenario: unknown, seed: number | null, onProgress?: (progress: EngineProgress) => void): Promise<WorkerOutcome>;
  cancel(): void;
  cancelTask(kind: TaskKind): void;
  /** SHA-256 over the run's numbers, hex; equal for the same scenario, seed and engine in every browser and in Node. */
  digest(scenario: unknown, seed: number | null): Promise<string | null>;
}
