import { and, asc, eq, ne } from "drizzle-orm";
import { drizzle } from "drizzle-orm/node-postgres";
import type { Logger } from "pino";
import { parseScenario } from "#shared/scenario/parse.ts";
import { underLock } from "../../db/migrate.ts";
import * as schema from "../../db/schema.ts";
import { SUMMARY_VERSION, summarise } from "./summary.ts";

const { revisions, scenarios } = schema;

/**
 * Makes summaries anew that another version of Holdfast kept, from the latest revision of each scenario: whatever database
 * a new version finds, its table can be read. Tells how many it made.
 */
export function refreshSummaries(url: string, log: Pick<Logger, "warn">): Promise<number> {
  return underLock(url, async (client) => {
    const db = drizzle(client, { schema, casing: "snake_case" });
    const old = await db.select({ id: scenarios.id }).from(scenarios).where(ne(scenarios.summaryVersion, SUMMARY_VERSION)).orderBy(asc(scenarios.id));
    let made = 0;
    for (const { id } of old) {
      // One at a time: a scenario may be some megabytes.
      const [latest] = await db
        .select({ number: revisions.number, scenario: revisions.scenario })
        .from(scenarios)
        .innerJoin(revisions, and(eq(revisions.scenarioId, scenarios.id), eq(revisions.number, scenarios.latestRevision)))
        .where(eq(scenarios.id, id));
      const parsed = parseScenario(latest?.scenario);
      if (!parsed.ok) {
        log.warn({ id, issue: parsed.issues[0] }, "The latest revision of a scenario cannot be read");
        continue;
      }
      await db
        .update(scenarios)
        .set(summarise(parsed.value).columns)
        .where(and(eq(scenarios.id, id), eq(scenarios.latestRevision, latest.number)));
      made++;
    }
    return made;
  });
}
