import { and, asc, count, eq, gte, isNotNull, isNull, type SQL, sql } from "drizzle-orm";
import type { Delivery, VerdictLine } from "#shared/api/common.ts";
import { VERDICTS } from "#shared/api/common.ts";
import { may } from "#shared/api/permissions.ts";
import { PLANT_KINDS, type ScenarioItem, type ScenarioListQuery, type ScenarioListResponse } from "#shared/api/scenarios.ts";
import type { Queries } from "../../db/client.ts";
import { scenarios, users } from "../../db/schema.ts";
import { searchWords } from "../../db/text.ts";
import { notFound } from "../../http/errors.ts";
import type { Member } from "../../http/team-routes.ts";

export type ScenarioRow = typeof scenarios.$inferSelect;

export const deliveryOf = (sent: number, lost: number): Delivery => ({ sent, lost, ratio: sent > 0 ? 1 - lost / sent : null });

export const verdictOf = (row: { verdict: VerdictLine["state"]; verdictWord: string; verdictSentence: string }): VerdictLine => ({
  state: row.verdict,
  word: row.verdictWord,
  sentence: row.verdictSentence,
});

export function asItem(row: ScenarioRow, owner: { id: string; name: string }, member: Member): ScenarioItem {
  return {
    id: row.id,
    name: row.name,
    plant: {
      kind: row.plantKind,
      type: row.plantKind === "state-space" ? "state-space" : "pendulum-on-cart",
      rest: row.plantKind === "state-space" ? null : row.plantKind === "overhead-crane" ? "hanging" : "upright",
    },
    revision: row.latestRevision,
    round: row.round,
    delivery: row.sent === null || row.lost === null ? null : deliveryOf(row.sent, row.lost),
    verdict: verdictOf(row),
    owner,
    changedAt: row.changedAt.toISOString(),
    archivedAt: row.archivedAt?.toISOString() ?? null,
    mayEdit: may(member.roles, "edit-scenarios"),
  };
}

const DAYS = { any: null, day: 1, week: 7, month: 30 } as const;

function archivedIs(archived: ScenarioListQuery["archived"]): SQL | undefined {
  return archived === "all" ? undefined : archived === "only" ? isNotNull(scenarios.archivedAt) : isNull(scenarios.archivedAt);
}

const asBytes = (column: SQL | typeof scenarios.sortKey) => sql`${column} collate "C"`;
const SORTS: Record<ScenarioListQuery["sort"], SQL> = {
  name: asBytes(scenarios.sortKey),
  plant: asBytes(sql`${scenarios.plantKind}`),
  period: sql`${scenarios.periodS}`,
  delivery: sql`1 - ${scenarios.lost}::float8 / nullif(${scenarios.sent}, 0)`,
  verdict: sql`array_position(array[${sql.join(
    VERDICTS.map((verdict) => sql`${verdict}`),
    sql`, `,
  )}]::text[], ${scenarios.verdict})`,
  owner: asBytes(sql`lower(${users.name})`),
  changed: sql`${scenarios.changedAt}`,
};

function order({ sort, direction }: ScenarioListQuery): SQL[] {
  const by = direction === "ascending" ? sql`${SORTS[sort]} asc nulls last` : sql`${SORTS[sort]} desc nulls last`;
  // Equal ones by name, then by id: a page never shows a line twice.
  return [by, asc(asBytes(scenarios.sortKey)), asc(scenarios.id)];
}

export async function listScenarios(db: Queries, member: Member, query: ScenarioListQuery): Promise<ScenarioListResponse> {
  const ofTeam = eq(scenarios.teamId, member.team.id);
  const shown = and(ofTeam, archivedIs(query.archived));
  const days = DAYS[query.changed];
  const matches = and(
    shown,
    ...searchWords(query.search).map((word) => sql`strpos(${scenarios.searchText}, ${word}) > 0`),
    query.plant ? eq(scenarios.plantKind, query.plant) : undefined,
    query.verdict ? eq(scenarios.verdict, query.verdict) : undefined,
    query.owner ? eq(scenarios.ownerId, query.owner) : undefined,
    days === null ? undefined : gte(scenarios.changedAt, sql`now() - make_interval(days => ${days})`),
  );
  const rows = await db
    .select({ row: scenarios, owner: { id: users.id, name: users.name } })
    .from(scenarios)
    .innerJoin(users, eq(users.id, scenarios.ownerId))
    .where(matches)
    .orderBy(...order(query))
    .limit(query.pageSize)
    .offset((query.page - 1) * query.pageSize);
  const total = await db.$count(scenarios, matches);
  const totalUnfiltered = await db.$count(scenarios, shown);
  const archivedTotal = await db.$count(scenarios, and(ofTeam, isNotNull(scenarios.archivedAt)));
  const owners = await db
    .select({ id: users.id, name: users.name, owned: count() })
    .from(scenarios)
    .innerJoin(users, eq(users.id, scenarios.ownerId))
    .where(ofTeam)
    .groupBy(users.id)
    .orderBy(asc(users.name), asc(users.id));
  const kinds = await db.select({ kind: scenarios.plantKind }).from(scenarios).where(ofTeam).groupBy(scenarios.plantKind);
  return {
    items: rows.map(({ row, owner }) => asItem(row, owner, member)),
    total,
    page: query.page,
    pageSize: query.pageSize,
    totalUnfiltered,
    archivedTotal,
    owners: owners.map(({ id, name }) => ({ id, name })),
    plants: PLANT_KINDS.filter((kind) => kinds.some((row) => row.kind === kind)),
  };
}

export async function findScenario(db: Queries, teamId: string, id: string) {
  const [found] = await db
    .select({ row: scenarios, owner: { id: users.id, name: users.name } })
    .from(scenarios)
    .innerJoin(users, eq(users.id, scenarios.ownerId))
    .where(and(eq(scenarios.id, id), eq(scenarios.teamId, teamId)));
  return found ?? null;
}

/** Nobody else changes the scenario until the transaction ends. */
export async function lockScenario(transaction: Queries, teamId: string, id: string): Promise<ScenarioRow> {
  const [row] = await transaction
    .select()
    .from(scenarios)
    .where(and(eq(scenarios.id, id), eq(scenarios.teamId, teamId)))
    .for("update");
  if (!row) throw notFound();
  return row;
}

export async function namesOf(db: Queries, teamId: string): Promise<Set<string>> {
  const rows = await db.select({ name: scenarios.name }).from(scenarios).where(eq(scenarios.teamId, teamId));
  return new Set(rows.map(({ name }) => name));
}

export async function insertScenario(db: Queries, row: typeof scenarios.$inferInsert): Promise<ScenarioRow> {
  const [inserted] = await db.insert(scenarios).values(row).returning();
  return inserted;
}

export async function updateScenario(db: Queries, id: string, change: Partial<typeof scenarios.$inferInsert>): Promise<void> {
  await db.update(scenarios).set(change).where(eq(scenarios.id, id));
}

export async function deleteScenario(db: Queries, id: string): Promise<void> {
  await db.delete(scenarios).where(eq(scenarios.id, id));
}
