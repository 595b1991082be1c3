import { and, desc, eq, type SQL } from "drizzle-orm";
import type { RunDetail, RunListQuery, RunListResponse, RunSummary } from "#shared/api/runs.ts";
import type { Queries } from "../../db/client.ts";
import { revisions, runSeries, runs, scenarios, users } from "../../db/schema.ts";
import { deliveryOf, verdictOf } from "../scenarios/repository.ts";

const summaryColumns = {
  id: runs.id,
  scenarioId: runs.scenarioId,
  revision: runs.revision,
  seed: runs.seed,
  engine: runs.engine,
  ended: runs.ended,
  endedAtS: runs.endedAtS,
  durationS: runs.durationS,
  verdict: runs.verdict,
  verdictWord: runs.verdictWord,
  verdictSentence: runs.verdictSentence,
  sent: runs.sent,
  lost: runs.lost,
  digest: runs.digest,
  createdAt: runs.createdAt,
  author: { id: users.id, name: users.name },
};
type SummaryRow = Omit<
  typeof runs.$inferSelect,
  "figures" | "limits" | "events" | "points" | "keptPoints" | "keptEvery" | "compressedBytes" | "authorId" | "position"
> & {
  author: { id: string; name: string };
};

const asSummary = ({ verdict, verdictWord, verdictSentence, sent, lost, createdAt, ...row }: SummaryRow): RunSummary => ({
  ...row,
  verdict: verdictOf({ verdict, verdictWord, verdictSentence }),
  delivery: deliveryOf(sent, lost),
  createdAt: createdAt.toISOString(),
});

/** The newest that matches. */
async function newestSummary(db: Queries, matches: SQL | undefined): Promise<RunSummary | null> {
  const [row] = await db
    .select(summaryColumns)
    .from(runs)
    .innerJoin(users, eq(users.id, runs.authorId))
    .where(matches)
    .orderBy(desc(runs.createdAt), desc(runs.position))
    .limit(1);
  return row ? asSummary(row) : null;
}

export const latestRun = (db: Queries, scenarioId: string, revision: number) =>
  newestSummary(db, and(eq(runs.scenarioId, scenarioId), eq(runs.revision, revision)));

export interface RunKey {
  scenarioId: string;
  revision: number;
  seed: number;
  engine: string;
}

export async function findRunId(db: Queries, { scenarioId, revision, seed, engine }: RunKey): Promise<string | null> {
  const [row] = await db
    .select({ id: runs.id })
    .from(runs)
    .where(and(eq(runs.scenarioId, scenarioId), eq(runs.revision, revision), eq(runs.seed, seed), eq(runs.engine, engine)));
  return row?.id ?? null;
}

export async function listRuns(db: Queries, scenarioId: string, query: RunListQuery): Promise<RunListResponse> {
  const matches = and(
    eq(runs.scenarioId, scenarioId),
    query.revision === undefined ? undefined : eq(runs.revision, query.revision),
    query.verdict === undefined ? undefined : eq(runs.verdict, query.verdict),
  );
  const rows = await db
    .select(summaryColumns)
    .from(runs)
    .innerJoin(users, eq(users.id, runs.authorId))
    .where(matches)
    .orderBy(desc(runs.createdAt), desc(runs.position))
    .limit(query.pageSize)
    .offset((query.page - 1) * query.pageSize);
  return { items: rows.map(asSummary), total: await db.$count(runs, matches), page: query.page, pageSize: query.pageSize };
}

export async function findRun(db: Queries, teamId: string, id: string): Promise<RunDetail | null> {
  const [row] = await db
    .select({
      ...summaryColumns,
      scenarioName: revisions.name,
      figures: runs.figures,
      limits: runs.limits,
      events: runs.events,
      points: runs.points,
      kept: runs.keptPoints,
      keptEvery: runs.keptEvery,
      compressedBytes: runs.compressedBytes,
    })
    .from(runs)
    .innerJoin(scenarios, and(eq(scenarios.id, runs.scenarioId), eq(scenarios.teamId, teamId)))
    .innerJoin(revisions, and(eq(revisions.scenarioId, runs.scenarioId), eq(revisions.number, runs.revision)))
    .innerJoin(users, eq(users.id, runs.authorId))
    .where(eq(runs.id, id));
  if (!row) return null;
  const { scenarioName, figures, limits, events, points, kept, keptEvery, compressedBytes, ...summary } = row;
  return { ...asSummary(summary), scenarioName, figures, limits, events, series: { points, kept, keptEvery, compressedBytes } };
}

/** Compressed, as stored. */
export async function findSeries(db: Queries, teamId: string, id: string): Promise<Buffer | null> {
  const [row] = await db
    .select({ bytes: runSeries.bytes })
    .from(runSeries)
    .innerJoin(runs, eq(runs.id, runSeries.runId))
    .innerJoin(scenarios, and(eq(scenarios.id, runs.scenarioId), eq(scenarios.teamId, teamId)))
    .where(eq(runs.id, id));
  return row?.bytes ?? null;
}

/** null when the same run is there already. */
export async function insertRun(db: Queries, row: typeof runs.$inferInsert, bytes: Uint8Array): Promise<string | null> {
  const [inserted] = await db.insert(runs).values(row).onConflictDoNothing().returning({ id: runs.id });
  if (!inserted) return null;
  await db.insert(runSeries).values({ runId: inserted.id, bytes: Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length) });
  return inserted.id;
}
