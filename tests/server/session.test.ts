import { eq } from "drizzle-orm";
import supertest from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { memberships, sessions, users } from "#server/db/schema.ts";
import { hashPassword } from "#server/features/session/service.ts";
import { errorBodySchema } from "#shared/api/errors.ts";
import { demoResponse, sessionResponse } from "#shared/api/session.ts";
import { activityListResponse } from "#shared/api/teams.ts";
import { bodyOf, type Harness, PASSWORD, SLOW, startHarness } from "./harness.ts";

let harness: Harness;
beforeAll(async () => {
  harness = await startHarness();
}, SLOW);
afterAll(() => harness?.close());

const post = (body: object) => supertest(harness.express).post("/api/session").send(body);
const cookieOf = (response: { headers: Record<string, unknown> }) => String((response.headers["set-cookie"] as string[] | undefined)?.[0] ?? "");
const median = (values: number[]) => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)];

describe("signing in", () => {
  it("says who I am and in which teams, with a cookie that scripts cannot read", async () => {
    const response = await post({ email: "Engineer@Northquay.example ", password: PASSWORD }).expect(200);
    const session = bodyOf(sessionResponse, response);
    expect(session.user).toEqual({ id: harness.people.engineer.id, name: "The engineer", email: "engineer@northquay.example" });
    expect(session.memberships).toEqual([{ team: { id: harness.team.id, name: harness.team.name }, roles: ["engineer"] }]);
    const hours = (new Date(session.expiresAt ?? 0).getTime() - Date.now()) / 3_600_000;
    expect(hours).toBeGreaterThan(11.9);
    expect(hours).toBeLessThanOrEqual(12);
    expect(cookieOf(response)).toMatch(/HttpOnly/);
    expect(cookieOf(response)).toMatch(/SameSite=Lax/);
  });

  it("answers an unknown mail and a wrong password in the same words", async () => {
    const unknown = await post({ email: "nobody@northquay.example", password: PASSWORD });
    const wrong = await post({ email: "engineer@northquay.example", password: "wrong" });
    expect(unknown.status).toBe(401);
    expect(bodyOf(errorBodySchema, unknown).error.code).toBe("wrong-credentials");
    expect(wrong.status).toBe(401);
    expect(wrong.body).toEqual(unknown.body);
  });

  it("takes as long for an unknown mail as for a wrong password", async () => {
    const timed = async (email: string) => {
      const from = performance.now();
      await post({ email, password: "wrong" }).expect(401);
      return performance.now() - from;
    };
    const passwordHash = await hashPassword(PASSWORD);
    const known = ["first@northquay.example", "second@northquay.example"];
    await harness.connection.db.insert(users).values(known.map((email) => ({ email, name: email, passwordHash })));
    const unknown: number[] = [];
    const wrong: number[] = [];
    for (let i = 0; i < 7; i++) {
      unknown.push(await timed(`nobody-${i}@northquay.example`));
      wrong.push(await timed(known[i % 2]));
    }
    // Without the hashing an answer takes a twentieth of the time.
    expect(median(unknown)).toBeGreaterThan(0.4 * median(wrong));
    expect(median(wrong)).toBeGreaterThan(0.4 * median(unknown));
  });

  it("renews the session's id, so that one known before is worth nothing", async () => {
    const agent = supertest.agent(harness.express);
    const first = cookieOf(await agent.post("/api/session").send({ email: "trainee@northquay.example", password: PASSWORD }).expect(200));
    const second = cookieOf(await agent.post("/api/session").send({ email: "engineer@northquay.example", password: PASSWORD }).expect(200));
    expect(second.split(";")[0]).not.toBe(first.split(";")[0]);
    const old = await supertest(harness.express).get("/api/session").set("Cookie", first.split(";")[0]);
    expect(bodyOf(sessionResponse, old).user).toBeNull();
  });

  it("is slowed down after ten failures for one mail, known or not, and says for how long", async () => {
    for (const email of ["kim@nowhere.example", "stranger@saltmarsh.example"]) {
      for (let i = 0; i < 10; i++) await post({ email, password: "guess" }).expect(401);
      const response = await post({ email, password: PASSWORD });
      expect(response.status).toBe(429);
      const { error } = bodyOf(errorBodySchema, response);
      expect(error.code).toBe("too-many-attempts");
      expect(error.retryAfterS).toBeGreaterThan(800);
      expect(error.message).toContain("15 minutes");
      expect(response.headers["retry-after"]).toBe(String(error.retryAfterS));
    }
    await post({ email: "trainee@northquay.example", password: PASSWORD }).expect(200);
  });

  it.each([
    ["no password", { email: "a@b.example" }, "password"],
    ["a number as mail", { email: 7, password: "x" }, "email"],
    ["an unknown field", { email: "a@b.example", password: "x", admin: true }, "admin"],
  ])("is refused with the field's name for %s", async (_what, body, field) => {
    const { error } = bodyOf(errorBodySchema, await post(body).expect(400));
    expect(error.code).toBe("request-invalid");
    expect(error.issues?.map((issue) => issue.path)).toContain(field);
  });

  it("is told to the administrator of the team", async () => {
    await post({ email: "reviewer@northquay.example", password: PASSWORD }).expect(200);
    const response = await harness.people.administrator.agent.get(`/api/teams/${harness.team.id}/activity?what=signed-in`).expect(200);
    const { items } = bodyOf(activityListResponse, response);
    expect(items[0]).toMatchObject({ what: "signed-in", who: { name: "The reviewer" }, subject: null });
    expect(items.some(({ who }) => who.id === harness.stranger.id)).toBe(false);
  });
});

