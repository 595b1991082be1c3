import { afterEach, describe, expect, it, vi } from "vitest";
import { z } from "zod";
import { ApiError, isOutage, queryText, request } from "#src/api/client.ts";
import { connection } from "#src/api/connection.ts";
import { sessionExpiry } from "#src/api/session-expiry.ts";
import { fakeServer, json, noAnswer, refusal } from "../helpers/fake-server.ts";

const server = fakeServer();
const thing = z.strictObject({ name: z.string() });
const failure = (promise: Promise<unknown>): Promise<ApiError> =>
  promise.then(
    () => Promise.reject(new Error("It did not fail.")),
    (error: ApiError) => error,
  );
/** Lets the watch over the connection end, so that the next test begins with a server that answers. */
async function recover() {
  server.on("GET /api/health", () => json({ ok: true, database: true }));
  await vi.waitFor(() => expect(connection.state).toBe("up"), { timeout: 4000 });
}

describe("answers", () => {
  it("hands on what the schema read", async () => {
    server.on("GET /api/thing", () => json({ name: "Balancer" }));
    await expect(request("/api/thing", thing)).resolves.toEqual({ name: "Balancer" });
  });
  it("refuses an answer of another shape instead of passing it on", async () => {
    server.on("GET /api/thing", () => json({ title: "Balancer" }));
    expect((await failure(request("/api/thing", thing))).code).toBe("not-understood");
  });
  it("sends a body as JSON and says so", async () => {
    server.on("POST /api/thing", () => json({ name: "Crane" }, 201));
    await request("/api/thing", thing, { method: "POST", body: { a: 1 } });
    expect(server.asked[0]?.body).toEqual({ a: 1 });
    expect(vi.mocked(fetch).mock.calls[0]?.[1]?.headers).toMatchObject({ "Content-Type": "application/json" });
  });
  it("turns a refusal into an error with the server's code, words and details", async () => {
    const issues = [{ code: "out-of-range", path: "round.periodS", message: "Round period is 0 s; permitted 0.001 to 10 s." }];
    server.on("POST /api/thing", () => refusal("scenario-invalid", 422, "The scenario has 1 issue.", { issues }));
    const error = await failure(request("/api/thing", thing, { method: "POST", body: {} }));
    expect(error).toMatchObject({ code: "scenario-invalid", status: 422, message: "The scenario has 1 issue." });
    expect(error.details.issues).toEqual(issues);
  });
  it("lets an aborted request end as aborted, not as a lost connection", async () => {
    const controller = new AbortController();
    server.on("GET /api/thing", () => {
      controller.abort();
      return noAnswer();
    });
    const error = await failure(request("/api/thing", thing, { signal: controller.signal }));
    expect(error).not.toBeInstanceOf(ApiError);
    expect(connection.state).toBe("up");
  });
  it("leaves parameters out that are not set", () => {
    expect(queryText({ search: "", plant: undefined, page: 2 })).toBe("?page=2");
    expect(queryText({})).toBe("");
  });
});

describe("a server that cannot be reached", () => {
  it("is noticed by any request, watched over, and noticed again when it is back", async () => {
    const recovered = vi.fn();
    const stop = connection.onRecovery(recovered);
    server.on("GET /api/thing", noAnswer);
    server.on("GET /api/health", noAnswer);
    const error = await failure(request("/api/thing", thing));
    expect(isOutage(error)).toBe(true);
    expect(connection.state).toBe("server-down");
    expect(recovered).not.toHaveBeenCalled();
    await recover();
    expect(recovered).toHaveBeenCalledOnce();
    stop();
  });
  it("is told apart from a database that does not answer", async () => {
    server.on("GET /api/thing", () => refusal("database-unavailable", 503));
    server.on("GET /api/health", () => json({ ok: false, database: false }, 503));
    expect((await failure(request("/api/thing", thing))).code).toBe("database-unavailable");
    expect(connection.state).toBe("database-down");
    await recover();
  });
  it("is also what a proxy in between means by its own 502", async () => {
    server.on("GET /api/thing", () => new Response("<html>Bad gateway</html>", { status: 502 }));
    expect((await failure(request("/api/thing", thing))).code).toBe("unreachable");
    await recover();
  });
});

describe("a session that has ended", () => {
  const stops: (() => void)[] = [];
  afterEach(() => {
    for (const stop of stops.splice(0)) stop();
  });
  const listen = (listener = () => {}) => stops.push(sessionExpiry.subscribe(listener));

  it("holds the request until somebody has signed in again, then sends it once more", async () => {
    listen();
    let signedIn = false;
    server.on("POST /api/thing", ({ body }) => (signedIn ? json({ name: (body as { name: string }).name }) : refusal("signed-out", 401)));
    const answer = request("/api/thing", thing, { method: "POST", body: { name: "kept" } });
    await vi.waitFor(() => expect(sessionExpiry.isAsking).toBe(true));
    signedIn = true;
    sessionExpiry.answer(true);
    await expect(answer).resolves.toEqual({ name: "kept" });
    expect(server.askedOf("POST /api/thing")).toHaveLength(2);
  });
  it("asks once for any number of requests", async () => {
    const told = vi.fn();
    listen(told);
    let signedIn = false;
    server.on("GET /api/thing", () => (signedIn ? json({ name: "x" }) : refusal("signed-out", 401)));
    const answers = [1, 2, 3].map(() => request("/api/thing", thing));
    await vi.waitFor(() => expect(server.asked).toHaveLength(3));
    await vi.waitFor(() => expect(sessionExpiry.isAsking).toBe(true));
    expect(told).toHaveBeenCalledOnce();
    signedIn = true;
    sessionExpiry.answer(true);
    await expect(Promise.all(answers)).resolves.toHaveLength(3);
  });
  it("fails the request when nobody signs in", async () => {
    listen();
    server.on("GET /api/thing", () => refusal("signed-out", 401));
    const answer = failure(request("/api/thing", thing));
    await vi.waitFor(() => expect(sessionExpiry.isAsking).toBe(true));
    sessionExpiry.answer(false);
    expect((await answer).code).toBe("signed-out");
    expect(server.asked).toHaveLength(1);
  });
  it("is not asked about while signing in", async () => {
    listen();
    server.on("POST /api/session", () => refusal("wrong-credentials", 401));
    expect((await failure(request("/api/session", thing, { method: "POST", body: {}, anonymous: true }))).code).toBe("wrong-credentials");
    expect(sessionExpiry.isAsking).toBe(false);
  });
});
