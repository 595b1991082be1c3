import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { revisions, runs, scenarios } from "#server/db/schema.ts";
import { errorBodySchema } from "#shared/api/errors.ts";
import { deleteScenarioResponse, scenarioListResponse, scenarioResponse } from "#shared/api/scenarios.ts";
import { activityListResponse, memberListResponse } from "#shared/api/teams.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { bodyOf, createScenario, type Harness, SLOW, scenarioNamed, startHarness, withoutRoom } from "./harness.ts";

let harness: Harness;
beforeAll(async () => {
  harness = await startHarness();
}, SLOW);
afterAll(() => harness?.close());

const base = () => `/api/teams/${harness.team.id}/scenarios`;
const list = async (query = "", role: "trainee" | "engineer" = "engineer") =>
  bodyOf(scenarioListResponse, await harness.people[role].agent.get(`${base()}?${query}`).expect(200));
const names = async (query: string) => (await list(query)).items.map(({ name }) => name);

describe("the table of scenarios", () => {
  beforeAll(async () => {
    const { engineer, reviewer, administrator } = harness.people;
    await createScenario(harness, scenarioNamed("Rig 10"), engineer);
    await createScenario(harness, scenarioNamed("rig 2"), reviewer);
    await createScenario(harness, scenarioNamed("100 % loss_test"), engineer);
    await createScenario(harness, scenarioNamed("Élan"), administrator);
    const crane = structuredClone(TEMPLATES[1].scenario);
    await createScenario(harness, { ...crane, name: "Quay crane" }, reviewer);
    await createScenario(harness, scenarioNamed("Too short a round", withoutRoom), engineer);
    const old = await createScenario(harness, scenarioNamed("Old rig"), engineer);
    await engineer.agent.patch(`${base()}/${old.id}`).send({ archived: true }).expect(200);
    await harness.connection.db
      .update(scenarios)
      .set({ changedAt: new Date(Date.now() - 3 * 86_400_000) })
      .where(eq(scenarios.name, "Rig 10"));
  }, SLOW);

  it("shows what is in use, newest first, with everything a line needs", async () => {
    const { items, total, totalUnfiltered, archivedTotal, owners, plants } = await list();
    expect(items.map(({ name }) => name)).toEqual(["Too short a round", "Quay crane", "Élan", "100 % loss_test", "rig 2", "Rig 10"]);
    expect({ total, totalUnfiltered, archivedTotal }).toEqual({ total: 6, totalUnfiltered: 6, archivedTotal: 1 });
    expect(owners.map(({ name }) => name)).toEqual(["The administrator", "The engineer", "The reviewer"]);
    expect(plants).toEqual(["pendulum-on-cart", "overhead-crane"]);
    expect(items[1].plant).toEqual({ kind: "overhead-crane", type: "pendulum-on-cart", rest: "hanging" });
    expect(items[1].round.slots.map(({ message }) => message)).toEqual(["beacon", "measurement", "command"]);
    expect(items[1].delivery?.ratio).toBeGreaterThan(0.9);
    expect(items[1].verdict.sentence).not.toBe("");
  });

  it("says of a round that is too long that it does not fit, and has no run", async () => {
    const [item] = (await list("verdict=does-not-fit")).items;
    expect(item).toMatchObject({ name: "Too short a round", delivery: null, verdict: { state: "does-not-fit", word: "Does not fit" } });
    expect(item.verdict.sentence).toContain("The round does not fit");
    expect(item.round.fits).toBe(false);
  });

  it.each([
    ["search=rig", ["rig 2", "Rig 10"]],
    ["search=RIG%2010", ["Rig 10"]],
    ["search=%25", ["100 % loss_test"]],
    ["search=_", ["100 % loss_test"]],
    ["search=%5C", []],
    ["search='", []],
    ["search=elan", ["Élan"]],
    ["search=%C3%89LAN", ["Élan"]],
    ["search=test%20100", ["100 % loss_test"]],
    ["search=overhead", ["Quay crane"]],
    ["plant=overhead-crane", ["Quay crane"]],
    ["plant=state-space", []],
    ["changed=day&search=rig", ["rig 2"]],
    ["changed=week&search=rig", ["rig 2", "Rig 10"]],
    ["archived=only", ["Old rig"]],
    ["archived=all&search=rig", ["Old rig", "rig 2", "Rig 10"]],
  ])("finds by %s", async (query, expected) => {
    expect(await names(query)).toEqual(expected);
  });

  it("finds what somebody owns", async () => {
    const { reviewer } = harness.people;
    expect(await names(`owner=${reviewer.id}`)).toEqual(["Quay crane", "rig 2"]);
    const filtered = await list(`owner=${reviewer.id}&search=rig`);
    expect({ total: filtered.total, of: filtered.totalUnfiltered }).toEqual({ total: 1, of: 6 });
  });

  it.each([
    ["sort=name&direction=ascending", ["100 % loss_test", "Élan", "Quay crane", "rig 2", "Rig 10", "Too short a round"]],
    ["sort=name&direction=descending", ["Too short a round", "Rig 10", "rig 2", "Quay crane", "Élan", "100 % loss_test"]],
    ["sort=period&direction=ascending", ["Too short a round", "100 % loss_test", "Élan", "rig 2", "Rig 10", "Quay crane"]],
    ["sort=owner&direction=ascending", ["Élan", "100 % loss_test", "Rig 10", "Too short a round", "Quay crane", "rig 2"]],
    ["sort=plant&direction=ascending", ["Quay crane", "100 % loss_test", "Élan", "rig 2", "Rig 10", "Too short a round"]],
    ["sort=changed&direction=ascending", ["Rig 10", "rig 2", "100 % loss_test", "Élan", "Quay crane", "Too short a round"]],
  ])("sorts by %s", async (query, expected) => {
    expect(await names(query)).toEqual(expected);
  });

  it("puts what has no delivery last, whichever way it is sorted", async () => {
    for (const direction of ["ascending", "descending"])
      expect((await names(`sort=delivery&direction=${direction}`)).at(-1)).toBe("Too short a round");
    const ratios = (await list("sort=delivery&direction=ascending")).items.flatMap(({ delivery }) => delivery?.ratio ?? []);
    expect(ratios).toEqual([...ratios].sort((a, b) => a - b));
  });

  it("sorts verdicts by how good they are", async () => {
    const order = ["holds", "near", "crosses", "not-decided", "does-not-fit"];
    const states = (await list("sort=verdict&direction=ascending")).items.map(({ verdict }) => order.indexOf(verdict.state));
    expect(states).toEqual([...states].sort((a, b) => a - b));
  });

  it("shows every scenario on exactly one page", async () => {
    const all = await names("sort=plant&pageSize=100");
    const paged: string[] = [];
    for (const page of [1, 2, 3, 4]) {
      const part = await list(`sort=plant&pageSize=2&page=${page}`);
      expect(part).toMatchObject({ total: 6, page, pageSize: 2 });
      paged.push(...part.items.map(({ name }) => name));
    }
    expect(paged).toEqual(all);
  });

  it("tells each person whether they may edit", async () => {
    expect((await list("", "engineer")).items.every(({ mayEdit }) => mayEdit)).toBe(true);
    expect((await list("", "trainee")).items.some(({ mayEdit }) => mayEdit)).toBe(false);
  });

  it("shows another team nothing of it", async () => {
    const response = await harness.stranger.agent.get(`/api/teams/${harness.otherTeam.id}/scenarios?archived=all`).expect(200);
    expect(bodyOf(scenarioListResponse, response)).toMatchObject({
      items: [],
      total: 0,
      totalUnfiltered: 0,
      archivedTotal: 0,
      owners: [],
      plants: [],
    });
  });

  it.each(["page=0", "pageSize=101", "pageSize=x", "sort=colour", "owner=me", "verdict=fine", "colour=red", "page=1&page=2"])(
    "refuses ?%s by name",
    async (query) => {
      const { error } = bodyOf(errorBodySchema, await harness.people.engineer.agent.get(`${base()}?${query}`).expect(400));
      expect(error.code).toBe("request-invalid");
      expect(error.issues?.[0].path).toBe(query.split("=")[0]);
    },
  );
});

