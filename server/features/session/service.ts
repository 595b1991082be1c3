import { randomBytes } from "node:crypto";
import bcrypt from "bcryptjs";
import { asc, eq, inArray, sql } from "drizzle-orm";
import { ROLES, type Role } from "#shared/api/permissions.ts";
import type { DemoResponse, Membership } from "#shared/api/session.ts";
import type { Database } from "../../db/client.ts";
import { activity, memberships, teams, users } from "../../db/schema.ts";

const ROUNDS = 10;
export const hashPassword = (password: string): Promise<string> => bcrypt.hash(password, ROUNDS);

const inOrder = (roles: Role[]): Role[] => ROLES.filter((role) => roles.includes(role));

export function createSessionService(db: Database) {
  // An unknown mail costs the same hashing as a wrong password, so that time tells nothing either.
  const hashOfNobody = hashPassword(randomBytes(18).toString("base64"));

  const membershipsOf = async (userId: string): Promise<Membership[]> => {
    const rows = await db
      .select({ team: { id: teams.id, name: teams.name }, roles: memberships.roles })
      .from(memberships)
      .innerJoin(teams, eq(teams.id, memberships.teamId))
      .where(eq(memberships.userId, userId))
      .orderBy(asc(teams.createdAt), asc(teams.id));
    return rows.map(({ team, roles }) => ({ team, roles: inOrder(roles) }));
  };

  return {
    async findUser(userId: string) {
      const [user] = await db.select({ id: users.id, name: users.name, email: users.email }).from(users).where(eq(users.id, userId));
      return user ? { user, memberships: await membershipsOf(userId) } : null;
    },

    /** The user's id, or null for an unknown mail and a wrong password alike. */
    async checkPassword(email: string, password: string): Promise<string | null> {
      const [user] = await db
        .select({ id: users.id, hash: users.passwordHash })
        .from(users)
        .where(eq(sql`lower(${users.email})`, email.toLowerCase()));
      const matches = await bcrypt.compare(password, user?.hash ?? (await hashOfNobody));
      return user && matches ? user.id : null;
    },

    async recordSignIn(userId: string): Promise<void> {
      const of = await membershipsOf(userId);
      if (of.length > 0) await db.insert(activity).values(of.map(({ team }) => ({ teamId: team.id, userId, what: "signed-in" as const })));
    },

    async peopleWith(emails: string[]): Promise<DemoResponse["people"]> {
      const rows = await db
        .select({ name: users.name, email: users.email, team: teams.name, roles: memberships.roles })
        .from(users)
        .innerJoin(memberships, eq(memberships.userId, users.id))
        .innerJoin(teams, eq(teams.id, memberships.teamId))
        .where(inArray(users.email, emails))
        .orderBy(asc(teams.createdAt), asc(teams.id));
      return emails.flatMap((email) => {
        const own = rows.filter((row) => row.email === email);
        return own[0] ? [{ name: own[0].name, email, memberships: own.map(({ team, roles }) => ({ team, roles: inOrder(roles) })) }] : [];
      });
    },
  };
}
export type SessionService = ReturnType<typeof createSessionService>;
