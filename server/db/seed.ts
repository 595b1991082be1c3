import { readFileSync } from "node:fs";
import { eq } from "drizzle-orm";
import { drizzle } from "drizzle-orm/node-postgres";
import type { Role } from "#shared/api/permissions.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import { record } from "../features/activity/repository.ts";
import { recordOf } from "../features/runs/record.ts";
import { storeRun } from "../features/runs/service.ts";
import { insertNewScenario, insertNextRevision } from "../features/scenarios/service.ts";
import { hashPassword } from "../features/session/service.ts";
import type { Queries } from "./client.ts";
import { DEMO_PASSWORD, DEMO_PEOPLE, DEMO_SCENARIOS, DEMO_TEAMS, type DemoScenario } from "./demo.ts";
import { underLock } from "./migrate.ts";
import * as schema from "./schema.ts";

function readExample(name: string): Scenario {
  const parsed = parseScenario(JSON.parse(readFileSync(new URL(`../../examples/${name}`, import.meta.url), "utf8")));
  if (!parsed.ok) throw new Error(`examples/${name}: ${parsed.issues[0].message}`);
  return parsed.value;
}

type Team = { id: string; name: string };
type User = { id: string; name: string };

async function insertPeople(db: Queries, teams: Map<string, Team>): Promise<Map<string, User>> {
  const passwordHash = await hashPassword(DEMO_PASSWORD);
  const people = new Map<string, User>();
  for (const { name, email, roles } of DEMO_PEOPLE) {
    const [user] = await db.insert(schema.users).values({ name, email, passwordHash }).returning({ id: schema.users.id, name: schema.users.name });
    people.set(email, user);
    for (const [team, held] of Object.entries(roles) as [string, Role[]][]) {
      await db.insert(schema.memberships).values({ teamId: (teams.get(team) as Team).id, userId: user.id, roles: held });
    }
  }
  return people;
}

async function insertDemoScenario(db: Queries, demo: DemoScenario, team: Team, people: Map<string, User>, now: number): Promise<void> {
  let row: { id: string; latestRevision: number } | null = null;
  const example = readExample(demo.example);
  for (const { by, hoursAgo, note, then } of demo.revisions) {
    const member = { team, user: people.get(by) as User };
    const at = new Date(now - hoursAgo * 3_600_000);
    const scenario = structuredClone(example);
    then?.(scenario);
    const first = row === null;
    if (row === null) row = await insertNewScenario(db, member, scenario, note, at);
    else row = { id: row.id, latestRevision: await insertNextRevision(db, member, row, scenario, note, at) };
    const subject = { id: row.id, name: scenario.name };
    await record(db, member, { what: first ? "scenario-created" : "revision-saved", subject, revision: row.latestRevision, at });
    const outcome = simulate(scenario);
    if (!outcome.ok) continue;
    const key = { scenarioId: row.id, revision: row.latestRevision, seed: scenario.run.seed, engine: ENGINE_VERSION };
    await storeRun(db, member, key, await recordOf(scenario, outcome.result), at);
  }
}

/** Lays out the demo team, once: what is deleted later stays deleted. Tells whether it did. */
export function seedDemo(url: string): Promise<boolean> {
  return underLock(url, (client) =>
    drizzle(client, { schema, casing: "snake_case" }).transaction(async (db) => {
      const [done] = await db.select().from(schema.settings).where(eq(schema.settings.key, "demo"));
      if (done) return false;
      const now = Date.now();
      const teams = new Map<string, Team>();
      for (const [i, [key, name]] of Object.entries(DEMO_TEAMS).entries()) {
        // A moment apart, so that the order of the teams is theirs.
        const [team] = await db
          .insert(schema.teams)
          .values({ name, createdAt: new Date(now + i) })
          .returning({ id: schema.teams.id, name: schema.teams.name });
        teams.set(key, team);
      }
      const people = await insertPeople(db, teams);
      for (const demo of DEMO_SCENARIOS) await insertDemoScenario(db, demo, teams.get(demo.team) as Team, people, now);
      await db.insert(schema.settings).values({ key: "demo", value: new Date(now).toISOString() });
      return true;
    }),
  );
}
