import { and, count, desc, eq, inArray } from "drizzle-orm";
import type { VerdictLine } from "#shared/api/common.ts";
import type { RevisionDetail, RevisionSummary } from "#shared/api/revisions.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { Queries } from "../../db/client.ts";
import { revisions, runs, users } from "../../db/schema.ts";
import { verdictOf } from "../scenarios/repository.ts";

interface NewRevision {
  scenarioId: string;
  number: number;
  scenario: Scenario;
  note: string;
  unrun: VerdictLine;
  authorId: string;
  savedAt: Date;
}

export async function insertRevision(db: Queries, revision: NewRevision): Promise<void> {
  await db.insert(revisions).values({ ...revision, name: revision.scenario.name });
}

/** Verdict of the latest run of each revision. */
async function latestVerdicts(db: Queries, scenarioId: string, numbers: number[]): Promise<Map<number, VerdictLine>> {
  if (numbers.length === 0) return new Map();
  const rows = await db
    .selectDistinctOn([runs.revision], {
      revision: runs.revision,
      verdict: runs.verdict,
      verdictWord: runs.verdictWord,
      verdictSentence: runs.verdictSentence,
    })
    .from(runs)
    .where(and(eq(runs.scenarioId, scenarioId), inArray(runs.revision, numbers)))
    .orderBy(runs.revision, desc(runs.createdAt), desc(runs.position));
  return new Map(rows.map((row) => [row.revision, verdictOf(row)]));
}

const summaryColumns = {
  number: revisions.number,
  name: revisions.name,
  note: revisions.note,
  unrun: revisions.unrun,
  savedAt: revisions.savedAt,
  author: { id: users.id, name: users.name },
};

interface SummaryRow {
  number: number;
  name: string;
  note: string;
  unrun: VerdictLine;
  savedAt: Date;
  author: { id: string; name: string };
}

const asSummary = ({ number, name, note, unrun, savedAt, author }: SummaryRow, verdicts: Map<number, VerdictLine>): RevisionSummary => ({
  number,
  name,
  note,
  author,
  savedAt: savedAt.toISOString(),
  verdict: verdicts.get(number) ?? unrun,
});

export async function listRevisions(db: Queries, scenarioId: string, { page, pageSize }: { page: number; pageSize: number }) {
  const matches = eq(revisions.scenarioId, scenarioId);
  const [{ total }] = await db.select({ total: count() }).from(revisions).where(matches);
  const rows = await db
    .select(summaryColumns)
    .from(revisions)
    .innerJoin(users, eq(users.id, revisions.authorId))
    .where(matches)
    .orderBy(desc(revisions.number))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  const verdicts = await latestVerdicts(
    db,
    scenarioId,
    rows.map((row) => row.number),
  );
  return { items: rows.map((row) => asSummary(row, verdicts)), total, page, pageSize };
}

/** A revision stays as it was written; what later versions can say is filled in, as in an older file. */
export function asOfToday(stored: Scenario): Scenario {
  const parsed = parseScenario(stored);
  return parsed.ok ? parsed.value : stored;
}

export async function findRevision(db: Queries, scenarioId: string, number: number): Promise<RevisionDetail | null> {
  const [row] = await db
    .select({ ...summaryColumns, scenario: revisions.scenario })
    .from(revisions)
    .innerJoin(users, eq(users.id, revisions.authorId))
    .where(and(eq(revisions.scenarioId, scenarioId), eq(revisions.number, number)));
  if (!row) return null;
  return { ...asSummary(row, await latestVerdicts(db, scenarioId, [number])), scenario: asOfToday(row.scenario) };
}
