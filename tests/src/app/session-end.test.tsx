import { screen, waitFor } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import { sessionExpiry } from "#src/api/session-expiry.ts";
import { fakeServer, json, noAnswer, refusal } from "../helpers/fake-server.ts";
import { renderApp } from "../helpers/render-app.tsx";
import { item, listOf, SIGNED_OUT, sessionOf, TEAM, whole } from "../helpers/team-data.ts";

const server = fakeServer();
afterEach(() => sessionExpiry.answer(false));
const AT = `/teams/${TEAM.id}/scenarios`;
const LIST = `GET /api/teams/${TEAM.id}/scenarios`;

function serve({ signedIn }: { signedIn: boolean }) {
  const state = { signedIn };
  const guarded = (answer: () => Response) => () => (state.signedIn ? answer() : refusal("signed-out", 401, "You are signed out."));
  const one = item("Balancer rig 1");
  server.on("GET /api/session", () => json(state.signedIn ? sessionOf("engineer") : SIGNED_OUT));
  server.on(
    LIST,
    guarded(() => json(listOf([one]))),
  );
  server.on(
    `POST /api/teams/${TEAM.id}/scenarios/${one.id}/duplicate`,
    guarded(() => json(whole(item("Copy of Balancer rig 1")), 201)),
  );
  server.on("POST /api/session", ({ body }) => {
    if ((body as { password: string }).password !== "right")
      return refusal("wrong-credentials", 401, "Mail address and password do not belong together.");
    state.signedIn = true;
    return json(sessionOf("engineer"));
  });
  return state;
}

async function meetTheEnd() {
  const state = serve({ signedIn: true });
  const app = renderApp(AT);
  await screen.findByRole("row", { name: /Balancer rig 1/ });
  state.signedIn = false;
  await app.user.click(screen.getByRole("button", { name: "More for Balancer rig 1" }));
  await app.user.click(screen.getByRole("menuitem", { name: "Duplicate" }));
  await screen.findByRole("dialog", { name: "Sign in again" });
  return app;
}

describe("a session that ends while somebody works", () => {
  it("is renewed over the page, and what was begun goes on", async () => {
    const { user, address } = await meetTheEnd();
    expect((screen.getByLabelText("Mail address") as HTMLInputElement).readOnly).toBe(true);
    await user.type(screen.getByLabelText("Password"), "right");
    await user.click(screen.getByRole("button", { name: "Sign in" }));
    expect(await screen.findByText("“Copy of Balancer rig 1” was made.")).toBeDefined();
    expect(screen.queryByRole("dialog")).toBeNull();
    expect(address()).toBe(AT);
  });
  it("stays open after a wrong password", async () => {
    const { user } = await meetTheEnd();
    await user.type(screen.getByLabelText("Password"), "wrong");
    await user.click(screen.getByRole("button", { name: "Sign in" }));
    expect(await screen.findByText("Mail address and password do not belong together.")).toBeDefined();
    await user.keyboard("{Escape}");
    expect(screen.getByRole("dialog", { name: "Sign in again" })).toBeDefined();
    await user.click(screen.getByRole("button", { name: "Not now" }));
    expect(await screen.findByText("“Balancer rig 1” was not duplicated. You are signed out.")).toBeDefined();
  });
});

describe("an address of a signed-in person", () => {
  it("of a team that one is not in says that nothing is there", async () => {
    serve({ signedIn: true });
    renderApp("/teams/99999999-9999-4999-8999-999999999999/scenarios");
    expect(await screen.findByRole("heading", { name: "Nothing is at this address" })).toBeDefined();
    expect(server.asked.some(({ path }) => path.includes("99999999"))).toBe(false);
  });
  it("that does not exist leads back to the scenarios", async () => {
    serve({ signedIn: true });
    const { user } = renderApp("/no/such/page");
    await user.click(await screen.findByRole("link", { name: "To the scenarios" }));
    expect(await screen.findByRole("row", { name: /Balancer rig 1/ })).toBeDefined();
  });
  it("that cannot be opened for want of a server opens by itself when there is one", async () => {
    serve({ signedIn: true });
    server.on("GET /api/session", noAnswer);
    server.on("GET /api/health", noAnswer);
    renderApp(AT);
    expect(await screen.findByRole("heading", { name: "The server cannot be reached" })).toBeDefined();
    server.on("GET /api/session", () => json(sessionOf("engineer")));
    server.on("GET /api/health", () => json({ ok: true, database: true }));
    await waitFor(() => expect(screen.getByRole("row", { name: /Balancer rig 1/ })).toBeDefined(), { timeout: 5000 });
  });
});
