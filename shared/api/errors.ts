/** How every route says no: one body, a literal code for programs, a message for people. */
import { z } from "zod";
import { useSchema } from "./common.ts";

const issueSchema = z.strictObject({
  code: z.string(),
  /** Where, as written in the file: "loops[0].plant.cartMassKg"; for other requests the field or query parameter. */
  path: z.string(),
  message: z.string(),
  help: z.array(z.string()).optional(),
});

const ERROR_CODES = [
  // 400
  "not-json",
  "request-invalid",
  // 401
  "signed-out",
  "wrong-credentials",
  // 403
  "not-permitted",
  "foreign-origin",
  // 404, 405, 410
  "not-found",
  "method-not-allowed",
  "scenario-deleted",
  // 409
  "revision-conflict",
  "scenario-archived",
  "scenario-not-archived",
  "in-use",
  // 413, 415, 422, 429
  "too-large",
  "not-json-type",
  "type-not-taken",
  "scenario-invalid",
  "log-invalid",
  "picture-invalid",
  "too-many-attempts",
  // 500, 503
  "internal",
  "database-unavailable",
] as const;
export type ErrorCode = (typeof ERROR_CODES)[number];

/** The revision that was saved in the meantime. */
const newerRevisionSchema = z.strictObject({
  number: z.int().positive(),
  author: z.strictObject({ id: z.uuid(), name: z.string() }),
  savedAt: z.iso.datetime(),
  note: z.string(),
});

export const errorBodySchema = z.strictObject({
  error: z.strictObject({
    code: z.enum(ERROR_CODES),
    message: z.string(),
    /** scenario-invalid, request-invalid, log-invalid: one entry per bad field. */
    issues: z.array(issueSchema).optional(),
    /** revision-conflict: what is newest now. */
    latest: newerRevisionSchema.optional(),
    /** not-json: where reading stopped. Line and column count from 1, offset from 0. */
    position: z.strictObject({ offset: z.int(), line: z.int(), column: z.int() }).optional(),
    /** too-large. */
    size: z.strictObject({ bytes: z.int().nullable(), permittedBytes: z.int() }).optional(),
    /** too-many-attempts. */
    retryAfterS: z.int().optional(),
    /** in-use: what keeps it. */
    uses: z.array(useSchema).optional(),
    /** scenario-deleted. */
    deleted: z.strictObject({ name: z.string(), by: z.string(), at: z.iso.datetime() }).optional(),
    /** internal: to be found in the server's log. */
    reference: z.string().optional(),
  }),
});
export type ErrorBody = z.infer<typeof errorBodySchema>;

/** A scenario may be this large as JSON; larger ones are refused with code "too-large". */
export const MAX_SCENARIO_BYTES = 5_000_000;
