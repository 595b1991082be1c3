import { setTimeout as wait } from "node:timers/promises";
import type { Logger } from "pino";
import type { ScenarioResponse } from "#shared/api/scenarios.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { Database, Queries } from "../../db/client.ts";
import { HttpError, notFound } from "../../http/errors.ts";
import type { Member } from "../../http/team-routes.ts";
import { findDeletion, record } from "../activity/repository.ts";
import { findRevision, insertRevision } from "../revisions/repository.ts";
import { latestRun } from "../runs/repository.ts";
import type { RunService } from "../runs/service.ts";
import { requireOfTeam } from "../uses/repository.ts";
import { asItem, deleteScenario, findScenario, insertScenario, lockScenario, namesOf, type ScenarioRow, updateScenario } from "./repository.ts";
import { type Summary, summarise } from "./summary.ts";

/** Saving answers after so long even when the first run of the revision is still being computed. */
const WAIT_FOR_RUN_MS = 3_000;

const unrunColumns = ({ unrun }: Summary) => ({
  verdict: unrun.state,
  verdictWord: unrun.word,
  verdictSentence: unrun.sentence,
  latestRunId: null,
  sent: null,
  lost: null,
});

/** Revision 1 of a new scenario. */
export async function insertNewScenario(
  transaction: Queries,
  member: Pick<Member, "user" | "team">,
  scenario: Scenario,
  note: string,
  at = new Date(),
): Promise<ScenarioRow> {
  const { user, team } = member;
  await requireOfTeam(transaction, member, scenario);
  const summary = summarise(scenario);
  const row = await insertScenario(transaction, {
    ...summary.columns,
    ...unrunColumns(summary),
    teamId: team.id,
    ownerId: user.id,
    latestRevision: 1,
    createdAt: at,
    changedAt: at,
  });
  await insertRevision(transaction, { scenarioId: row.id, number: 1, scenario, note, unrun: summary.unrun, authorId: user.id, savedAt: at });
  return row;
}

/** The next revision; the row has to be locked. */
export async function insertNextRevision(
  transaction: Queries,
  member: Pick<Member, "user" | "team">,
  { id, latestRevision }: Pick<ScenarioRow, "id" | "latestRevision">,
  scenario: Scenario,
  note: string,
  at = new Date(),
): Promise<number> {
  await requireOfTeam(transaction, member, scenario);
  const summary = summarise(scenario);
  const number = latestRevision + 1;
  await insertRevision(transaction, { scenarioId: id, number, scenario, note, unrun: summary.unrun, authorId: member.user.id, savedAt: at });
  await updateScenario(transaction, id, { ...summary.columns, ...unrunColumns(summary), latestRevision: number, changedAt: at });
  return number;
}

function copyName(name: string, taken: Set<string>): string {
  const ended = (end: string) => `Copy of ${name}`.slice(0, 120 - end.length).trimEnd() + end;
  let candidate = ended("");
  for (let i = 2; taken.has(candidate); i++) candidate = ended(` (${i})`);
  return candidate;
}

