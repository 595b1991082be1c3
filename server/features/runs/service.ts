import type { CreateRunResponse, RunDetail } from "#shared/api/runs.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import type { Database, Queries } from "../../db/client.ts";
import { HttpError, notFound } from "../../http/errors.ts";
import type { Member } from "../../http/team-routes.ts";
import { record } from "../activity/repository.ts";
import { findRevision } from "../revisions/repository.ts";
import { lockScenario, type ScenarioRow, updateScenario } from "../scenarios/repository.ts";
import type { RunRecord } from "./record.ts";
import { findRun, findRunId, insertRun, type RunKey } from "./repository.ts";
import type { Simulator } from "./simulator.ts";

/** Stores a run and, when it is of the latest revision, shows it in the table. */
export async function storeRun(transaction: Queries, member: Pick<Member, "user" | "team">, key: RunKey, { row, bytes }: RunRecord, at = new Date()) {
  const scenario = await lockScenario(transaction, member.team.id, key.scenarioId);
  const id = await insertRun(transaction, { ...key, ...row, authorId: member.user.id, createdAt: at }, bytes);
  if (id === null) return null;
  if (scenario.latestRevision === key.revision) {
    const { verdict, verdictWord, verdictSentence: text, sent, lost } = row;
    await updateScenario(transaction, scenario.id, { latestRunId: id, verdict, verdictWord, verdictSentence: text, sent, lost });
  }
  return { id, scenario };
}

export function createRunService(db: Database, simulator: Simulator) {
  /** The same run asked for twice at once is computed once. */
  const underWay = new Map<string, Promise<string>>();

  const make = async (member: Member, key: RunKey, scenario: Scenario, onRequest: boolean): Promise<string> => {
    const outcome = await simulator.simulate(scenario, key.seed);
    if (!outcome.ok) {
      const [first] = outcome.issues;
      throw new HttpError("scenario-invalid", `Revision ${key.revision} cannot be run: ${first.message}`, { issues: outcome.issues });
    }
    return await db.transaction(async (transaction) => {
      const stored = await storeRun(transaction, member, key, outcome.record);
      if (stored) {
        if (onRequest) await record(transaction, member, { what: "run-kept", subject: stored.scenario, revision: key.revision });
        return stored.id;
      }
      return (await findRunId(transaction, key)) as string;
    });
  };

  const runOf = async (member: Member, key: RunKey, scenario: Scenario, onRequest: boolean): Promise<string> => {
    const name = `${key.scenarioId} ${key.revision} ${key.seed}`;
    const existing = underWay.get(name);
    if (existing) return await existing;
    const promise = make(member, key, scenario, onRequest).finally(() => underWay.delete(name));
    underWay.set(name, promise);
    return await promise;
  };

  return {
    async detail(teamId: string, id: string): Promise<RunDetail> {
      const run = await findRun(db, teamId, id);
      if (!run) throw notFound();
      return run;
    },

    /** With the scenario's own seed, right after saving. */
    async runNewRevision(member: Member, scenarioId: string, revision: number, scenario: Scenario): Promise<void> {
      await runOf(member, { scenarioId, revision, seed: scenario.run.seed, engine: ENGINE_VERSION }, scenario, false);
    },

    async keep(
      member: Member,
      { id: scenarioId, archivedAt }: ScenarioRow,
      wanted: { revision: number; seed: number | null; digest: string | null },
    ): Promise<CreateRunResponse & { created: boolean }> {
      const revision = await findRevision(db, scenarioId, wanted.revision);
      if (!revision) throw notFound();
      const key = { scenarioId, revision: wanted.revision, seed: wanted.seed ?? revision.scenario.run.seed, engine: ENGINE_VERSION };
      const existing = await findRunId(db, key);
      if (existing === null && archivedAt) throw new HttpError("scenario-archived", "This scenario is archived. Restore it to keep new runs.");
      const run = await this.detail(member.team.id, existing ?? (await runOf(member, key, revision.scenario, true)));
      return { run, digestMatches: wanted.digest === null ? null : wanted.digest === run.digest, created: existing === null };
    },
  };
}
export type RunService = ReturnType<typeof createRunService>;
