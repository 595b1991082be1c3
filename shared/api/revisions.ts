/** /api/teams/:teamId/scenarios/:id/revisions. A revision never changes. */
import { z } from "zod";
import { scenarioSchema } from "#shared/scenario/schema.ts";
import { noteSchema, pageOf, pageQuery, personSchema, verdictSchema } from "./common.ts";

const revisionSummarySchema = z.strictObject({
  number: z.int().positive(),
  name: z.string(),
  note: z.string(),
  author: personSchema,
  savedAt: z.iso.datetime(),
  /** Of the latest run, or why there is none. */
  verdict: verdictSchema,
});
export type RevisionSummary = z.infer<typeof revisionSummarySchema>;

export const revisionDetailSchema = z.strictObject({ ...revisionSummarySchema.shape, scenario: scenarioSchema });
/** GET .../revisions/:number */
export type RevisionDetail = z.infer<typeof revisionDetailSchema>;

/** Newest first. */
export const revisionListQuery = z.strictObject(pageQuery);
export const revisionListResponse = z.strictObject(pageOf(revisionSummarySchema));

/**
 * POST .../revisions -> 201 scenarioResponse, or 409 "revision-conflict" with `latest` when baseRevision is not the newest.
 * To save over the newer one on purpose, send its number as baseRevision.
 */
export const saveRevisionRequest = z.strictObject({
  baseRevision: z.int().positive(),
  scenario: scenarioSchema,
  note: noteSchema,
});
export type SaveRevisionRequest = z.input<typeof saveRevisionRequest>;
