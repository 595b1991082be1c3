/** Every route of a team, as every role, signed out, from outside and with another team's ids: from one table. */
import supertest from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { errorBodySchema } from "#shared/api/errors.ts";
import { uploadLogParameters, uploadLogResponse } from "#shared/api/logs.ts";
import { ROLES, type Role } from "#shared/api/permissions.ts";
import { uploadPictureResponse } from "#shared/api/pictures.ts";
import type { ScenarioResponse } from "#shared/api/scenarios.ts";
import { floorSchema } from "#shared/scenario/floor-schema.ts";
import { type Agent, bodyOf, createScenario, type Harness, SLOW, scenarioNamed, startHarness } from "./harness.ts";
import { png } from "./pictures.ts";
import { csvText, MAPPING } from "./reception-csv.ts";

interface Ids {
  team: string;
  scenario: string;
  run: string;
  log: string;
  picture: string;
}
interface Line {
  route: string;
  path: (ids: Ids) => string;
  body?: object;
  file?: { type: string; bytes: Buffer };
  /** Status for who may; who may not gets 403. */
  status: number;
  roles: readonly Role[];
}

const makers: Role[] = ["engineer", "reviewer", "administrator"];
const scenario = scenarioNamed("Another");
const LOG = {
  path: `/logs?${new URLSearchParams(uploadLogParameters({ name: "Hall 2", fileName: "", mapping: MAPPING }))}`,
  file: { type: "text/csv", bytes: Buffer.from(csvText(20)) },
};
const PICTURE = { path: "/pictures?name=hall.png", file: { type: "image/png", bytes: png(40, 20) } };
const LINES: Line[] = [
  { route: "get /scenarios", path: () => "/scenarios", status: 200, roles: ROLES },
  { route: "post /scenarios", path: () => "/scenarios", body: { scenario }, status: 201, roles: makers },
  { route: "get /scenarios/:id", path: (ids) => `/scenarios/${ids.scenario}`, status: 200, roles: ROLES },
  { route: "patch /scenarios/:id", path: (ids) => `/scenarios/${ids.scenario}`, body: { archived: false }, status: 200, roles: makers },
  // Refused because it is not archived, which is told only to those who may.
  { route: "delete /scenarios/:id", path: (ids) => `/scenarios/${ids.scenario}`, status: 409, roles: makers },
  { route: "post /scenarios/:id/duplicate", path: (ids) => `/scenarios/${ids.scenario}/duplicate`, body: {}, status: 201, roles: makers },
  { route: "get /scenarios/:id/revisions", path: (ids) => `/scenarios/${ids.scenario}/revisions`, status: 200, roles: ROLES },
  // Refused as a conflict, which is told only to those who may.
  {
    route: "post /scenarios/:id/revisions",
    path: (ids) => `/scenarios/${ids.scenario}/revisions`,
    body: { baseRevision: 99, scenario },
    status: 409,
    roles: makers,
  },
  { route: "get /scenarios/:id/revisions/:number", path: (ids) => `/scenarios/${ids.scenario}/revisions/1`, status: 200, roles: ROLES },
  { route: "get /scenarios/:id/runs", path: (ids) => `/scenarios/${ids.scenario}/runs`, status: 200, roles: ROLES },
  { route: "post /scenarios/:id/runs", path: (ids) => `/scenarios/${ids.scenario}/runs`, body: { revision: 1 }, status: 200, roles: makers },
  { route: "get /runs/:runId", path: (ids) => `/runs/${ids.run}`, status: 200, roles: ROLES },
  { route: "get /runs/:runId/series", path: (ids) => `/runs/${ids.run}/series`, status: 200, roles: ROLES },
  { route: "get /logs", path: () => "/logs", status: 200, roles: ROLES },
  // The same file again, which is told only to those who may.
  { route: "post /logs", path: () => LOG.path, file: LOG.file, status: 200, roles: makers },
  { route: "get /logs/:id", path: (ids) => `/logs/${ids.log}`, status: 200, roles: ROLES },
  { route: "patch /logs/:id", path: (ids) => `/logs/${ids.log}`, body: { name: "Renamed" }, status: 200, roles: makers },
  // Refused because a revision names it, which is told only to those who may.
  { route: "delete /logs/:id", path: (ids) => `/logs/${ids.log}`, status: 409, roles: makers },
  { route: "get /logs/:id/original", path: (ids) => `/logs/${ids.log}/original`, status: 200, roles: ROLES },
  { route: "get /pictures", path: () => "/pictures", status: 200, roles: ROLES },
  { route: "post /pictures", path: () => PICTURE.path, file: PICTURE.file, status: 200, roles: makers },
  { route: "get /pictures/:id", path: (ids) => `/pictures/${ids.picture}`, status: 200, roles: ROLES },
  { route: "delete /pictures/:id", path: (ids) => `/pictures/${ids.picture}`, status: 409, roles: makers },
  { route: "get /members", path: () => "/members", status: 200, roles: ROLES },
  { route: "get /activity", path: () => "/activity", status: 200, roles: ["administrator"] },
];
const methodOf = ({ route }: Line) => route.split(" ")[0] as "get" | "post" | "patch" | "delete";
const hasOwnIds = (line: Line) => line.path({ team: "", scenario: "id!", run: "id!", log: "id!", picture: "id!" }).includes("id!");

