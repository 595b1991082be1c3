/** The database is stopped under the running server, and comes back. */
import { type AddressInfo, connect, createServer, type Socket } from "node:net";
import { setTimeout as pause } from "node:timers/promises";
import supertest from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { errorBodySchema } from "#shared/api/errors.ts";
import { uploadLogParameters, uploadLogResponse } from "#shared/api/logs.ts";
import { healthResponse, sessionResponse } from "#shared/api/session.ts";
import { createTestDatabase, startTestCluster, type TestCluster } from "../helpers/database.ts";
import { bodyOf, createScenario, type Harness, PASSWORD, SLOW, scenarioNamed, startHarness } from "./harness.ts";
import { png } from "./pictures.ts";
import { csvText, MAPPING } from "./reception-csv.ts";

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

const parameters = new URLSearchParams(uploadLogParameters({ name: "Hall 2", fileName: "", mapping: MAPPING }));

/** Between server and database; frozen, it takes connections and lets nothing through. */
async function startProxy(to: string) {
  const target = new URL(to);
  const pairs = new Set<[Socket, Socket]>();
  let frozen = false;
  const server = createServer((near) => {
    if (frozen) near.pause();
    const far = connect(Number(target.port), target.hostname);
    const pair: [Socket, Socket] = [near, far];
    pairs.add(pair);
    for (const [from, into] of [pair, [far, near]] as const) {
      from.on("data", (part) => frozen || into.write(part));
      from.on("error", () => into.destroy());
      from.on("close", () => into.destroy());
    }
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  return {
    port: (server.address() as AddressInfo).port,
    freeze() {
      frozen = true;
    },
    /** What was held up is lost with its connections. */
    thaw() {
      frozen = false;
      for (const [near] of pairs) near.destroy();
    },
    close: () => new Promise((resolve) => server.close(resolve)),
  };
}

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
    const logs = `/api/teams/${harness.team.id}/logs`;
    const pictures = `/api/teams/${harness.team.id}/pictures`;
    const requests = (): [string, supertest.Test][] => [
      ["the session", engineer.agent.get("/api/session")],
      ["the session of a visitor", supertest(harness.express).get("/api/session")],
      ["signing in", supertest(harness.express).post("/api/session").send({ email: engineer.email, password: PASSWORD })],
      ["the table", engineer.agent.get(scenarios)],
      ["a scenario", engineer.agent.get(`${scenarios}/${id}`)],
      ["saving", engineer.agent.post(`${scenarios}/${id}/revisions`).send({ baseRevision: 1, scenario: scenarioNamed("During") })],
      ["a visitor", supertest(harness.express).get(scenarios)],
      ["the logs", engineer.agent.get(logs)],
      ["uploading a log", engineer.agent.post(`${logs}?${parameters}`).set("Content-Type", "text/csv").send(csvText(10))],
      ["uploading a picture", engineer.agent.post(`${pictures}?name=x.png`).set("Content-Type", "image/png").send(png(4, 4))],
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

  it("that stops while a log is on its way takes the log with it, and takes the same one when it is back", async () => {
    const { engineer } = harness.people;
    const file = Buffer.from(csvText(5_000, 3));
    const server = harness.express.listen(0, "127.0.0.1");
    await new Promise((resolve) => server.once("listening", resolve));
    const signedIn = await engineer.agent.post("/api/session").send({ email: engineer.email, password: PASSWORD });
    const send = (chunks: () => AsyncGenerator<Buffer>) =>
      fetch(`http://127.0.0.1:${(server.address() as AddressInfo).port}/api/teams/${harness.team.id}/logs?${parameters}`, {
        method: "POST",
        headers: { "Content-Type": "text/csv", Cookie: signedIn.headers["set-cookie"][0].split(";")[0] },
        body: chunks(),
        duplex: "half",
      } as unknown as RequestInit);
    const broken = await send(async function* () {
      yield file.subarray(0, 70_000);
      await cluster.halt();
      yield file.subarray(70_000);
    });
    expect(broken.status).toBe(503);
    expect(bodyOf(errorBodySchema, { body: await broken.json() }).error.code).toBe("database-unavailable");
    await cluster.start();
    await eventually(async () => (await supertest(harness.express).get("/api/health")).status === 200, 5_000);
    const again = await send(async function* () {
      yield file;
    });
    expect(again.status).toBe(201);
    expect(bodyOf(uploadLogResponse, { body: await again.json() })).toMatchObject({ existed: false, log: { rows: 10_000 } });
    server.closeAllConnections();
    await new Promise((resolve) => server.close(resolve));
  }, 60_000);

  it("that falls silent is given up on in time, and used again when it answers", async () => {
    const proxy = await startProxy(cluster.url);
    const database = await createTestDatabase(cluster.url);
    const url = new URL(database.url);
    url.port = String(proxy.port);
    const through = await startHarness({ url: url.href, remove: database.remove });
    const { agent } = through.people.engineer;
    await agent.get("/api/session").expect(200);
    proxy.freeze();
    // Connections that were open before, and such as are opened now.
    for (let i = 0; i < 4; i++) {
      const from = performance.now();
      const response = await agent.get("/api/session");
      expect(response.status).toBe(503);
      expect(performance.now() - from).toBeLessThan(4_000);
    }
    proxy.thaw();
    await eventually(async () => (await agent.get("/api/session")).status === 200, 5_000);
    await through.close();
    await proxy.close();
  }, 40_000);
});
