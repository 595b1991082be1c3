/** What the page may ask of the log worker. Types only. Outcomes are data: comlink loses fields of thrown errors. */
import type { LinkFit } from "#shared/reception/fit.ts";
import type { IndependenceTest } from "#shared/reception/independence.ts";
import type { ColumnMapping, LinkTrace, ReadReport } from "#shared/reception/types.ts";

export interface LogProgress {
  bytes: number;
  ofBytes: number;
}

export interface PreviewRow {
  /** Line of the file, counted from 1. */
  line: number;
  cells: string[];
}

export interface LogPreview {
  delimiter: ColumnMapping["delimiter"];
  decimal: ColumnMapping["decimal"];
  /** Does the first row hold names? */
  header: boolean;
  /** The first rows as they stand in the file; the header, if there is one, is the first. */
  rows: PreviewRow[];
  /** Columns of the widest of these rows. */
  width: number;
  /** null: no column looks like a packet number or like received and lost. */
  guess: ColumnMapping | null;
  /** One sentence per guess. */
  reasons: string[];
}

/** A link without its packets: those stay in the worker. */
export type LinkSummary = Omit<LinkTrace, "runs" | "hours">;

export interface LogReading {
  links: LinkSummary[];
  report: ReadReport;
}

export type Failed = { ok: false; message: string } | { ok: false; cancelled: true };
export type PreviewOutcome = { ok: true; preview: LogPreview } | Failed;
export type ReadOutcome = { ok: true; reading: LogReading } | Failed;
export type PackOutcome = { ok: true; packed: Blob } | Failed;

export interface LinkStudy {
  fit: LinkFit;
  independence: IndependenceTest;
}
export type StudyOutcome = { ok: true; study: LinkStudy } | Failed;

export interface LogWorker {
  /** The first rows; `split`: divided by this sign and no other. */
  preview(file: File, split: ColumnMapping["delimiter"] | null): Promise<PreviewOutcome>;
  /** Reads the whole file. Calling again cancels what is under way. */
  read(file: File, mapping: ColumnMapping, onProgress?: (progress: LogProgress) => void): Promise<ReadOutcome>;
  /** The file as gzip. Calling again, or reading, cancels it. */
  pack(file: File, onProgress?: (progress: LogProgress) => void): Promise<PackOutcome>;
  /** Fit and tests of a link's run lengths. */
  study(runs: number[]): Promise<StudyOutcome>;
  cancel(): void;
}
