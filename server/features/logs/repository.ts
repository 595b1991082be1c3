import { and, asc, countDistinct, eq, type SQL, sql } from "drizzle-orm";
import type { LogItem, LogListQuery, LogListResponse } from "#shared/api/logs.ts";
import { may } from "#shared/api/permissions.ts";
import type { Queries } from "../../db/client.ts";
import { logPieces, logReadings, receptionLogs, revisionLogs, users } from "../../db/schema.ts";
import { searchWords } from "../../db/text.ts";
import type { Member } from "../../http/team-routes.ts";

const used = countDistinct(revisionLogs.scenarioId);
const columns = {
  id: receptionLogs.id,
  name: receptionLogs.name,
  fileName: receptionLogs.fileName,
  author: { id: users.id, name: users.name },
  uploadedAt: receptionLogs.uploadedAt,
  bytes: receptionLogs.bytes,
  sha256: receptionLogs.sha256,
  rows: receptionLogs.rows,
  rowsUsed: receptionLogs.rowsUsed,
  troubles: receptionLogs.troubles,
  links: receptionLogs.links,
  packets: receptionLogs.packets,
  lost: receptionLogs.lost,
  intervalS: receptionLogs.intervalS,
  verdicts: receptionLogs.verdicts,
  scenarios: used,
};

const asItem = ({ uploadedAt, ...row }: Omit<LogItem, "uploadedAt" | "mayEdit"> & { uploadedAt: Date }, { roles }: Member): LogItem => ({
  ...row,
  uploadedAt: uploadedAt.toISOString(),
  mayEdit: may(roles, "edit-logs"),
});

const select = (db: Queries) =>
  db
    .select(columns)
    .from(receptionLogs)
    .innerJoin(users, eq(users.id, receptionLogs.authorId))
    .leftJoin(revisionLogs, eq(revisionLogs.logId, receptionLogs.id))
    .groupBy(receptionLogs.id, users.id)
    .$dynamic();

const byName = sql`${receptionLogs.sortKey} collate "C"`;
const SORTS: Record<LogListQuery["sort"], SQL> = {
  name: byName,
  author: sql`lower(${users.name}) collate "C"`,
  uploaded: sql`${receptionLogs.uploadedAt}`,
  size: sql`${receptionLogs.bytes}`,
  links: sql`${receptionLogs.links}`,
  packets: sql`${receptionLogs.packets}`,
  loss: sql`${receptionLogs.lost}::float8 / nullif(${receptionLogs.packets}, 0)`,
  used: sql`${used}`,
};

export async function listLogs(db: Queries, member: Member, query: LogListQuery): Promise<LogListResponse> {
  const ofTeam = eq(receptionLogs.teamId, member.team.id);
  const matches = and(ofTeam, ...searchWords(query.search).map((word) => sql`strpos(${receptionLogs.searchText}, ${word}) > 0`));
  const by = SORTS[query.sort];
  const rows = await select(db)
    .where(matches)
    // Equal ones by name, then by id: a page never shows a line twice.
    .orderBy(query.direction === "ascending" ? sql`${by} asc nulls last` : sql`${by} desc nulls last`, asc(byName), asc(receptionLogs.id))
    .limit(query.pageSize)
    .offset((query.page - 1) * query.pageSize);
  return {
    items: rows.map((row) => asItem(row, member)),
    total: await db.$count(receptionLogs, matches),
    page: query.page,
    pageSize: query.pageSize,
    totalUnfiltered: await db.$count(receptionLogs, ofTeam),
  };
}

export async function findLog(db: Queries, member: Member, id: string): Promise<LogItem | null> {
  const [row] = await select(db).where(and(eq(receptionLogs.id, id), eq(receptionLogs.teamId, member.team.id)));
  return row ? asItem(row, member) : null;
}

/** Mapping, report and links as JSON: they may be large, and nobody here looks into them. */
export async function findReading(db: Queries, id: string) {
  const [row] = await db
    .select({
      mapping: sql<string>`${receptionLogs.mapping}::text`,
      report: sql<string>`${logReadings.report}::text`,
      linkTraces: sql<string>`${logReadings.linkTraces}::text`,
    })
    .from(receptionLogs)
    .innerJoin(logReadings, eq(logReadings.logId, receptionLogs.id))
    .where(eq(receptionLogs.id, id));
  return row ?? null;
}

export async function findLogId(db: Queries, teamId: string, readingKey: string): Promise<string | null> {
  const [row] = await db
    .select({ id: receptionLogs.id })
    .from(receptionLogs)
    .where(and(eq(receptionLogs.teamId, teamId), eq(receptionLogs.readingKey, readingKey)));
  return row?.id ?? null;
}

interface Reading {
  report: string;
  linkTraces: string;
  pieces: Uint8Array[];
}

/** null when the team has the same file, read in the same way, already. */
export async function insertLog(
  transaction: Queries,
  row: typeof receptionLogs.$inferInsert,
  { report, linkTraces, pieces }: Reading,
): Promise<string | null> {
  const [inserted] = await transaction.insert(receptionLogs).values(row).onConflictDoNothing().returning({ id: receptionLogs.id });
  if (!inserted) return null;
  const logId = inserted.id;
  await transaction.insert(logReadings).values({ logId, report: sql`${report}::json`, linkTraces: sql`${linkTraces}::json` });
  for (const [number, bytes] of pieces.entries()) {
    await transaction.insert(logPieces).values({ logId, number, bytes: Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length) });
  }
  return logId;
}

/** The original, gzip, one piece at a time. */
export async function* piecesOf(db: Queries, logId: string): AsyncGenerator<Buffer> {
  for (let number = 0; ; number++) {
    const [piece] = await db
      .select({ bytes: logPieces.bytes })
      .from(logPieces)
      .where(and(eq(logPieces.logId, logId), eq(logPieces.number, number)));
    if (!piece) return;
    yield piece.bytes;
  }
}

/** Whoever wants to name it waits until the transaction ends. */
export async function lockLog(transaction: Queries, teamId: string, id: string) {
  const [row] = await transaction
    .select({ id: receptionLogs.id, name: receptionLogs.name, fileName: receptionLogs.fileName, author: users.name })
    .from(receptionLogs)
    .innerJoin(users, eq(users.id, receptionLogs.authorId))
    .where(and(eq(receptionLogs.id, id), eq(receptionLogs.teamId, teamId)))
    .for("update", { of: receptionLogs });
  return row ?? null;
}

export async function renameLog(db: Queries, id: string, change: { name: string; sortKey: string; searchText: string }): Promise<void> {
  await db.update(receptionLogs).set(change).where(eq(receptionLogs.id, id));
}

export async function deleteLog(db: Queries, id: string): Promise<void> {
  await db.delete(receptionLogs).where(eq(receptionLogs.id, id));
}
