/** Which saved revisions name which reception logs and pictures. The rows are written by a trigger of the database. */
import { and, asc, eq, sql } from "drizzle-orm";
import type { Use } from "#shared/api/common.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { Queries } from "../../db/client.ts";
import { floorPictures, receptionLogs, revisionLogs, revisionPictures, scenarios } from "../../db/schema.ts";
import { HttpError } from "../../http/errors.ts";
import type { Member } from "../../http/team-routes.ts";

const NAMERS = {
  log: { table: revisionLogs, named: revisionLogs.logId },
  picture: { table: revisionPictures, named: revisionPictures.pictureId },
} as const;
type Kind = keyof typeof NAMERS;

/** Scenarios by name, each with its revisions in order. */
export async function usesOf(db: Queries, kind: Kind, id: string): Promise<Use[]> {
  const { table, named } = NAMERS[kind];
  return await db
    .select({
      id: scenarios.id,
      name: scenarios.name,
      archived: sql<boolean>`${scenarios.archivedAt} is not null`,
      revisions: sql<number[]>`array_agg(${table.revision} order by ${table.revision})`,
    })
    .from(table)
    .innerJoin(scenarios, eq(scenarios.id, table.scenarioId))
    .where(eq(named, id))
    .groupBy(scenarios.id)
    .orderBy(asc(scenarios.sortKey), asc(scenarios.id));
}

const listed = (texts: string[]): string => (texts.length < 2 ? texts.join("") : `${texts.slice(0, -1).join(", ")} and ${texts[texts.length - 1]}`);
const MOST_NAMED = 5;

export function inUse(what: string, uses: Use[]): HttpError {
  const named = uses
    .slice(0, MOST_NAMED)
    .map(({ name, revisions }) => `“${name}” (revision${revisions.length > 1 ? "s" : ""} ${listed(revisions.map(String))})`);
  const rest = uses.length - named.length;
  const users = listed(rest > 0 ? [...named, `${rest} more`] : named);
  const message = `${what} is used by ${users} and cannot be deleted: a revision never changes. It can go when these scenarios have been deleted. Drafts that nobody has saved are not known here.`;
  return new HttpError("in-use", message, { uses });
}

/** Locks what the scenario names until the transaction ends, or says what of it is not the team's. */
export async function requireOfTeam(transaction: Queries, { team }: Pick<Member, "team">, scenario: Scenario): Promise<void> {
  const issues: Issue[] = [];
  const { process } = scenario.losses;
  const log = process.type === "replay" ? process.log : null;
  if (log) {
    const found = await transaction
      .select({ id: receptionLogs.id })
      .from(receptionLogs)
      .where(and(eq(receptionLogs.id, log.id), eq(receptionLogs.teamId, team.id)))
      .for("key share");
    if (found.length === 0) {
      const message = `The reception log “${log.name}” is not one of ${team.name}. What is replayed is in the scenario itself: leave out the name of the log, or choose one of the team's.`;
      issues.push({ code: "unknown-log", path: "losses.process.log.id", message });
    }
  }
  const picture = scenario.floor?.picture;
  if (picture) {
    const found = await transaction
      .select({ id: floorPictures.id })
      .from(floorPictures)
      .where(and(eq(floorPictures.id, picture.id), eq(floorPictures.teamId, team.id)))
      .for("key share");
    if (found.length === 0) {
      const message = `The picture under the floor is not one of ${team.name}. Leave it out, or upload it here and choose it again.`;
      issues.push({ code: "unknown-picture", path: "floor.picture.id", message });
    }
  }
  if (issues.length > 0)
    throw new HttpError("scenario-invalid", `The scenario cannot be saved: ${issues[0].message}${issues.length > 1 ? " And 1 more." : ""}`, {
      issues,
    });
}
