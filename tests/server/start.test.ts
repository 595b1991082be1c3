/** What happens before the first request: environment, migrations, demo team, and the process itself. */
import { type ChildProcess, spawn } from "node:child_process";
import { createServer, type Server, type Socket } from "node:net";
import pg from "pg";
import pino from "pino";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { connect } from "#server/db/client.ts";
import { DEMO_PARTS, DEMO_PASSWORD, DEMO_PEOPLE } from "#server/db/demo.ts";
import { migrateDatabase } from "#server/db/migrate.ts";
import { activity, memberships, receptionLogs, revisions, runs, scenarios, teams, users } from "#server/db/schema.ts";
import { seedDemo } from "#server/db/seed.ts";
import { readEnv } from "#server/env.ts";
import { sessionSecret } from "#server/http/session.ts";
import { demoResponse } from "#shared/api/session.ts";
import { createTestDatabase, type TestDatabase } from "../helpers/database.ts";
import { bodyOf, SLOW, startHarness } from "./harness.ts";

describe("the environment", () => {
  it("has defaults for all but the database", () => {
    expect(readEnv({ DATABASE_URL: "postgres://a@127.0.0.1/b" })).toEqual({
      DATABASE_URL: "postgres://a@127.0.0.1/b",
      PORT: 4310,
      HOLDFAST_DEMO: true,
      LOG_LEVEL: "warn",
    });
  });

  it.each([
    [{}, "DATABASE_URL is missing"],
    [{ DATABASE_URL: "mysql://x" }, 'DATABASE_URL is "mysql://x"'],
    [{ DATABASE_URL: "postgres://x", PORT: "99999" }, 'PORT is "99999"'],
    [{ DATABASE_URL: "postgres://x", HOLDFAST_DEMO: "maybe" }, 'HOLDFAST_DEMO is "maybe"'],
    [{ DATABASE_URL: "postgres://x", HOLDFAST_SESSION_SECRET: "short" }, "at least 32 characters"],
  ])("is refused by name and value: %o", (variables, message) => {
    expect(() => readEnv(variables)).toThrow(message);
  });
});

describe("the database at the first start", () => {
  let database: TestDatabase;
  const counts = async (url: string) => {
    const { db, pool } = connect(url, pino({ level: "silent" }));
    const tables = { teams, users, memberships, scenarios, revisions, runs, receptionLogs, activity };
    const entries = await Promise.all(Object.entries(tables).map(async ([name, table]) => [name, await db.$count(table)] as const));
    await pool.end();
    return Object.fromEntries(entries);
  };

  beforeAll(async () => {
    database = await createTestDatabase();
  }, SLOW);
  afterAll(() => database?.remove());

  it("is migrated once although several processes start at the same time", async () => {
    const client = new pg.Client({ connectionString: database.url });
    await client.connect();
    await client.query("drop schema public cascade; drop schema drizzle cascade; create schema public");
    await Promise.all(Array.from({ length: 4 }, () => migrateDatabase(database.url)));
    const { rows } = await client.query("select count(*)::int as applied, count(distinct hash)::int as different from drizzle.__drizzle_migrations");
    await client.end();
    expect(rows[0].applied).toBe(rows[0].different);
    expect(rows[0].applied).toBeGreaterThan(1);
  });

  it("keeps one key for session cookies", async () => {
    const connection = connect(database.url, pino({ level: "silent" }));
    const secrets = await Promise.all([sessionSecret(connection), sessionSecret(connection), sessionSecret(connection)]);
    await connection.pool.end();
    expect(new Set(secrets).size).toBe(1);
    expect(secrets[0].length).toBeGreaterThanOrEqual(43);
  });

  it(
    "gets the demo team once, however often and at once it is asked for",
    async () => {
      const laidOut = await Promise.all([seedDemo(database.url), seedDemo(database.url)]);
      expect(laidOut.sort()).toEqual([false, true]);
      const first = await counts(database.url);
      const parts = DEMO_PARTS.flatMap((part) => part.scenarios);
      expect(await seedDemo(database.url)).toBe(false);
      expect(await counts(database.url)).toEqual(first);
      expect(first).toMatchObject({
        teams: 2,
        users: DEMO_PEOPLE.length,
        scenarios: parts.length,
        revisions: parts.reduce((sum, entry) => sum + entry.revisions.length, 0),
        receptionLogs: 2,
      });
    },
    SLOW,
  );

  it(
    "shows people who can sign in, one for each role, and scenarios that hold, fail a limit and break in a burst",
    async () => {
      const harness = await startHarness({ url: database.url, remove: async () => undefined });
      const { agent } = harness.people.trainee;
      const demo = bodyOf(demoResponse, await agent.get("/api/demo").expect(200));
      expect(demo.password).toBe(DEMO_PASSWORD);
      const northquay = (roles: { team: string; roles: string[] }[]) => roles.find(({ team }) => team === "Northquay Packaging")?.roles;
      expect(demo.people.map(({ memberships: of }) => northquay(of)).sort()).toEqual([["administrator"], ["engineer"], ["reviewer"], ["trainee"]]);
      for (const { email } of demo.people) await harness.signIn(email, DEMO_PASSWORD);
      const rowan = await harness.signIn("rowan.fennick@northquay.example", DEMO_PASSWORD);
      const session = (await rowan.get("/api/session")).body;
      expect(session.memberships.map(({ team }: { team: { name: string } }) => team.name)).toEqual([
        "Northquay Packaging",
        "Saltmarsh Training Centre",
      ]);
      const { items } = (await rowan.get(`/api/teams/${session.memberships[0].team.id}/scenarios?pageSize=100`)).body;
      const words = items.map(({ verdict }: { verdict: { state: string } }) => verdict.state);
      expect(words).toContain("holds");
      expect(words).toContain("does-not-fit");
      expect(words.filter((word: string) => word === "crosses").length).toBeGreaterThanOrEqual(2);
      expect(new Set(items.map(({ owner }: { owner: { name: string } }) => owner.name)).size).toBeGreaterThan(1);
      expect(Math.max(...items.map(({ revision }: { revision: number }) => revision))).toBeGreaterThan(2);
      await harness.close();
    },
    SLOW,
  );
});