export function createScenarioService(db: Database, runs: RunService, log: Logger) {
  const find = async ({ team }: Member, id: string) => {
    const found = await findScenario(db, team.id, id);
    if (found) return found;
    const deleted = await findDeletion(db, team.id, id);
    if (deleted) throw new HttpError("scenario-deleted", `“${deleted.name}” was deleted by ${deleted.by}.`, { deleted });
    throw notFound();
  };

  const get = async (member: Member, id: string): Promise<ScenarioResponse> => {
    const { row, owner } = await find(member, id);
    const latest = await findRevision(db, id, row.latestRevision);
    if (!latest) throw new Error(`Scenario ${id} has no revision ${row.latestRevision}.`);
    return { ...asItem(row, owner, member), createdAt: row.createdAt.toISOString(), latest, latestRun: await latestRun(db, id, row.latestRevision) };
  };

  /** The revision is safe already: a run that takes long or fails takes nothing away from it. */
  const runAndGet = async (member: Member, id: string, revision: number, scenario: Scenario): Promise<ScenarioResponse> => {
    if (summarise(scenario).runs) {
      const run = runs
        .runNewRevision(member, id, revision, scenario)
        .catch((error) => log.warn({ err: error, id, revision }, "A new revision was not run"));
      const patience = new AbortController();
      await Promise.race([run, wait(WAIT_FOR_RUN_MS, undefined, { signal: patience.signal }).catch(() => undefined)]);
      patience.abort();
    }
    return await get(member, id);
  };

  const requireActive = (row: ScenarioRow) => {
    if (row.archivedAt) throw new HttpError("scenario-archived", "This scenario is archived. Restore it to save a new revision.");
  };

  return {
    find,
    get,

    async create(member: Member, scenario: Scenario, note: string): Promise<ScenarioResponse> {
      const row = await db.transaction(async (transaction) => {
        const created = await insertNewScenario(transaction, member, scenario, note);
        await record(transaction, member, { what: "scenario-created", subject: created, revision: 1 });
        return created;
      });
      return await runAndGet(member, row.id, 1, scenario);
    },

    async duplicate(member: Member, id: string, wanted: { revision: number | null; name: string | null }): Promise<ScenarioResponse> {
      const { row } = await find(member, id);
      const source = await findRevision(db, id, wanted.revision ?? row.latestRevision);
      if (!source) throw notFound();
      const name = wanted.name ?? copyName(source.name, await namesOf(db, member.team.id));
      const scenario = { ...source.scenario, name };
      const copy = await db.transaction(async (transaction) => {
        const created = await insertNewScenario(transaction, member, scenario, `Copied from ${source.name}, revision ${source.number}`);
        await record(transaction, member, { what: "scenario-duplicated", subject: created, revision: 1 });
        return created;
      });
      return await runAndGet(member, copy.id, 1, scenario);
    },

    /** The row's lock decides who comes first; the second is told what is newest now. */
    async saveRevision(member: Member, id: string, baseRevision: number, scenario: Scenario, note: string): Promise<ScenarioResponse> {
      await find(member, id);
      const number = await db.transaction(async (transaction) => {
        const row = await lockScenario(transaction, member.team.id, id);
        requireActive(row);
        if (row.latestRevision !== baseRevision) {
          const newest = await findRevision(transaction, id, row.latestRevision);
          if (!newest) throw new Error(`Scenario ${id} has no revision ${row.latestRevision}.`);
          const latest = { number: newest.number, author: newest.author, savedAt: newest.savedAt, note: newest.note };
          throw new HttpError(
            "revision-conflict",
            `${newest.author.name} saved revision ${newest.number} in the meantime; yours started from revision ${baseRevision}.`,
            { latest },
          );
        }
        const saved = await insertNextRevision(transaction, member, row, scenario, note);
        await record(transaction, member, { what: "revision-saved", subject: { id, name: scenario.name }, revision: saved });
        return saved;
      });
      return await runAndGet(member, id, number, scenario);
    },

    async setArchived(member: Member, id: string, archived: boolean): Promise<ScenarioResponse> {
      await find(member, id);
      await db.transaction(async (transaction) => {
        const row = await lockScenario(transaction, member.team.id, id);
        if ((row.archivedAt !== null) === archived) return;
        await updateScenario(transaction, id, { archivedAt: archived ? new Date() : null });
        await record(transaction, member, { what: archived ? "scenario-archived" : "scenario-restored", subject: row });
      });
      return await get(member, id);
    },

    async remove(member: Member, id: string): Promise<void> {
      await find(member, id);
      await db.transaction(async (transaction) => {
        const row = await lockScenario(transaction, member.team.id, id);
        if (!row.archivedAt) throw new HttpError("scenario-not-archived", "Only an archived scenario can be deleted. Archive it first.");
        await deleteScenario(transaction, id);
        await record(transaction, member, { what: "scenario-deleted", subject: row });
      });
    },
  };
}
export type ScenarioService = ReturnType<typeof createScenarioService>;
