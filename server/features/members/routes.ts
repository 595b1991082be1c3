import { asc, eq } from "drizzle-orm";
import { ROLES } from "#shared/api/permissions.ts";
import type { MemberListResponse } from "#shared/api/teams.ts";
import type { Database } from "../../db/client.ts";
import { memberships, users } from "../../db/schema.ts";
import type { TeamRoute } from "../../http/team-routes.ts";

async function listMembers(db: Database, teamId: string): Promise<MemberListResponse> {
  const members = await db
    .select({ id: users.id, name: users.name, roles: memberships.roles })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.teamId, teamId))
    .orderBy(asc(users.name), asc(users.id));
  return { members: members.map((member) => ({ ...member, roles: ROLES.filter((role) => member.roles.includes(role)) })) };
}

export const memberRoutes = (db: Database): TeamRoute[] => [
  { method: "get", path: "/members", action: "read-members", handle: async ({ member }) => ({ body: await listMembers(db, member.team.id) }) },
];
