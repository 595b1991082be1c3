import { and, count, desc, eq } from "drizzle-orm";
import type { z } from "zod";
import type { ActivityKind, activityListQuery } from "#shared/api/teams.ts";
import type { Queries } from "../../db/client.ts";
import { activity, users } from "../../db/schema.ts";
import type { Member } from "../../http/team-routes.ts";

interface Deed {
  what: ActivityKind;
  subject: { id: string; name: string };
  revision?: number;
  at?: Date;
}

/** Belongs into the transaction that does it. */
export async function record(db: Queries, { user, team }: Pick<Member, "user" | "team">, { what, subject, revision, at }: Deed): Promise<void> {
  await db
    .insert(activity)
    .values({ teamId: team.id, userId: user.id, what, subjectId: subject.id, subjectName: subject.name, revision: revision ?? null, at });
}

export async function listActivity(db: Queries, teamId: string, query: z.infer<typeof activityListQuery>) {
  const matches = and(
    eq(activity.teamId, teamId),
    query.what ? eq(activity.what, query.what) : undefined,
    query.who ? eq(activity.userId, query.who) : undefined,
  );
  const [{ total }] = await db.select({ total: count() }).from(activity).where(matches);
  const rows = await db
    .select({ entry: activity, who: { id: users.id, name: users.name } })
    .from(activity)
    .innerJoin(users, eq(users.id, activity.userId))
    .where(matches)
    .orderBy(desc(activity.at), desc(activity.position))
    .limit(query.pageSize)
    .offset((query.page - 1) * query.pageSize);
  const items = rows.map(({ entry, who }) => ({
    id: entry.id,
    at: entry.at.toISOString(),
    who,
    what: entry.what,
    subject: entry.subjectId && entry.subjectName !== null ? { id: entry.subjectId, name: entry.subjectName } : null,
    revision: entry.revision,
  }));
  return { items, total, page: query.page, pageSize: query.pageSize };
}

/** Who deleted it, for somebody of the team who follows an old link. */
export async function findDeletion(db: Queries, teamId: string, subjectId: string) {
  const [row] = await db
    .select({ name: activity.subjectName, by: users.name, at: activity.at })
    .from(activity)
    .innerJoin(users, eq(users.id, activity.userId))
    .where(and(eq(activity.teamId, teamId), eq(activity.subjectId, subjectId), eq(activity.what, "scenario-deleted")))
    .limit(1);
  return row ? { name: row.name ?? "", by: row.by, at: row.at.toISOString() } : null;
}