describe("a scenario", () => {
  it("is created with revision 1, a note and its first run", async () => {
    const scenario = scenarioNamed("Fresh");
    const response = await harness.people.engineer.agent.post(base()).send({ scenario, note: "  First set-up " }).expect(201);
    const created = bodyOf(scenarioResponse, response);
    expect(created).toMatchObject({ name: "Fresh", revision: 1, owner: { name: "The engineer" }, archivedAt: null });
    expect(created.latest).toMatchObject({ number: 1, note: "First set-up", author: { name: "The engineer" } });
    expect(created.latest.scenario).toEqual(scenario);
    expect(created.latestRun).toMatchObject({ revision: 1, seed: scenario.run.seed, verdict: created.verdict });
    const opened = await harness.people.trainee.agent.get(`${base()}/${created.id}`).expect(200);
    expect(bodyOf(scenarioResponse, opened)).toEqual({ ...created, mayEdit: false });
  });

  it("keeps what was typed to the last digit and in its order", async () => {
    const scenario = scenarioNamed("Exact", (draft) => {
      draft.description = "Zeile 1\nline 2 “ü” 🐚";
      draft.run.relativeTolerance = 1.23456789012345e-9;
      draft.round.periodS = 0.1 + 0.2 - 0.275;
    });
    const created = await createScenario(harness, scenario);
    const opened = bodyOf(scenarioResponse, await harness.people.engineer.agent.get(`${base()}/${created.id}`).expect(200));
    expect(JSON.stringify(opened.latest.scenario)).toBe(JSON.stringify(scenario));
  });

  it("fills in what a file may leave out", async () => {
    const { description: _left, pushes: _out, ...rest } = scenarioNamed("Short file");
    const created = bodyOf(scenarioResponse, await harness.people.engineer.agent.post(base()).send({ scenario: rest }).expect(201));
    expect(created.latest.scenario).toMatchObject({ description: "", pushes: [] });
    expect(created.latest.note).toBe("");
  });

  it("is copied with the name of a copy, by the one who copies, again and again", async () => {
    const original = await createScenario(harness, scenarioNamed("Original"));
    const { agent } = harness.people.reviewer;
    const copy = bodyOf(scenarioResponse, await agent.post(`${base()}/${original.id}/duplicate`).expect(201));
    expect(copy).toMatchObject({ name: "Copy of Original", revision: 1, owner: { name: "The reviewer" } });
    expect(copy.latest.note).toBe("Copied from Original, revision 1");
    expect(copy.latest.scenario).toEqual({ ...original.latest.scenario, name: "Copy of Original" });
    expect(copy.latestRun?.id).not.toBe(original.latestRun?.id);
    const again = bodyOf(scenarioResponse, await agent.post(`${base()}/${original.id}/duplicate`).send({}).expect(201));
    expect(again.name).toBe("Copy of Original (2)");
    const named = await agent.post(`${base()}/${original.id}/duplicate`).send({ name: "Mine", revision: 1 }).expect(201);
    expect(bodyOf(scenarioResponse, named).name).toBe("Mine");
    await agent.post(`${base()}/${original.id}/duplicate`).send({ revision: 7 }).expect(404);
  });

  it("is deleted by a client that announces JSON and sends none", async () => {
    const { id } = await createScenario(harness, scenarioNamed("Empty body"));
    const { agent } = harness.people.engineer;
    await agent.patch(`${base()}/${id}`).send({ archived: true }).expect(200);
    await agent.delete(`${base()}/${id}`).set("Content-Type", "application/json").send("").expect(200);
  });

  it("is archived, restored, and deleted only when archived, with revisions and runs", async () => {
    const { id } = await createScenario(harness, scenarioNamed("Short-lived"));
    const { agent } = harness.people.engineer;
    const path = `${base()}/${id}`;
    expect(bodyOf(errorBodySchema, await agent.delete(path).expect(409)).error.code).toBe("scenario-not-archived");
    expect(bodyOf(scenarioResponse, await agent.patch(path).send({ archived: true }).expect(200)).archivedAt).not.toBeNull();
    const save = { baseRevision: 1, scenario: scenarioNamed("Short-lived") };
    expect(bodyOf(errorBodySchema, await agent.post(`${path}/revisions`).send(save).expect(409)).error.code).toBe("scenario-archived");
    expect(bodyOf(errorBodySchema, await agent.post(`${path}/runs`).send({ revision: 1, seed: 77 }).expect(409)).error.code).toBe(
      "scenario-archived",
    );
    expect(bodyOf(scenarioResponse, await agent.patch(path).send({ archived: false }).expect(200)).archivedAt).toBeNull();
    await agent.patch(path).send({ archived: true }).expect(200);
    bodyOf(deleteScenarioResponse, await agent.delete(path).expect(200));
    const { db } = harness.connection;
    expect(await db.$count(revisions, eq(revisions.scenarioId, id))).toBe(0);
    expect(await db.$count(runs, eq(runs.scenarioId, id))).toBe(0);
  });

  it("tells the team who deleted it, and nobody else anything", async () => {
    const { id } = await createScenario(harness, scenarioNamed("Gone rig"));
    const path = `${base()}/${id}`;
    await harness.people.reviewer.agent.patch(path).send({ archived: true }).expect(200);
    await harness.people.reviewer.agent.delete(path).expect(200);
    const { error } = bodyOf(errorBodySchema, await harness.people.trainee.agent.get(path).expect(410));
    expect(error).toMatchObject({ code: "scenario-deleted", deleted: { name: "Gone rig", by: "The reviewer" } });
    await harness.people.engineer.agent
      .post(`${path}/revisions`)
      .send({ baseRevision: 1, scenario: scenarioNamed("x") })
      .expect(410);
    await harness.stranger.agent.get(path).expect(404);
    await harness.stranger.agent.get(`/api/teams/${harness.otherTeam.id}/scenarios/${id}`).expect(404);
  });
});

