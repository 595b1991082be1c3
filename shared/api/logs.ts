/**
 * /api/teams/:teamId/logs: reception logs of the team. The server reads every file itself; nobody can hand in a reading.
 *
 * POST ?name=...&fileName=...&mapping={JSON of a ColumnMapping}, `uploadLogParameters` makes the three. The body is the CSV
 * file: packed by gzip with Content-Type application/gzip; with text/csv or application/octet-stream its first bytes say
 * whether it is packed. Sent as a stream, with or without Content-Length.
 * -> 201 uploadLogResponse, or 200 when the team has this very file with this very mapping already (`existed`).
 * Refused: 400 "request-invalid" with `issues` (name, mapping), 413 "too-large" with `size` (as sent, or unpacked),
 * 415 "type-not-taken", 422 "log-invalid" (not gzip, broken off, mapping and file do not fit together, nothing to use),
 * 429 "too-many-attempts" with `retryAfterS`.
 *
 * GET .../logs/:id -> logDetailSchema. GET .../logs/:id/original -> the file as it was, with its name.
 * PATCH -> logDetailSchema. DELETE -> deleteLogResponse, or 409 "in-use" with `uses` (revisions that were saved; drafts
 * live in browsers and are not known to the server).
 */
import { z } from "zod";
import { INDEPENDENCE_VERDICTS } from "#shared/reception/independence.ts";
import { type ColumnMapping, columnMappingSchema, linkTraceSchema, readReportSchema } from "#shared/reception/types.ts";
import { pageOf, pageQuery, personSchema, useSchema } from "./common.ts";

/** As sent: packed or not. */
export const MAX_LOG_SENT_BYTES = 64_000_000;
export const MAX_LOG_BYTES = 256_000_000;

const logName = z.string().trim().min(1).max(120);

export const logItemSchema = z.strictObject({
  id: z.uuid(),
  name: z.string(),
  /** Of the file that was uploaded; "" when none was given. */
  fileName: z.string(),
  author: personSchema,
  uploadedAt: z.iso.datetime(),
  /** Of the original file, unpacked. */
  bytes: z.int().positive(),
  sha256: z.string().regex(/^[0-9a-f]{64}$/),
  rows: z.int().nonnegative(),
  rowsUsed: z.int().nonnegative(),
  /** Rows that were used or left out with a remark, of all kinds together. */
  troubles: z.int().nonnegative(),
  links: z.int().positive(),
  packets: z.int().nonnegative(),
  lost: z.int().nonnegative(),
  /** Median interval of the links; null: no column tells the time. */
  intervalS: z.number().positive().nullable(),
  /** How many links the tests of independence gave each verdict; null: read before this was summed up. */
  verdicts: z.partialRecord(z.enum(INDEPENDENCE_VERDICTS), z.int().positive()).nullable(),
  /** Scenarios with a revision that names it; 0: it can be deleted. */
  scenarios: z.int().nonnegative(),
  /** Whoever asks may rename it, and delete it once it is unused. */
  mayEdit: z.boolean(),
});
export type LogItem = z.infer<typeof logItemSchema>;

export const LOG_SORTS = ["name", "author", "uploaded", "size", "links", "packets", "loss", "used"] as const;
export type LogSort = (typeof LOG_SORTS)[number];
export const logListQuery = z.strictObject({
  /** Words of the name, the file's name or the author. */
  search: z.string().trim().max(200).default(""),
  sort: z.enum(LOG_SORTS).default("uploaded"),
  direction: z.enum(["ascending", "descending"]).default("descending"),
  ...pageQuery,
});
export type LogListQuery = z.infer<typeof logListQuery>;

export const logListResponse = z.strictObject({
  ...pageOf(logItemSchema),
  /** Without the search: "0 of 4 logs". */
  totalUnfiltered: z.int().nonnegative(),
});
export type LogListResponse = z.infer<typeof logListResponse>;

export const logDetailSchema = z.strictObject({
  ...logItemSchema.shape,
  mapping: columnMappingSchema,
  /** Saved revisions that name it. */
  usedBy: z.array(useSchema),
  report: readReportSchema,
  /** With all run lengths. */
  linkTraces: z.array(linkTraceSchema).min(1),
});
export type LogDetail = z.infer<typeof logDetailSchema>;

export const uploadLogQuery = z.strictObject({
  name: logName,
  fileName: z.string().trim().max(200).default(""),
  /** JSON of a ColumnMapping. */
  mapping: z.string().min(2).max(4000),
});

export const uploadLogParameters = ({ name, fileName, mapping }: { name: string; fileName: string; mapping: ColumnMapping }) => ({
  name,
  fileName,
  mapping: JSON.stringify(mapping),
});

export const uploadLogResponse = z.strictObject({
  log: logDetailSchema,
  /** The same file was read with the same mapping before: that log is given back as it is, under its own name. */
  existed: z.boolean(),
});

/** PATCH .../logs/:id. Revisions that name it keep the name that it had then. */
export const changeLogRequest = z.strictObject({ name: logName });
export type ChangeLogRequest = z.input<typeof changeLogRequest>;

export const deleteLogResponse = z.strictObject({ deleted: z.literal(true) });
