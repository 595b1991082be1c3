import { request as httpRequest, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type ErrorBody, errorBodySchema, MAX_SCENARIO_BYTES } from "#shared/api/errors.ts";
import { scenarioListResponse } from "#shared/api/scenarios.ts";
import { bodyOf, type Harness, PASSWORD, SLOW, scenarioNamed, startHarness } from "./harness.ts";

let harness: Harness;
beforeAll(async () => {
  harness = await startHarness();
}, SLOW);
afterAll(() => harness?.close());

const path = () => `/api/teams/${harness.team.id}/scenarios`;
const post = (body: string | object) => harness.people.engineer.agent.post(path()).set("Content-Type", "application/json").send(body);
const errorOf = (response: { body: unknown }): ErrorBody["error"] => bodyOf(errorBodySchema, response).error;
/** A good scenario with one value replaced. */
const set = (keys: (string | number)[], value: unknown): object => {
  const draft: unknown = scenarioNamed("Bad");
  const parent = keys.slice(0, -1).reduce((at, key) => (at as Record<string | number, unknown>)[key], draft);
  (parent as Record<string | number, unknown>)[keys[keys.length - 1]] = value;
  return { scenario: draft };
};

describe("a body that is not JSON", () => {
  it.each([
    ["NaN", '{"scenario": {"name": NaN}}', 1, 23],
    ["Infinity", '{"scenario":\n  -Infinity}', 2, 3],
    ["a comma too many", '{"scenario": {},}', 1, 17],
    ["nothing closed", '{"scenario": {', 1, 15],
    ["an empty text", " ", 1, 2],
  ])("is refused with the place: %s", async (_what, text, line, column) => {
    const error = errorOf(await post(text).expect(400));
    expect(error.code).toBe("not-json");
    expect(error.position).toMatchObject({ line, column });
    expect(error.message).toContain(`line ${line}, column ${column}`);
  });

  it("is refused when nothing was sent", async () => {
    expect(errorOf(await post("").expect(400)).code).toBe("request-invalid");
  });

  it("is refused as a form or as text", async () => {
    const { agent } = harness.people.engineer;
    expect(errorOf(await agent.post(path()).type("form").send("scenario=1").expect(415)).code).toBe("not-json-type");
    expect(errorOf(await agent.post(path()).type("text").send("{}").expect(415)).code).toBe("not-json-type");
  });

  it("is refused when nested deeper than anything could mean", async () => {
    const error = errorOf(await post(`{"scenario": ${"[".repeat(50_000)}${"]".repeat(50_000)}}`).expect(400));
    expect(error.message).toContain("nested");
  });
});

describe("a scenario that breaks the format", () => {
  it.each([
    ["an impossible mass", set(["loops", 0, "plant", "cartMassKg"], -1), "loops[0].plant.cartMassKg", /Cart mass is -1 kg; permitted .+ kg/],
    ["an unknown field", set(["loops", 0, "plant", "colour"], "red"), "loops[0].plant.colour", /not a field/],
    ["a field of another kind", set(["round", "hops"], "three"), "round.hops", /has to be a number, found "three"; permitted 1 to 20/],
    ["a number that is too large for a number", set(["round", "periodS"], 1e300), "round.periodS", /permitted 0.001 to 10 s/],
    ["a fraction where whole numbers count", set(["round", "hops"], 2.5), "round.hops", /whole number, found 2.5/],
    ["another format", set(["format"], "something"), "format", /permitted/],
    ["a later version", set(["version"], 2), "version", /permitted/],
    ["an unknown kind of plant", set(["loops", 0, "plant", "type"], "rocket"), "loops[0].plant.type", /rocket/],
    ["no name", set(["name"], "  "), "name", /at least 1/],
  ])("is refused by field, value and permitted range: %s", async (_what, body, field, message) => {
    const error = errorOf(await post(body).expect(422));
    expect(error.code).toBe("scenario-invalid");
    expect(error.issues?.map((issue) => issue.path)).toContain(field);
    expect(error.issues?.find((issue) => issue.path === field)?.message).toMatch(message);
  });

  it("names every bad field, and of very many the first hundred", async () => {
    const two = errorOf(await post(set(["round"], { ...scenarioNamed("Bad").round, hops: 99, transmissions: 0 })).expect(422));
    expect(two.issues?.map((issue) => issue.path)).toEqual(["round.hops", "round.transmissions"]);
    const many = errorOf(await post(set(["losses", "process"], { type: "given", measurement: Array(20_000).fill(7), command: [] })).expect(422));
    expect(many.issues).toHaveLength(100);
    expect(many.message).toContain("And 19999 more.");
  });

  it("leaves no trace", async () => {
    const before = bodyOf(scenarioListResponse, await harness.people.engineer.agent.get(path())).total;
    await post(set(["round", "hops"], 99)).expect(422);
    expect(bodyOf(scenarioListResponse, await harness.people.engineer.agent.get(path())).total).toBe(before);
  });

  it.each([
    ["fields around it that are unknown", { scenario: scenarioNamed("x"), owner: "me" }, "owner"],
    ["a note that is too long", { scenario: scenarioNamed("x"), note: "n".repeat(501) }, "note"],
    ["an array around it", [], ""],
  ])("is refused for %s", async (_what, body, field) => {
    const error = errorOf(await post(body).expect(400));
    expect(error.code).toBe("request-invalid");
    expect(error.issues?.[0].path).toBe(field);
  });

  it("is refused with a reason when a text cannot be stored", async () => {
    const { agent } = harness.people.engineer;
    expect(errorOf(await post({ scenario: scenarioNamed("zero \u0000 byte") }).expect(400)).message).toContain("U+0000");
    expect(errorOf(await agent.get(`${path()}?search=%00`).expect(400)).message).toContain("U+0000");
  });

  it("does not take over what is hidden in __proto__", async () => {
    const text = JSON.stringify({ scenario: scenarioNamed("Proto") }).replace('"format"', '"__proto__": {"mayEdit": true}, "format"');
    expect(errorOf(await post(text).expect(422)).issues?.[0].path).toBe("__proto__");
  });
});