describe("the team", () => {
  it("lists its members with their roles, without mail addresses", async () => {
    const response = await harness.people.trainee.agent.get(`/api/teams/${harness.team.id}/members`).expect(200);
    const { members } = bodyOf(memberListResponse, response);
    expect(members.map(({ name, roles }) => [name, ...roles])).toEqual([
      ["The administrator", "administrator"],
      ["The engineer", "engineer"],
      ["The reviewer", "reviewer"],
      ["The trainee", "trainee"],
    ]);
  });

  it("has a record of who did what when, newest first, by pages", async () => {
    const { agent } = harness.people.administrator;
    const { id } = await createScenario(harness, scenarioNamed("Watched"), harness.people.reviewer);
    await agent.patch(`${base()}/${id}`).send({ archived: true }).expect(200);
    await agent.post(`${base()}/${id}/runs`).send({ revision: 1, seed: 8 }).expect(409);
    await agent.patch(`${base()}/${id}`).send({ archived: false }).expect(200);
    await agent.post(`${base()}/${id}/runs`).send({ revision: 1, seed: 8 }).expect(201);
    const path = `/api/teams/${harness.team.id}/activity`;
    const { items, total } = bodyOf(activityListResponse, await agent.get(`${path}?pageSize=4`).expect(200));
    expect(items.map(({ what, who, subject }) => [what, who.name, subject?.name])).toEqual([
      ["run-kept", "The administrator", "Watched"],
      ["scenario-restored", "The administrator", "Watched"],
      ["scenario-archived", "The administrator", "Watched"],
      ["scenario-created", "The reviewer", "Watched"],
    ]);
    const next = bodyOf(activityListResponse, await agent.get(`${path}?pageSize=4&page=2`).expect(200));
    expect(next.total).toBe(total);
    expect(next.items.some(({ id: other }) => items.some((item) => item.id === other))).toBe(false);
    const theirs = bodyOf(activityListResponse, await agent.get(`${path}?who=${harness.people.reviewer.id}&what=scenario-created`).expect(200));
    expect(new Set(theirs.items.map(({ who }) => who.name))).toEqual(new Set(["The reviewer"]));
  });
});
