import { gzipSync } from "node:zlib";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { runs } from "#server/db/schema.ts";
import { createSimulator } from "#server/features/runs/simulator.ts";
import { errorBodySchema } from "#shared/api/errors.ts";
import { createRunResponse, runDetailSchema, runListResponse } from "#shared/api/runs.ts";
import { scenarioResponse } from "#shared/api/scenarios.ts";
import { decodeSeries, SERIES_CONTENT_TYPE } from "#shared/api/series.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import { bodyOf, createScenario, type Harness, SLOW, scenarioNamed, startHarness } from "./harness.ts";

let harness: Harness;
beforeAll(async () => {
  harness = await startHarness();
}, SLOW);
afterAll(() => harness?.close());

const base = () => `/api/teams/${harness.team.id}`;
const post = (id: string, body: object) => harness.people.engineer.agent.post(`${base()}/scenarios/${id}/runs`).send(body);
const here = (scenario: Scenario, seed: number): RunResult => {
  const outcome = simulate(scenario, seed);
  if (!outcome.ok) throw new Error(outcome.issues[0].message);
  return outcome.result;
};

describe("keeping a run", () => {
  it("simulates on the server and finds what the page found, bit for bit", async () => {
    const scenario = scenarioNamed("Compared");
    const { id } = await createScenario(harness, scenario);
    const result = here(scenario, 77);
    const answer = bodyOf(createRunResponse, await post(id, { revision: 1, seed: 77, digest: digestRun(result) }).expect(201));
    expect(answer.digestMatches).toBe(true);
    expect(answer.run).toMatchObject({ seed: 77, revision: 1, engine: ENGINE_VERSION, digest: digestRun(result), scenarioName: "Compared" });
    expect(answer.run.figures).toEqual(result.figures);
    expect(answer.run.events).toEqual(result.events);
    expect(answer.run.limits).toEqual(result.limits);
    expect(answer.run.verdict.state).toBe(result.verdict);
    expect(answer.run.delivery.sent).toBe(result.figures.messages.reduce((sum, { sent }) => sum + sent, 0));
  });

  it("says so when the page found something else, and keeps its own", async () => {
    const { id } = await createScenario(harness, scenarioNamed("Doubted"));
    const wrong = "0".repeat(64);
    const answer = bodyOf(createRunResponse, await post(id, { revision: 1, seed: 5, digest: wrong }).expect(201));
    expect(answer.digestMatches).toBe(false);
    expect(answer.run.digest).not.toBe(wrong);
    expect(bodyOf(createRunResponse, await post(id, { revision: 1, seed: 5 }).expect(200)).digestMatches).toBeNull();
  });

  it("computes the same run once, however often and at once it is asked for", async () => {
    const { id, latestRun } = await createScenario(harness, scenarioNamed("Once"));
    const own = bodyOf(createRunResponse, await post(id, { revision: 1 }).expect(200));
    expect(own.run.id).toBe(latestRun?.id);
    const answers = await Promise.all(Array.from({ length: 5 }, () => post(id, { revision: 1, seed: 9 })));
    expect(new Set(answers.map(({ body }) => body.run.id)).size).toBe(1);
    expect(await harness.connection.db.$count(runs, eq(runs.scenarioId, id))).toBe(2);
  });

  it("shows the latest run of the latest revision in the table, and no run of an older one", async () => {
    const first = scenarioNamed("Table", (scenario) => {
      scenario.losses = { process: { type: "none" }, streams: "own", outages: [] };
    });
    const { id } = await createScenario(harness, first);
    const { agent } = harness.people.engineer;
    const second = scenarioNamed("Table", (scenario) => {
      scenario.losses = { process: { type: "bernoulli", measurement: 0.3, command: 0.3 }, streams: "own", outages: [] };
    });
    await agent.post(`${base()}/scenarios/${id}/revisions`).send({ baseRevision: 1, scenario: second }).expect(201);
    const newest = bodyOf(createRunResponse, await post(id, { revision: 2, seed: 1234 }).expect(201));
    await post(id, { revision: 1, seed: 1234 }).expect(201);
    const opened = bodyOf(scenarioResponse, await agent.get(`${base()}/scenarios/${id}`).expect(200));
    expect(opened.latestRun?.id).toBe(newest.run.id);
    expect(opened.delivery).toEqual(newest.run.delivery);
    expect(opened.verdict).toEqual(newest.run.verdict);
  });

  it("answers other requests while a long run is computed", async () => {
    const long = scenarioNamed("Long", (scenario) => {
      scenario.run.durationS = 300;
      scenario.losses.process = { type: "none" };
      scenario.losses.outages = [];
    });
    const { id } = await createScenario(harness, scenarioNamed("Long"));
    const { agent } = harness.people.engineer;
    const slow = agent.post(`${base()}/scenarios/${id}/revisions`).send({ baseRevision: 1, scenario: long });
    let finished = false;
    const done = slow.then((response) => {
      finished = true;
      return response;
    });
    let answered = 0;
    while (!finished) {
      await harness.people.trainee.agent.get(`${base()}/members`).expect(200);
      answered++;
    }
    expect((await done).status).toBe(201);
    expect(answered).toBeGreaterThan(10);
  }, 60_000);

  it.each([
    ["a revision that is not there", { revision: 3 }, 404],
    ["a negative seed", { revision: 1, seed: -1 }, 400],
    ["a seed beyond 32 bits", { revision: 1, seed: 4_294_967_296 }, 400],
    ["a digest that is none", { revision: 1, digest: "abc" }, 400],
    ["a result handed in", { revision: 1, figures: {} }, 400],
  ])("refuses %s", async (_what, body, status) => {
    const { id } = await createScenario(harness, scenarioNamed("Refusing"));
    bodyOf(errorBodySchema, await post(id, body).expect(status));
  });
});

