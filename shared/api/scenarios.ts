/** /api/teams/:teamId/scenarios: the table, one scenario, its archive and copy. */
import { z } from "zod";
import type { LoopTiming, RoundTiming, Slot } from "#shared/network/round.ts";
import type { PlantSpec } from "#shared/plants/schema.ts";
import { scenarioSchema } from "#shared/scenario/schema.ts";
import { deliverySchema, noteSchema, pageOf, pageQuery, personSchema, verdictSchema, verdictStateSchema } from "./common.ts";
import { revisionDetailSchema } from "./revisions.ts";
import { runSummarySchema } from "./runs.ts";

/** What a table calls a plant: a pendulum that hangs is a crane. */
export const PLANT_KINDS = ["pendulum-on-cart", "overhead-crane", "state-space"] as const;
export type PlantKind = (typeof PLANT_KINDS)[number];
export const PLANT_LABELS: Record<PlantKind, string> = {
  "pendulum-on-cart": "Pendulum on cart",
  "overhead-crane": "Overhead crane",
  "state-space": "State-space model",
};
export const plantKind = (plant: PlantSpec): PlantKind =>
  plant.type === "state-space" ? "state-space" : plant.rest === "upright" ? "pendulum-on-cart" : "overhead-crane";

const plantSummarySchema = z.strictObject({
  kind: z.enum(PLANT_KINDS),
  type: z.enum(["pendulum-on-cart", "state-space"]),
  rest: z.enum(["upright", "hanging"]).nullable(),
});

const slotSchema = z.strictObject({
  id: z.string(),
  message: z.enum(["beacon", "measurement", "command", "other"]),
  loop: z.string().nullable(),
  label: z.string(),
  copy: z.int(),
  everyRounds: z.int(),
  firstRound: z.int(),
  from: z.int().nullable(),
  to: z.array(z.int()).nullable(),
  payloadBytes: z.number(),
  airtimeS: z.number(),
  stepS: z.number(),
  steps: z.number(),
  startS: z.number(),
  floodStartS: z.number(),
  floodEndS: z.number(),
  endS: z.number(),
}) satisfies z.ZodType<Slot>;

const loopTimingSchema = z.strictObject({
  loop: z.string(),
  name: z.string(),
  everyRounds: z.int(),
  firstRound: z.int(),
  periodS: z.number(),
  sampleAtS: z.number(),
  computeFromS: z.number(),
  computeUntilS: z.number(),
  commandDelay: z.union([z.literal(0), z.literal(1)]),
  actAtS: z.number(),
  earliestActS: z.number(),
  latestActS: z.number(),
  latencyS: z.number(),
}) satisfies z.ZodType<LoopTiming>;

/**
 * What the small round ribbon needs of RoundTiming, under the same names. It is kept with each scenario: whoever changes
 * it, or what goes into it, raises SUMMARY_VERSION in server/features/scenarios/summary.ts, and kept ones are made anew.
 */
export const roundSummarySchema = z.strictObject({
  periodS: z.number(),
  hops: z.number(),
  slots: z.array(slotSchema),
  loops: z.array(loopTimingSchema),
  guardS: z.number(),
  reserveS: z.number(),
  fits: z.boolean(),
  shortestPeriodS: z.number(),
}) satisfies z.ZodType<Omit<RoundTiming, "ns" | "savings" | "issues">>;
export type RoundSummary = z.infer<typeof roundSummarySchema>;

const scenarioItemSchema = z.strictObject({
  id: z.uuid(),
  name: z.string(),
  plant: plantSummarySchema,
  /** Number of the latest revision; the columns below are about it. */
  revision: z.int().positive(),
  round: roundSummarySchema,
  /** Of the latest run of the latest revision; null when there is none. */
  delivery: deliverySchema.nullable(),
  verdict: verdictSchema,
  owner: personSchema,
  changedAt: z.iso.datetime(),
  archivedAt: z.iso.datetime().nullable(),
  mayEdit: z.boolean(),
});
export type ScenarioItem = z.infer<typeof scenarioItemSchema>;

export const SCENARIO_SORTS = ["name", "plant", "period", "delivery", "verdict", "owner", "changed"] as const;
export const CHANGED_WITHIN = ["any", "day", "week", "month"] as const;
export const ARCHIVED = ["hidden", "only", "all"] as const;
export const scenarioListQuery = z.strictObject({
  search: z.string().trim().max(200).default(""),
  plant: z.enum(PLANT_KINDS).optional(),
  verdict: verdictStateSchema.optional(),
  /** Id of the owner. */
  owner: z.uuid().optional(),
  /** Changed within the last 24 hours, 7 days, 30 days. */
  changed: z.enum(CHANGED_WITHIN).default("any"),
  archived: z.enum(ARCHIVED).default("hidden"),
  sort: z.enum(SCENARIO_SORTS).default("changed"),
  direction: z.enum(["ascending", "descending"]).default("descending"),
  ...pageQuery,
});
export type ScenarioListQuery = z.infer<typeof scenarioListQuery>;

export const scenarioListResponse = z.strictObject({
  ...pageOf(scenarioItemSchema),
  /** Under the same `archived` choice, without any other filter: "0 of 11 scenarios". */
  totalUnfiltered: z.int().nonnegative(),
  archivedTotal: z.int().nonnegative(),
  /** What the filters can offer, from all scenarios of the team. */
  owners: z.array(personSchema),
  plants: z.array(z.enum(PLANT_KINDS)),
});
export type ScenarioListResponse = z.infer<typeof scenarioListResponse>;

/** POST .../scenarios -> 201 scenarioResponse. A scenario that breaks the schema: 422 "scenario-invalid" with issues. */
const createScenarioRequest = z.strictObject({ scenario: scenarioSchema, note: noteSchema });
export type CreateScenarioRequest = z.input<typeof createScenarioRequest>;

/** PATCH .../scenarios/:id. The name is part of the scenario and changes with a revision. */
export const changeScenarioRequest = z.strictObject({ archived: z.boolean() });

/** DELETE .../scenarios/:id, of an archived one: with all its revisions and runs. */
export const deleteScenarioResponse = z.strictObject({ deleted: z.literal(true) });
export type DeleteScenarioResponse = z.infer<typeof deleteScenarioResponse>;

/** POST .../scenarios/:id/duplicate -> 201 scenarioResponse: revision 1 of a new scenario. null: the latest revision, "Copy of ...". */
export const duplicateScenarioRequest = z.strictObject({
  revision: z.int().positive().nullable().default(null),
  name: z.string().trim().min(1).max(120).nullable().default(null),
});
export type DuplicateScenarioRequest = z.input<typeof duplicateScenarioRequest>;

export const scenarioResponse = z.strictObject({
  ...scenarioItemSchema.shape,
  createdAt: z.iso.datetime(),
  latest: revisionDetailSchema,
  /** Latest run of the latest revision. */
  latestRun: runSummarySchema.nullable(),
});
export type ScenarioResponse = z.infer<typeof scenarioResponse>;