describe("the process", () => {
  let database: TestDatabase;
  let blocker: Server;
  const held = new Set<Socket>();
  let child: ChildProcess | undefined;
  beforeAll(async () => {
    database = await createTestDatabase();
    blocker = createServer((socket) => held.add(socket));
    await new Promise<void>((resolve) => blocker.listen(0, "127.0.0.1", resolve));
  }, SLOW);
  afterAll(async () => {
    child?.kill("SIGKILL");
    for (const socket of held) socket.destroy();
    await new Promise((resolve) => blocker.close(resolve));
    await database?.remove();
  });

  const start = (variables: Record<string, string>) => {
    const environment = { PATH: process.env.PATH, HOLDFAST_DEMO: "off", ...variables };
    const started = spawn(process.execPath, ["--import", "tsx", "server/index.ts"], { env: environment, stdio: ["ignore", "pipe", "pipe"] });
    child = started;
    let out = "";
    let err = "";
    started.stderr.on("data", (part) => {
      err += part;
    });
    const ended = new Promise<{ code: number | null; out: string; err: string }>((resolve) =>
      started.once("close", (code) => resolve({ code, out, err })),
    );
    const ready = new Promise<string>((resolve, reject) => {
      started.stdout.on("data", (part) => {
        out += part;
        const address = out.match(/Holdfast is at (http:\/\/127\.0\.0\.1:\d+)\n/)?.[1];
        if (address) resolve(address);
      });
      started.once("close", () => reject(new Error(`It ended before it was ready: ${out}${err}`)));
    });
    return { started, ready, ended };
  };

  it(
    "says when the port is taken, uses the next, serves on loopback, and ends cleanly when told",
    async () => {
      const { port } = blocker.address() as { port: number };
      const { started, ready, ended } = start({ DATABASE_URL: database.url, PORT: String(port) });
      const address = await ready;
      expect(Number(new URL(address).port)).toBeGreaterThan(port);
      expect(await (await fetch(`${address}/api/health`)).json()).toEqual({ ok: true, database: true });
      started.kill("SIGTERM");
      const { code, out, err } = await ended;
      expect(code).toBe(0);
      expect(out).toContain(`Port ${port} is taken`);
      expect(err).toBe("");
    },
    SLOW,
  );

  it(
    "says what is wrong when the database does not answer, and ends",
    async () => {
      const { port } = blocker.address() as { port: number };
      const { ready, ended } = start({ DATABASE_URL: `postgres://nobody@127.0.0.1:${port}/nothing` });
      await expect(ready).rejects.toThrow("does not answer");
      expect((await ended).code).toBe(1);
    },
    SLOW,
  );
});
