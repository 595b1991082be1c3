/** /api/teams/:teamId/members and /api/teams/:teamId/activity. */
import { z } from "zod";
import { pageOf, pageQuery, personSchema } from "./common.ts";
import { roleSchema } from "./permissions.ts";

const memberSchema = z.strictObject({ ...personSchema.shape, roles: z.array(roleSchema).min(1) });
export const memberListResponse = z.strictObject({ members: z.array(memberSchema) });
export type MemberListResponse = z.infer<typeof memberListResponse>;

const ACTIVITIES = [
  "signed-in",
  "scenario-created",
  "scenario-duplicated",
  "scenario-archived",
  "scenario-restored",
  "scenario-deleted",
  "revision-saved",
  "run-kept",
  "log-uploaded",
  "log-renamed",
  "log-deleted",
  "log-deletion-refused",
  "picture-uploaded",
  "picture-deleted",
  "picture-deletion-refused",
] as const;
export type ActivityKind = (typeof ACTIVITIES)[number];

const activityItemSchema = z.strictObject({
  id: z.uuid(),
  at: z.iso.datetime(),
  who: personSchema,
  what: z.enum(ACTIVITIES),
  /** What it was done to; the name is kept as it was then. */
  subject: z.strictObject({ id: z.uuid(), name: z.string() }).nullable(),
  revision: z.int().nullable(),
});

/** Newest first. */
export const activityListQuery = z.strictObject({ what: z.enum(ACTIVITIES).optional(), who: z.uuid().optional(), ...pageQuery });
export const activityListResponse = z.strictObject(pageOf(activityItemSchema));
