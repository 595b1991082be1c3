/** /api/teams/:teamId/scenarios/:id/runs and /api/teams/:teamId/runs/:runId. The server simulates itself; nobody can hand in a result. */
import { z } from "zod";
import type { Figures, LimitVerdict, RunEvent } from "#shared/simulation/result.ts";
import { deliverySchema, pageOf, pageQuery, personSchema, verdictSchema, verdictStateSchema } from "./common.ts";

const seedSchema = z.int().min(0).max(4_294_967_295);
const digestSchema = z.string().regex(/^[0-9a-f]{64}$/, "64 hexadecimal digits");

const eventSchema = z.strictObject({
  atS: z.number(),
  kind: z.enum(["push", "push-ends", "change", "reference", "outage", "outage-ends", "silence", "resumed", "limit-crossed", "track-end", "diverged"]),
  text: z.string(),
}) satisfies z.ZodType<RunEvent>;

const limitVerdictSchema = z.strictObject({
  index: z.int(),
  state: z.enum(["holds", "near", "crosses"]),
  value: z.number(),
  unit: z.string(),
  used: z.number(),
  atS: z.number().nullable(),
  crossedAtS: z.number().nullable(),
  crossedBound: z.enum(["lo", "hi"]).nullable().default(null),
  settlingS: z.number().nullable(),
}) satisfies z.ZodType<LimitVerdict>;

const figuresSchema = z.strictObject({
  signals: z.array(z.strictObject({ name: z.string(), unit: z.string(), max: z.number(), min: z.number(), rms: z.number(), ise: z.number() })),
  messages: z.array(z.strictObject({ message: z.enum(["measurement", "command"]), sent: z.int(), lost: z.int(), longestLoss: z.int() })),
  saturatedShare: z.number(),
  silentReactions: z.int(),
  cost: z.number().nullable(),
  /** Empty without a floor, and in runs that were kept before there were floors. */
  nodes: z
    .array(z.strictObject({ node: z.int(), name: z.string(), radioOnS: z.number(), chargeC: z.number(), batteryDays: z.number().nullable() }))
    .default([]),
}) satisfies z.ZodType<Figures>;

export const runSummarySchema = z.strictObject({
  id: z.uuid(),
  scenarioId: z.uuid(),
  revision: z.int().positive(),
  seed: seedSchema,
  /** Version of the engine that computed it. */
  engine: z.string(),
  ended: z.enum(["complete", "track-end", "diverged"]),
  endedAtS: z.number(),
  durationS: z.number(),
  verdict: verdictSchema,
  delivery: deliverySchema,
  /** SHA-256 over series and rounds; the same on every machine. */
  digest: digestSchema,
  author: personSchema,
  createdAt: z.iso.datetime(),
});
export type RunSummary = z.infer<typeof runSummarySchema>;

export const runDetailSchema = z.strictObject({
  ...runSummarySchema.shape,
  scenarioName: z.string(),
  figures: figuresSchema,
  limits: z.array(limitVerdictSchema),
  events: z.array(eventSchema),
  series: z.strictObject({
    /** Points of the run, and of those kept: every `keptEvery`-th. */
    points: z.int(),
    kept: z.int(),
    keptEvery: z.int().positive(),
    /** As stored. */
    compressedBytes: z.int(),
  }),
});
export type RunDetail = z.infer<typeof runDetailSchema>;

/** Newest first. */
export const runListQuery = z.strictObject({
  revision: z.coerce.number().int().positive().optional(),
  verdict: verdictStateSchema.optional(),
  ...pageQuery,
});
export type RunListQuery = z.infer<typeof runListQuery>;
export const runListResponse = z.strictObject(pageOf(runSummarySchema));
export type RunListResponse = z.infer<typeof runListResponse>;

/** POST .../runs -> 201, or 200 when this revision was run with this seed by this engine before. */
export const createRunRequest = z.strictObject({
  revision: z.int().positive(),
  /** null: the scenario's own. */
  seed: seedSchema.nullable().default(null),
  /** What the page computed, to be compared. */
  digest: digestSchema.nullable().default(null),
});
export type CreateRunRequest = z.input<typeof createRunRequest>;

export const createRunResponse = z.strictObject({
  run: runDetailSchema,
  /** Did the page compute the same, bit for bit? null: it did not say. */
  digestMatches: z.boolean().nullable(),
});
export type CreateRunResponse = z.infer<typeof createRunResponse>;