let harness: Harness;
let own: Ids;

beforeAll(async () => {
  harness = await startHarness();
  const { agent } = harness.people.engineer;
  const sent = (path: string, { type, bytes }: { type: string; bytes: Buffer }) =>
    agent.post(`/api/teams/${harness.team.id}${path}`).set("Content-Type", type).send(bytes).expect(201);
  const log = bodyOf(uploadLogResponse, await sent(LOG.path, LOG.file)).log.id;
  const picture = bodyOf(uploadPictureResponse, await sent(PICTURE.path, PICTURE.file)).picture.id;
  const using = scenarioNamed("Balancer", (draft) => {
    const link = { link: "1 > 3", runs: [10_000] };
    draft.losses.process = { type: "replay", log: { id: log, name: "Hall 2" }, measurement: link, command: link, then: "repeat" };
    draft.floor = floorSchema.parse({ widthM: 40, depthM: 20, picture: { id: picture, metresPerPixel: 1 } });
  });
  const created: ScenarioResponse = await createScenario(harness, using);
  own = { team: harness.team.id, scenario: created.id, run: created.latestRun?.id ?? "", log, picture };
}, SLOW);
afterAll(() => harness?.close());

const ask = (agent: Agent | ReturnType<typeof supertest>, line: Line, ids: Ids) => {
  const request = agent[methodOf(line)](`/api/teams/${ids.team}${line.path(ids)}`);
  if (line.file) return request.set("Content-Type", line.file.type).send(line.file.bytes);
  return line.body ? request.send(line.body) : request;
};

describe("routes of a team", () => {
  it("are all in this table", () => {
    expect(LINES.map((line) => line.route)).toEqual(harness.app.teamRoutes.map(({ method, path }) => `${method} ${path}`));
  });

  const asRoles = LINES.flatMap((line) =>
    ROLES.map((role) => ({ line, role, route: line.route, expected: line.roles.includes(role) ? line.status : 403 })),
  );
  it.each(asRoles)("answer $route of the $role with $expected", async ({ line, role, expected }) => {
    const response = await ask(harness.people[role].agent, line, own);
    expect(response.status).toBe(expected);
    if (expected === 403) expect(bodyOf(errorBodySchema, response).error.code).toBe("not-permitted");
  });

  it.each(LINES)("answer $route with 401 when nobody is signed in", async (line) => {
    const response = await ask(supertest(harness.express), line, own);
    expect(response.status).toBe(401);
    expect(bodyOf(errorBodySchema, response).error.code).toBe("signed-out");
  });

  it.each(LINES)("answer $route with 404 to an engineer of another team, who has every id", async (line) => {
    const response = await ask(harness.stranger.agent, line, own);
    expect(response.status).toBe(404);
    expect(bodyOf(errorBodySchema, response).error.code).toBe("not-found");
  });

  it.each(LINES.filter(hasOwnIds))("answer $route with 404 when the ids of another team are asked for inside the own one", async (line) => {
    const response = await ask(harness.stranger.agent, line, { ...own, team: harness.otherTeam.id });
    expect(response.status).toBe(404);
  });

  it.each(LINES)("answer $route alike for a team that never was and for an id that is none", async (line) => {
    const { agent } = harness.people.administrator;
    const foreign = await ask(harness.stranger.agent, line, own);
    const nowhere = await ask(agent, line, { ...own, team: "0b7c6a52-2f0e-4d3e-9a51-3f0d2a7d9f11" });
    const nonsense = await ask(agent, line, { ...own, team: "1'; drop table teams" });
    for (const response of [nowhere, nonsense]) {
      expect(response.status).toBe(404);
      expect(response.body).toEqual(foreign.body);
    }
  });

  it.each(LINES.filter(hasOwnIds))("answer $route with 404 when the id is no id at all", async (line) => {
    const response = await ask(harness.people.administrator.agent, line, { ...own, scenario: "..%2f..", run: "7", log: "0x1", picture: "%00" });
    expect(response.status).toBe(404);
  });

  it("say which methods there are", async () => {
    const response = await harness.people.engineer.agent.put(`/api/teams/${own.team}/scenarios`).send({});
    expect(response.status).toBe(405);
    expect(response.headers.allow).toBe("GET, POST");
    await harness.stranger.agent.put(`/api/teams/${own.team}/scenarios`).send({}).expect(404);
  });
});

describe("an address of the API that is none", () => {
  it("is answered as JSON with 404, not with the page", async () => {
    const response = await supertest(harness.express).get("/api/teapots");
    expect(response.status).toBe(404);
    expect(bodyOf(errorBodySchema, response).error.code).toBe("not-found");
  });

  it("is answered with 404 when it cannot even be decoded", async () => {
    const { agent } = harness.people.engineer;
    for (const path of ["/api/teams/%E0%A4%A/scenarios", `/api/teams/${own.team}/scenarios/%E0%A4%A`]) {
      expect(bodyOf(errorBodySchema, await agent.get(path).expect(404)).error.code).toBe("not-found");
    }
  });
});

describe("an address outside the API", () => {
  it("is answered with 404 when it is an asset that is gone", async () => {
    const response = await supertest(harness.express).get("/assets/main-of-last-week.js");
    expect(response.status).toBe(404);
  });
});
