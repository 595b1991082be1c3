/** A database that an older version wrote, under this one. */
import { createHash } from "node:crypto";
import { cpSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gunzipSync } from "node:zlib";
import { drizzle } from "drizzle-orm/node-postgres";
import { migrate } from "drizzle-orm/node-postgres/migrator";
import pg from "pg";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { z } from "zod";
import { DEMO_PARTS, DEMO_PASSWORD } from "#server/db/demo.ts";
import { migrateDatabase } from "#server/db/migrate.ts";
import { seedDemo } from "#server/db/seed.ts";
import { refreshSummaries } from "#server/features/scenarios/refresh.ts";
import { SUMMARY_VERSION, summarise } from "#server/features/scenarios/summary.ts";
import { errorBodySchema } from "#shared/api/errors.ts";
import { logListResponse } from "#shared/api/logs.ts";
import { revisionDetailSchema, revisionListResponse } from "#shared/api/revisions.ts";
import { createRunResponse, runDetailSchema, runListResponse } from "#shared/api/runs.ts";
import { roundSummarySchema, type ScenarioItem, scenarioListResponse, scenarioResponse } from "#shared/api/scenarios.ts";
import { decodeSeries } from "#shared/api/series.ts";
import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import { createTestDatabase, type TestDatabase } from "../helpers/database.ts";
import { type Agent, bodyOf, type Harness, SLOW, startHarness } from "./harness.ts";

const OLDER = readFileSync(new URL("../fixtures/older/engine-1.0.0.sql", import.meta.url), "utf8");
const MIGRATIONS = new URL("../../drizzle", import.meta.url).pathname;

/** The first migrations only, as the older version had them. */
async function migrateAsThen(url: string): Promise<void> {
  const folder = mkdtempSync(join(tmpdir(), "holdfast-older-"));
  cpSync(MIGRATIONS, folder, { recursive: true });
  const journal = JSON.parse(readFileSync(join(folder, "meta/_journal.json"), "utf8"));
  writeFileSync(join(folder, "meta/_journal.json"), JSON.stringify({ ...journal, entries: journal.entries.slice(0, 2) }));
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  await migrate(drizzle(client), { migrationsFolder: folder });
  await client.query(OLDER);
  await client.end();
  rmSync(folder, { recursive: true });
}

const warned: unknown[] = [];
const log = { warn: (details: unknown) => void warned.push(details) };

let database: TestDatabase;
let client: pg.Client;
beforeAll(async () => {
  database = await createTestDatabase(undefined, migrateAsThen);
  client = new pg.Client({ connectionString: database.url });
  await client.connect();
}, SLOW);
afterAll(async () => {
  await client?.end();
  await database?.remove();
});

const summaries = async (): Promise<{ id: string; round: unknown; changed_at: Date; verdict: string }[]> =>
  (await client.query("select id, round, changed_at, verdict from scenarios order by id")).rows;

describe("summaries that an older version kept", () => {
  it("are made anew once, although several processes start at the same time, and nothing else of the table changes", async () => {
    const before = await summaries();
    expect(before.map(({ round }) => roundSummarySchema.safeParse(round).success)).toEqual([false, false, false]);
    await migrateDatabase(database.url);
    const made = await Promise.all([refreshSummaries(database.url, log), refreshSummaries(database.url, log)]);
    expect(made.sort()).toEqual([0, 3]);
    const after = await summaries();
    for (const { round } of after) roundSummarySchema.parse(round);
    const rest = (rows: typeof after) => rows.map(({ round: _round, ...columns }) => columns);
    expect(rest(after)).toEqual(rest(before));
    expect(await refreshSummaries(database.url, log)).toBe(0);
    expect(warned).toEqual([]);
  });

  it("are made anew whenever another version made them, and one that cannot be read keeps none of the others", async () => {
    const expected = await summaries();
    await client.query("update scenarios set summary_version = 1, round = '{}'");
    await client.query("update scenarios set summary_version = 99, round = '{}' where id = $1", [expected[0].id]);
    // Nothing ever wrote this; a fault in a disk might.
    await client.query("begin");
    const { rows } = await client.query(
      `insert into scenarios (team_id, owner_id, latest_revision, name, sort_key, search_text, plant_kind, period_s, round, verdict, verdict_word, verdict_sentence)
       select team_id, owner_id, 1, 'Broken', '', '', plant_kind, period_s, '{}', verdict, verdict_word, verdict_sentence from scenarios limit 1 returning id`,
    );
    const broken = rows[0].id;
    await client.query(
      `insert into revisions (scenario_id, number, name, note, scenario, unrun, author_id)
       select $1, 1, 'Broken', '', '{"name": 7}', unrun, author_id from revisions limit 1`,
      [broken],
    );
    await client.query("commit");
    expect(await refreshSummaries(database.url, log)).toBe(3);
    expect(warned).toMatchObject([{ id: broken }]);
    await client.query("delete from scenarios where id = $1", [broken]);
    expect(await summaries()).toEqual(expected);
  });
});

it("a summary of another shape has another version", () => {
  // When this fails because the shape was changed on purpose: raise SUMMARY_VERSION, then write both down here.
  const shape = createHash("sha256")
    .update(JSON.stringify(z.toJSONSchema(roundSummarySchema)))
    .digest("hex")
    .slice(0, 12);
  expect([SUMMARY_VERSION, shape]).toEqual([2, "51508343619c"]);
});