describe("a kept run", () => {
  it("gives back the whole series and every round, bit for bit", async () => {
    const scenario = scenarioNamed("Record");
    const { id } = await createScenario(harness, scenario);
    const { run } = bodyOf(createRunResponse, await post(id, { revision: 1, seed: 3 }).expect(201));
    const response = await harness.people.trainee.agent
      .get(`${base()}/runs/${run.id}/series`)
      .buffer(true)
      .parse((stream, done) => {
        const chunks: Buffer[] = [];
        stream.on("data", (chunk: Buffer) => chunks.push(chunk));
        stream.on("end", () => done(null, Buffer.concat(chunks)));
      })
      .expect(200)
      .expect("Content-Type", SERIES_CONTENT_TYPE);
    const decoded = decodeSeries(response.body);
    const { series, rounds } = here(scenario, 3);
    expect(decoded.series).toEqual(series);
    expect(decoded.rounds).toEqual(rounds);
    expect(decoded).toMatchObject({ points: series.t.length, keptEvery: 1, detailed: true });
    expect(run.series).toMatchObject({ points: series.t.length, kept: series.t.length, keptEvery: 1 });
    expect(run.series.compressedBytes).toBeLessThan(gzipSync(response.body, { level: 0 }).length);
  });

  it("is opened by anybody of the team, with the name that the scenario had in its revision", async () => {
    const { id, latestRun } = await createScenario(harness, scenarioNamed("Old name"));
    await harness.people.engineer.agent
      .post(`${base()}/scenarios/${id}/revisions`)
      .send({ baseRevision: 1, scenario: scenarioNamed("New name") })
      .expect(201);
    const opened = bodyOf(runDetailSchema, await harness.people.trainee.agent.get(`${base()}/runs/${latestRun?.id}`).expect(200));
    expect(opened).toMatchObject({ scenarioName: "Old name", scenarioId: id, revision: 1, author: { name: "The engineer" } });
  });

  it("is listed by pages, newest first, by revision and by verdict", async () => {
    const { id } = await createScenario(harness, scenarioNamed("Many"));
    for (const seed of [101, 102, 103]) await post(id, { revision: 1, seed }).expect(201);
    const { agent } = harness.people.trainee;
    const list = async (query: string) => bodyOf(runListResponse, await agent.get(`${base()}/scenarios/${id}/runs?${query}`).expect(200));
    const all = await list("");
    expect(all.total).toBe(4);
    expect(all.items.slice(0, 3).map(({ seed }) => seed)).toEqual([103, 102, 101]);
    expect((await list("pageSize=3&page=2")).items.map(({ id: run }) => run)).toEqual([all.items[3].id]);
    expect((await list("revision=2")).total).toBe(0);
    const state = all.items[0].verdict.state;
    const same = all.items.filter(({ verdict }) => verdict.state === state).length;
    expect((await list(`verdict=${state}`)).total).toBe(same);
  });
});

describe("the thread of the runs", () => {
  it("gives up its runs when the server stops, and takes no more", async () => {
    const simulator = createSimulator();
    const long = scenarioNamed("Interrupted", (scenario) => {
      scenario.run.durationS = 3_000;
      scenario.losses.process = { type: "none" };
      scenario.losses.outages = [];
    });
    const interrupted = expect(simulator.simulate(long, 1)).rejects.toThrow("stopping");
    await simulator.stop();
    await interrupted;
    await expect(simulator.simulate(long, 1)).rejects.toThrow("stopping");
  });

  it("computes a short run while a long one is under way", async () => {
    const simulator = createSimulator();
    await simulator.warmUp();
    const long = simulator.simulate(
      scenarioNamed("Long", (scenario) => {
        scenario.run.durationS = 600;
        scenario.losses.process = { type: "none" };
        scenario.losses.outages = [];
      }),
      1,
    );
    const order: string[] = [];
    await Promise.all([long.then(() => order.push("long")), simulator.simulate(scenarioNamed("Short"), 1).then(() => order.push("short"))]);
    expect(order).toEqual(["short", "long"]);
    await simulator.stop();
  });
});
