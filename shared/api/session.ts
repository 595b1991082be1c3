/** GET, POST, DELETE /api/session; GET /api/demo; GET /api/health. */
import { z } from "zod";
import { roleSchema } from "./permissions.ts";

export const signInRequest = z.strictObject({
  email: z.string().trim().min(1).max(254),
  password: z.string().min(1).max(200),
});
export type SignInRequest = z.infer<typeof signInRequest>;

const membershipSchema = z.strictObject({
  team: z.strictObject({ id: z.uuid(), name: z.string() }),
  roles: z.array(roleSchema).min(1),
});
export type Membership = z.infer<typeof membershipSchema>;

/** Who I am. A visitor who is not signed in gets `user: null` with status 200. */
export const sessionResponse = z.strictObject({
  user: z.strictObject({ id: z.uuid(), name: z.string(), email: z.string() }).nullable(),
  memberships: z.array(membershipSchema),
  /** The session ends then unless a request comes before; every request moves it on. */
  expiresAt: z.iso.datetime().nullable(),
});
export type SessionResponse = z.infer<typeof sessionResponse>;

/** The demo sign-ins, for the sign-in page; empty where the demo team is switched off. */
export const demoResponse = z.strictObject({
  password: z.string().nullable(),
  people: z.array(
    z.strictObject({ name: z.string(), email: z.string(), memberships: z.array(z.strictObject({ team: z.string(), roles: z.array(roleSchema) })) }),
  ),
});
export type DemoResponse = z.infer<typeof demoResponse>;

export const healthResponse = z.strictObject({ ok: z.boolean(), database: z.boolean() });
export type HealthResponse = z.infer<typeof healthResponse>;