describe("what an older version kept", () => {
  let harness: Harness;
  let agent: Agent;
  let team: string;
  let items: ScenarioItem[];
  beforeAll(async () => {
    await migrateDatabase(database.url);
    await refreshSummaries(database.url, log);
    harness = await startHarness({ url: database.url, remove: async () => undefined });
    agent = await harness.signIn("rowan.fennick@northquay.example", DEMO_PASSWORD);
    team = `/api/teams/${(await agent.get("/api/session")).body.memberships[0].team.id}`;
    items = bodyOf(scenarioListResponse, await agent.get(`${team}/scenarios`).query({ sort: "name", direction: "ascending" }).expect(200)).items;
  }, SLOW);
  afterAll(() => harness?.close());

  it("is shown in the table as before, with rounds as they are drawn now", () => {
    expect(items.map(({ name, revision, verdict }) => [name, revision, verdict.state])).toEqual([
      ["Balancer rig 2, bursts", 2, expect.any(String)],
      ["Balancer, long hall", 1, "does-not-fit"],
      ["Pallet crane, bay 3", 2, expect.any(String)],
    ]);
    for (const { round } of items) expect(round.loops).toHaveLength(1);
    expect(items.map(({ round }) => round.fits)).toEqual([true, false, true]);
  });

  it("is opened with every revision, the newer parts of a scenario filled in", async () => {
    for (const { id, round } of items) {
      const opened = bodyOf(scenarioResponse, await agent.get(`${team}/scenarios/${id}`).expect(200));
      expect(opened.latest.scenario.floor).toBeNull();
      expect(summarise(opened.latest.scenario).columns.round).toEqual(round);
      const list = bodyOf(revisionListResponse, await agent.get(`${team}/scenarios/${id}/revisions`).expect(200));
      for (const { number } of list.items) {
        bodyOf(revisionDetailSchema, await agent.get(`${team}/scenarios/${id}/revisions/${number}`).expect(200));
      }
    }
  });

  it("keeps its runs as they were, under the engine that computed them", async () => {
    const { id } = items[0];
    const list = bodyOf(runListResponse, await agent.get(`${team}/scenarios/${id}/runs`).expect(200));
    expect(list.items.map(({ revision, engine }) => [revision, engine])).toEqual([
      [2, "1.0.0"],
      [1, "1.0.0"],
    ]);
    const run = bodyOf(runDetailSchema, await agent.get(`${team}/runs/${list.items[0].id}`).expect(200));
    expect(run.figures.nodes).toEqual([]);
    const { rows } = await client.query("select bytes from run_series where run_id = $1", [run.id]);
    expect(decodeSeries(gunzipSync(rows[0].bytes)).series.t.length).toBe(run.series.kept);
  });

  it("is run anew by this engine, copied and developed further", async () => {
    const { id } = items[0];
    const again = bodyOf(createRunResponse, await agent.post(`${team}/scenarios/${id}/runs`).send({ revision: 1 }).expect(201));
    expect(again.run.engine).toBe(ENGINE_VERSION);
    const copy = bodyOf(scenarioResponse, await agent.post(`${team}/scenarios/${id}/duplicate`).send({ revision: 1 }).expect(201));
    expect(copy.latestRun?.digest).toBe(again.run.digest);
    const { scenario } = copy.latest;
    const saved = await agent.post(`${team}/scenarios/${id}/revisions`).send({ baseRevision: 2, scenario }).expect(201);
    expect(bodyOf(scenarioResponse, saved).revision).toBe(3);
  });

  it("gets the parts of the demo that came later, once", async () => {
    expect(await seedDemo(database.url)).toBe(true);
    expect(await seedDemo(database.url)).toBe(false);
    const { items: all } = bodyOf(scenarioListResponse, await agent.get(`${team}/scenarios`).query({ pageSize: 100 }).expect(200));
    const later = DEMO_PARTS[1].scenarios.length;
    // One of them is the copy that was made above.
    expect(all).toHaveLength(items.length + later + 1);
    const { items: logs } = bodyOf(logListResponse, await agent.get(`${team}/logs`).query({ sort: "name", direction: "ascending" }).expect(200));
    expect(logs.map(({ name, author, scenarios }) => [name, author.name, scenarios])).toEqual([
      ["Hall 2, press running", "Tove Saltby", 1],
      ["Hall 2, quiet shift", "Rowan Fennick", 1],
    ]);
    for (const { id } of logs) {
      const { error } = bodyOf(errorBodySchema, await agent.delete(`${team}/logs/${id}`).expect(409));
      expect(error.uses?.map(({ name }) => name)).toEqual(["Balancer rig 2, as recorded"]);
    }
  });

  it("gets nothing more where the demo team has been removed", async () => {
    const empty = await createTestDatabase();
    const bare = new pg.Client({ connectionString: empty.url });
    await bare.connect();
    await bare.query("insert into settings (key, value) values ('demo', 'long ago')");
    expect(await seedDemo(empty.url)).toBe(false);
    expect((await bare.query("select key from settings order by key")).rows.map(({ key }) => key)).toEqual(DEMO_PARTS.map(({ key }) => key));
    expect((await bare.query("select count(*)::int as teams from teams")).rows[0].teams).toBe(0);
    await bare.end();
    await empty.remove();
  });
});