describe("a session", () => {
  it("answers a visitor with nobody, and sets no cookie", async () => {
    const response = await supertest(harness.express).get("/api/session").expect(200);
    expect(bodyOf(sessionResponse, response)).toEqual({ user: null, memberships: [], expiresAt: null });
    expect(response.headers["set-cookie"]).toBeUndefined();
  });

  it("ends when it expires: the next request is answered with 401", async () => {
    const agent = await harness.signIn("engineer@northquay.example");
    const path = `/api/teams/${harness.team.id}/scenarios`;
    await agent.get(path).expect(200);
    await harness.connection.db.update(sessions).set({ expire: new Date(Date.now() - 2_000) });
    const { error } = bodyOf(errorBodySchema, await agent.get(path).expect(401));
    expect(error.code).toBe("signed-out");
    expect(bodyOf(sessionResponse, await agent.get("/api/session").expect(200)).user).toBeNull();
  });

  it("moves its end on with every request", async () => {
    const agent = await harness.signIn("engineer@northquay.example");
    const soon = new Date(Date.now() + 60_000);
    await harness.connection.db.update(sessions).set({ expire: soon });
    await agent.get("/api/session").expect(200);
    const rows = await harness.connection.db.select({ expire: sessions.expire }).from(sessions);
    expect(Math.max(...rows.map(({ expire }) => expire.getTime()))).toBeGreaterThan(soon.getTime() + 11 * 3_600_000);
  });

  it("ends with signing out, on the server too", async () => {
    const response = await supertest(harness.express).post("/api/session").send({ email: "engineer@northquay.example", password: PASSWORD });
    const cookie = cookieOf(response).split(";")[0];
    const out = await supertest(harness.express).delete("/api/session").set("Cookie", cookie).expect(200);
    expect(bodyOf(sessionResponse, out).user).toBeNull();
    const after = await supertest(harness.express).get("/api/session").set("Cookie", cookie).expect(200);
    expect(bodyOf(sessionResponse, after).user).toBeNull();
  });

  it("is worth nothing with a forged signature", async () => {
    const response = await supertest(harness.express).post("/api/session").send({ email: "engineer@northquay.example", password: PASSWORD });
    const [name, value] = cookieOf(response).split(";")[0].split("=");
    const forged = `${name}=${value.slice(0, -4)}AAAA`;
    const seen = await supertest(harness.express).get("/api/session").set("Cookie", forged).expect(200);
    expect(bodyOf(sessionResponse, seen).user).toBeNull();
  });

  it("follows a change of roles, and the loss of membership, at once", async () => {
    const { db } = harness.connection;
    const [user] = await db.insert(users).values({ email: "new@northquay.example", name: "New", passwordHash: "x" }).returning();
    const [copied] = await db.select({ hash: users.passwordHash }).from(users).where(eq(users.id, harness.people.engineer.id));
    await db.update(users).set({ passwordHash: copied.hash }).where(eq(users.id, user.id));
    await db.insert(memberships).values({ teamId: harness.team.id, userId: user.id, roles: ["trainee"] });
    const agent = await harness.signIn("new@northquay.example");
    const activity = `/api/teams/${harness.team.id}/activity`;
    await agent.get(activity).expect(403);
    await db
      .update(memberships)
      .set({ roles: ["trainee", "administrator"] })
      .where(eq(memberships.userId, user.id));
    await agent.get(activity).expect(200);
    await db.delete(memberships).where(eq(memberships.userId, user.id));
    await agent.get(activity).expect(404);
  });
});

describe("requests from other sites", () => {
  const attempts: [string, Record<string, string>][] = [
    ["a foreign origin", { Origin: "https://elsewhere.example" }],
    ["an opaque origin", { Origin: "null" }],
    ["a cross-site fetch", { "Sec-Fetch-Site": "cross-site" }],
    ["another port of this machine", { "Sec-Fetch-Site": "same-site" }],
  ];
  it.each(attempts)("change nothing: %s", async (_what, headers) => {
    const { agent } = harness.people.engineer;
    const response = await agent.delete("/api/session").set(headers);
    expect(response.status).toBe(403);
    expect(bodyOf(errorBodySchema, response).error.code).toBe("foreign-origin");
  });

  it("cannot use a form, which sends no JSON", async () => {
    const response = await supertest(harness.express)
      .post("/api/session")
      .type("form")
      .send({ email: "engineer@northquay.example", password: PASSWORD });
    expect(response.status).toBe(415);
    expect(bodyOf(errorBodySchema, response).error.code).toBe("not-json-type");
    const text = await supertest(harness.express)
      .post("/api/session")
      .type("text/plain")
      .send(JSON.stringify({ email: "engineer@northquay.example", password: PASSWORD }));
    expect(text.status).toBe(415);
  });

  it("are told from our own page's", async () => {
    const own = { Host: "127.0.0.1:4310", Origin: "http://127.0.0.1:4310", "Sec-Fetch-Site": "same-origin" };
    await supertest(harness.express).post("/api/session").set(own).send({ email: "engineer@northquay.example", password: PASSWORD }).expect(200);
  });
});

describe("the demo sign-ins", () => {
  it("are empty while there is no demo team", async () => {
    const demo = bodyOf(demoResponse, await supertest(harness.express).get("/api/demo").expect(200));
    expect(demo).toEqual({ password: null, people: [] });
  });
});
