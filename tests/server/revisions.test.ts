import { eq, sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { activity, revisions, runSeries, runs } from "#server/db/schema.ts";
import { errorBodySchema } from "#shared/api/errors.ts";
import { revisionDetailSchema, revisionListResponse } from "#shared/api/revisions.ts";
import { scenarioResponse } from "#shared/api/scenarios.ts";
import { bodyOf, createScenario, type Harness, type Person, SLOW, scenarioNamed, startHarness, withoutRoom } from "./harness.ts";

let harness: Harness;
beforeAll(async () => {
  harness = await startHarness();
}, SLOW);
afterAll(() => harness?.close());

const path = (id: string) => `/api/teams/${harness.team.id}/scenarios/${id}`;
const save = (by: Person, id: string, baseRevision: number, name: string, note = "") =>
  by.agent.post(`${path(id)}/revisions`).send({ baseRevision, scenario: scenarioNamed(name), note });

describe("saving a revision", () => {
  it("makes the next one, with its author, note and run, and leaves the first as it was", async () => {
    const { engineer, reviewer } = harness.people;
    const first = await createScenario(harness, scenarioNamed("Balancer"), engineer);
    const changed = scenarioNamed("Balancer, quieter", (scenario) => {
      scenario.losses.process = { type: "none" };
      scenario.losses.outages = [];
    });
    const response = await reviewer.agent
      .post(`${path(first.id)}/revisions`)
      .send({ baseRevision: 1, scenario: changed, note: "Without loss" })
      .expect(201);
    const saved = bodyOf(scenarioResponse, response);
    expect(saved).toMatchObject({ name: "Balancer, quieter", revision: 2, owner: { name: "The engineer" }, delivery: { lost: 0, ratio: 1 } });
    expect(saved.latest).toMatchObject({ number: 2, note: "Without loss", author: { name: "The reviewer" } });
    expect(new Date(saved.changedAt).getTime()).toBeGreaterThan(new Date(first.changedAt).getTime());
    const old = bodyOf(revisionDetailSchema, await engineer.agent.get(`${path(first.id)}/revisions/1`).expect(200));
    expect(old.scenario).toEqual(first.latest.scenario);
  });

  it("keeps a draft that breaks a rule across fields, and says what is wrong instead of running it", async () => {
    const { engineer } = harness.people;
    const { id } = await createScenario(harness, scenarioNamed("Draft"));
    const draft = scenarioNamed("Draft", withoutRoom);
    const saved = bodyOf(
      scenarioResponse,
      await engineer.agent
        .post(`${path(id)}/revisions`)
        .send({ baseRevision: 1, scenario: draft })
        .expect(201),
    );
    expect(saved).toMatchObject({ revision: 2, latestRun: null, delivery: null, verdict: { state: "does-not-fit" } });
    const { items } = bodyOf(revisionListResponse, await engineer.agent.get(`${path(id)}/revisions`).expect(200));
    expect(items.map(({ number, verdict }) => [number, verdict.state === "does-not-fit"])).toEqual([
      [2, true],
      [1, false],
    ]);
    const { error } = bodyOf(
      errorBodySchema,
      await engineer.agent
        .post(`${path(id)}/runs`)
        .send({ revision: 2 })
        .expect(422),
    );
    expect(error.code).toBe("scenario-invalid");
    expect(error.issues?.[0].code).toBe("round-does-not-fit");
  });

  it("tells the second of two people who saved in the meantime, and loses neither", async () => {
    const { engineer, reviewer } = harness.people;
    const { id } = await createScenario(harness, scenarioNamed("Shared"));
    await save(engineer, id, 1, "Shared", "Stiffer").expect(201);
    const { error } = bodyOf(errorBodySchema, await save(reviewer, id, 1, "Shared, mine").expect(409));
    expect(error).toMatchObject({ code: "revision-conflict", latest: { number: 2, author: { name: "The engineer" }, note: "Stiffer" } });
    expect(error.message).toContain("The engineer saved revision 2");
    const over = bodyOf(scenarioResponse, await save(reviewer, id, 2, "Shared, mine").expect(201));
    expect(over.revision).toBe(3);
  });

  it("lets exactly one of many who save at the same moment win", async () => {
    const { id } = await createScenario(harness, scenarioNamed("Contested"));
    const people = Object.values(harness.people).filter((person) => person !== harness.people.trainee);
    const answers = await Promise.all(Array.from({ length: 9 }, (_, i) => save(people[i % people.length], id, 1, `Contested ${i}`)));
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409, 409, 409, 409, 409, 409, 409, 409]);
    for (const answer of answers.filter(({ status }) => status === 409)) {
      expect(bodyOf(errorBodySchema, answer).error.latest?.number).toBe(2);
    }
    const { db } = harness.connection;
    expect(await db.$count(revisions, eq(revisions.scenarioId, id))).toBe(2);
  });

  it("refuses a base that is no revision yet", async () => {
    const { id } = await createScenario(harness, scenarioNamed("Ahead"));
    await save(harness.people.engineer, id, 5, "Ahead").expect(409);
    const { error } = bodyOf(errorBodySchema, await save(harness.people.engineer, id, 0, "Ahead").expect(400));
    expect(error.issues?.[0].path).toBe("baseRevision");
  });
});

