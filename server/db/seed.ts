import { createReadStream, readFileSync } from "node:fs";
import { eq, inArray } from "drizzle-orm";
import { drizzle } from "drizzle-orm/node-postgres";
import type { Role } from "#shared/api/permissions.ts";
import { columnMappingSchema } from "#shared/reception/types.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import { record } from "../features/activity/repository.ts";
import { readLog } from "../features/logs/read.ts";
import { storeLog } from "../features/logs/service.ts";
import { recordOf } from "../features/runs/record.ts";
import { storeRun } from "../features/runs/service.ts";
import { insertNewScenario, insertNextRevision } from "../features/scenarios/service.ts";
import { hashPassword } from "../features/session/service.ts";
import type { Queries } from "./client.ts";
import { DEMO_PARTS, DEMO_PASSWORD, DEMO_PEOPLE, DEMO_TEAMS, type DemoLog, type DemoScenario, type LaidOutLog } from "./demo.ts";
import { underLock } from "./migrate.ts";
import * as schema from "./schema.ts";

function readExample(name: string): Scenario {
  const parsed = parseScenario(JSON.parse(readFileSync(new URL(`../../examples/${name}`, import.meta.url), "utf8")));
  if (!parsed.ok) throw new Error(`examples/${name}: ${parsed.issues[0].message}`);
  return parsed.value;
}

type Team = { id: string; name: string };
type User = { id: string; name: string };

interface Demo {
  db: Queries;
  /** By the key of the team, and by mail. */
  teams: Map<string, Team>;
  people: Map<string, User>;
  now: number;
}
const hoursBefore = (now: number, hours: number) => new Date(now - hours * 3_600_000);

async function insertTeams(db: Queries, now: number): Promise<Demo["teams"]> {
  const teams: Demo["teams"] = new Map();
  for (const [i, [key, name]] of Object.entries(DEMO_TEAMS).entries()) {
    // A moment apart, so that the order of the teams is theirs.
    const [team] = await db
      .insert(schema.teams)
      .values({ name, createdAt: new Date(now + i) })
      .returning({ id: schema.teams.id, name: schema.teams.name });
    teams.set(key, team);
  }
  return teams;
}

async function insertPeople(db: Queries, teams: Demo["teams"]): Promise<Demo["people"]> {
  const passwordHash = await hashPassword(DEMO_PASSWORD);
  const people: Demo["people"] = new Map();
  for (const { name, email, roles } of DEMO_PEOPLE) {
    const [user] = await db.insert(schema.users).values({ name, email, passwordHash }).returning({ id: schema.users.id, name: schema.users.name });
    people.set(email, user);
    for (const [team, held] of Object.entries(roles) as [string, Role[]][]) {
      await db.insert(schema.memberships).values({ teamId: (teams.get(team) as Team).id, userId: user.id, roles: held });
    }
  }
  return people;
}

/** What an earlier version laid out, as far as it is still there. */
async function findDemo(db: Queries, now: number): Promise<Demo> {
  const mails = DEMO_PEOPLE.map(({ email }) => email);
  const rows = await db
    .selectDistinctOn([schema.teams.id, schema.users.id], {
      team: { id: schema.teams.id, name: schema.teams.name },
      user: { id: schema.users.id, name: schema.users.name },
      email: schema.users.email,
    })
    .from(schema.memberships)
    .innerJoin(schema.teams, eq(schema.teams.id, schema.memberships.teamId))
    .innerJoin(schema.users, eq(schema.users.id, schema.memberships.userId))
    .where(inArray(schema.users.email, mails));
  const teams: Demo["teams"] = new Map();
  for (const [key, name] of Object.entries(DEMO_TEAMS)) {
    const found = rows.find(({ team }) => team.name === name);
    if (found) teams.set(key, found.team);
  }
  return { db, teams, people: new Map(rows.map(({ email, user }) => [email, user])), now };
}

async function insertDemoLog({ db, teams, people, now }: Demo, demo: DemoLog): Promise<LaidOutLog> {
  const member = { team: teams.get(demo.team) as Team, user: people.get(demo.by) as User };
  const { name, file } = demo;
  const mapping = columnMappingSchema.parse(demo.mapping);
  const read = await readLog(createReadStream(new URL(`../../examples/logs/${file}`, import.meta.url)), mapping, false);
  if (!read.ok) throw new Error(`examples/logs/${file}: ${read.message}`);
  const { id } = await storeLog(db, member, { name, fileName: file, mapping }, read, hoursBefore(now, demo.hoursAgo));
  return { id, name, links: JSON.parse(read.linkTraces) };
}

async function insertDemoScenario({ db, teams, people, now }: Demo, demo: DemoScenario, logs: Map<string, LaidOutLog>): Promise<void> {
  let row: { id: string; latestRevision: number } | null = null;
  const example = readExample(demo.example);
  for (const { by, hoursAgo, note, then } of demo.revisions) {
    const member = { team: teams.get(demo.team) as Team, user: people.get(by) as User };
    const at = hoursBefore(now, hoursAgo);
    const scenario = structuredClone(example);
    then?.(scenario, (file) => logs.get(file) as LaidOutLog);
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

/** Lays out each part of the demo once: what is deleted later stays deleted. Tells whether it did anything. */
export function seedDemo(url: string): Promise<boolean> {
  return underLock(url, (client) =>
    drizzle(client, { schema, casing: "snake_case" }).transaction(async (db) => {
      const done = new Set((await db.select({ key: schema.settings.key }).from(schema.settings)).map(({ key }) => key));
      const parts = DEMO_PARTS.filter(({ key }) => !done.has(key));
      if (parts.length === 0) return false;
      const now = Date.now();
      const begun = parts.length < DEMO_PARTS.length;
      const teams = begun ? null : await insertTeams(db, now);
      const demo: Demo = teams ? { db, teams, people: await insertPeople(db, teams), now } : await findDemo(db, now);
      // A team that somebody has removed, or whose people have left it, gets nothing more.
      const isWhole = demo.teams.size === Object.keys(DEMO_TEAMS).length && demo.people.size === DEMO_PEOPLE.length;
      for (const { key, logs, scenarios } of parts) {
        if (isWhole) {
          const laidOut = new Map<string, LaidOutLog>();
          for (const log of logs) laidOut.set(log.file, await insertDemoLog(demo, log));
          for (const scenario of scenarios) await insertDemoScenario(demo, scenario, laidOut);
        }
        await db.insert(schema.settings).values({ key, value: new Date(now).toISOString() });
      }
      return isWhole;
    }),
  );
}