describe("a body that is too large", () => {
  let server: Server;
  let cookie: string;
  beforeAll(async () => {
    server = harness.express.listen(0, "127.0.0.1");
    await new Promise((resolve) => server.once("listening", resolve));
    const response = await harness.people.engineer.agent.post("/api/session").send({ email: harness.people.engineer.email, password: PASSWORD });
    cookie = response.headers["set-cookie"][0].split(";")[0];
  });
  afterAll(() => new Promise((resolve) => server.close(resolve)));

  /** Sent by hand, so that a connection cut off before the answer would be seen. */
  const send = (bytes: number, chunked: boolean) =>
    new Promise<{ status: number; body: unknown }>((resolve, reject) => {
      const { port } = server.address() as AddressInfo;
      const length: Record<string, string> = chunked ? {} : { "Content-Length": String(bytes) };
      const headers = { "Content-Type": "application/json", Cookie: cookie, ...length };
      const outgoing = httpRequest({ host: "127.0.0.1", port, path: path(), method: "POST", headers }, (incoming) => {
        const parts: Buffer[] = [];
        incoming.on("data", (part: Buffer) => parts.push(part));
        incoming.on("end", () => resolve({ status: incoming.statusCode ?? 0, body: JSON.parse(Buffer.concat(parts).toString()) }));
      });
      outgoing.on("error", reject);
      const start = '{"scenario": {"description": "';
      outgoing.write(start);
      outgoing.write("x".repeat(bytes - start.length - 3));
      outgoing.end('"}}');
    });

  it.each([
    ["10 MB", 10_000_000, false, "10.0 MB"],
    ["10 MB of unknown length", 10_000_000, true, "10.0 MB"],
    ["40 MB", 40_000_000, false, "40.0 MB"],
  ])("is answered with both sizes: %s", async (_what, bytes, chunked, said) => {
    const { status, body } = await send(bytes, chunked);
    expect(status).toBe(413);
    const { error } = errorBodySchema.parse(body);
    expect(error.code).toBe("too-large");
    expect(error.size).toEqual({ bytes, permittedBytes: MAX_SCENARIO_BYTES });
    expect(error.message).toContain(said);
    expect(error.message).toContain("5.0 MB");
  });

  it("is answered also when it never says its length", async () => {
    const { status, body } = await send(20_000_000, true);
    expect(status).toBe(413);
    expect(errorBodySchema.parse(body).error).toMatchObject({ code: "too-large", size: { bytes: null } });
  });

  it("is not asked of scenarios just below the limit", async () => {
    const { status, body } = await send(MAX_SCENARIO_BYTES, false);
    expect(status).toBe(422);
    expect(errorBodySchema.parse(body).error.code).toBe("scenario-invalid");
  });

  it("is refused much earlier where no scenario is expected", async () => {
    const response = await harness.people.engineer.agent.post("/api/session").send({ email: "x".repeat(200_000), password: "x" });
    expect(response.status).toBe(413);
    expect(errorOf(response).message).toContain("0.10 MB");
  });
});
