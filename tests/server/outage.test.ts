/** The database is stopped under the running server, and comes back. */
import { setTimeout as pause } from "node:timers/promises";
import supertest from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { errorBodySchema } from "#shared/api/errors.ts";
import { healthResponse, sessionResponse } from "#shared/api/session.ts";
import { createTestDatabase, startTestCluster, type TestCluster } from "../helpers/database.ts";
import { bodyOf, createScenario, type Harness, PASSWORD, SLOW, scenarioNamed, startHarness } from "./harness.ts";

let cluster: TestCluster;
let harness: Harness;
beforeAll(async () => {
  cluster = await startTestCluster();
  harness = await startHarness(await createTestDatabase(cluster.url));
}, SLOW);
afterAll(async () => {
  await harness?.close();
  await cluster?.remove();
}, SLOW);

/** The server notices by itself that the database is back; how soon is asserted, not assumed. */
async function eventually(check: () => Promise<boolean>, withinMs: number): Promise<number> {
  const from = performance.now();
  while (!(await check())) {
    if (performance.now() - from > withinMs) throw new Error(`Not within ${withinMs} ms.`);
    await pause(20);
  }
  return performance.now() - from;
}

describe("a stopped database", () => {
  it("is told at once on every route, and the server goes on by itself when it is back", async () => {
    const { engineer } = harness.people;
    const { id } = await createScenario(harness, scenarioNamed("Before"));
    const scenarios = `/api/teams/${harness.team.id}/scenarios`;
    const requests = (): [string, supertest.Test][] => [
      ["the session", engineer.agent.get("/api/session")],
      ["the session of a visitor", supertest(harness.express).get("/api/session")],
      ["signing in", supertest(harness.express).post("/api/session").send({ email: engineer.email, password: PASSWORD })],
      ["the table", engineer.agent.get(scenarios)],
      ["a scenario", engineer.agent.get(`${scenarios}/${id}`)],
      ["saving", engineer.agent.post(`${scenarios}/${id}/revisions`).send({ baseRevision: 1, scenario: scenarioNamed("During") })],
      ["a visitor", supertest(harness.express).get(scenarios)],
    ];

    for (let outage = 1; outage <= 2; outage++) {
      await cluster.halt();
      for (const [what, request] of requests()) {
        const from = performance.now();
        const response = await request;
        expect(response.status, what).toBe(503);
        expect(bodyOf(errorBodySchema, response).error.code, what).toBe("database-unavailable");
        expect(performance.now() - from, what).toBeLessThan(3_000);
      }
      const health = await supertest(harness.express).get("/api/health");
      expect(health.status).toBe(503);
      expect(bodyOf(healthResponse, health)).toEqual({ ok: false, database: false });

      await cluster.start();
      await eventually(async () => (await supertest(harness.express).get("/api/health")).status === 200, 5_000);
      // The same session as before, and nothing half saved.
      const session = bodyOf(sessionResponse, await engineer.agent.get("/api/session").expect(200));
      expect(session.user?.email).toBe(engineer.email);
      const saved = await engineer.agent.post(`${scenarios}/${id}/revisions`).send({ baseRevision: outage, scenario: scenarioNamed("After") });
      expect(saved.status).toBe(201);
    }
  }, 60_000);

  it("that no longer answers is given up on in time", async () => {
    const { connect } = await import("#server/db/client.ts");
    const { createServer } = await import("node:net");
    const { default: pino } = await import("pino");
    const { createApp } = await import("#server/app.ts");
    // Takes connections and never says a word.
    const sockets = new Set<import("node:net").Socket>();
    const silent = createServer((socket) => sockets.add(socket));
    await new Promise<void>((resolve) => silent.listen(0, "127.0.0.1", resolve));
    const { port } = silent.address() as import("node:net").AddressInfo;
    const log = pino({ level: "silent" });
    const connection = connect(`postgres://nobody@127.0.0.1:${port}/nothing`, log);
    const pass = (_request: unknown, _response: unknown, next: () => void) => next();
    const app = createApp({ connection, log, sessionSecret: "s".repeat(32), demo: false, security: pass, client: pass });
    const from = performance.now();
    const response = await supertest(app.app).get("/api/session");
    expect(response.status).toBe(503);
    expect(performance.now() - from).toBeLessThan(4_000);
    await app.close();
    for (const socket of sockets) socket.destroy();
    silent.close();
    await connection.pool.end();
  }, 20_000);
});