describe("the list of revisions", () => {
  it("comes by pages, newest first", async () => {
    const { engineer, reviewer } = harness.people;
    const { id } = await createScenario(harness, scenarioNamed("Long story"));
    for (let base = 1; base <= 4; base++) await save(base % 2 ? reviewer : engineer, id, base, `Long story ${base}`, `Step ${base}`).expect(201);
    const page = async (number: number) =>
      bodyOf(revisionListResponse, await engineer.agent.get(`${path(id)}/revisions?pageSize=2&page=${number}`).expect(200));
    const [first, second, third] = [await page(1), await page(2), await page(3)];
    expect([first, second, third].map(({ items }) => items.map(({ number, note }) => [number, note]))).toEqual([
      [
        [5, "Step 4"],
        [4, "Step 3"],
      ],
      [
        [3, "Step 2"],
        [2, "Step 1"],
      ],
      [[1, ""]],
    ]);
    expect(first.total).toBe(5);
    expect(first.items[0].author.name).toBe("The engineer");
  });

  it.each(["0", "-1", "1.5", "abc", "99", "1e9", "99999999999999999999"])("has no revision %s", async (number) => {
    const { id } = await createScenario(harness, scenarioNamed("Short story"));
    await harness.people.engineer.agent.get(`${path(id)}/revisions/${number}`).expect(404);
  });
});

describe("the record in the database", () => {
  it("refuses every change and every deletion, also from outside the server", async () => {
    const { db } = harness.connection;
    const { latestRun } = await createScenario(harness, scenarioNamed("For ever"));
    const refused = { cause: expect.objectContaining({ message: expect.stringContaining("never changes") }) };
    const kept = { cause: expect.objectContaining({ message: expect.stringContaining("is deleted only together with") }) };
    await expect(db.update(revisions).set({ note: "rewritten" })).rejects.toMatchObject(refused);
    await expect(db.update(runs).set({ verdict: "holds" })).rejects.toMatchObject(refused);
    await expect(db.update(runSeries).set({ bytes: Buffer.alloc(0) })).rejects.toMatchObject(refused);
    await expect(db.update(activity).set({ what: "run-kept" })).rejects.toMatchObject(refused);
    await expect(db.delete(revisions)).rejects.toMatchObject(kept);
    await expect(db.delete(runs)).rejects.toMatchObject(kept);
    await expect(db.delete(runSeries)).rejects.toMatchObject(kept);
    await expect(db.delete(activity)).rejects.toMatchObject(kept);
    expect(await db.$count(runs, eq(runs.id, latestRun?.id ?? ""))).toBe(1);
  });

  it("goes only with its whole team", async () => {
    const { db } = harness.connection;
    const before = await db.$count(revisions);
    expect(before).toBeGreaterThan(0);
    await expect(
      db.transaction(async (transaction) => {
        await transaction.execute(sql`delete from teams where id = ${harness.team.id}`);
        expect(await transaction.$count(revisions)).toBe(0);
        expect(await transaction.$count(activity, eq(activity.teamId, harness.team.id))).toBe(0);
        transaction.rollback();
      }),
    ).rejects.toThrow("Rollback");
    expect(await db.$count(revisions)).toBe(before);
  });
});
