import { screen, waitFor } from "@testing-library/react";
import { describe, expect, it } from "vitest";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { item, listOf, SIGNED_OUT, sessionOf, TEAM } from "../../helpers/team-data.ts";

const server = fakeServer();
const AT = `/teams/${TEAM.id}/scenarios`;

function openSignedOut(path: string, demo: { password: string | null; people: unknown[] } = { password: null, people: [] }) {
  let signedIn = false;
  server.on("GET /api/session", () => json(signedIn ? sessionOf("engineer") : SIGNED_OUT));
  server.on("GET /api/demo", () => json(demo));
  server.on("POST /api/session", ({ body }) => {
    if ((body as { password: string }).password !== "right")
      return refusal("wrong-credentials", 401, "Mail address and password do not belong together.");
    signedIn = true;
    return json(sessionOf("engineer"));
  });
  server.on(`GET /api/teams/${TEAM.id}/scenarios`, () => json(listOf([item("Balancer rig 1")])));
  return renderApp(path);
}

describe("signing in", () => {
  it("is asked for first, and leads to the page that was wanted", async () => {
    const { user, address } = openSignedOut(`${AT}?sort=name`);
    await user.type(await screen.findByLabelText("Mail address"), "r.fennick@northquay.example");
    expect(address()).toBe(`/sign-in?from=${encodeURIComponent(`${AT}?sort=name`)}`);
    await user.type(screen.getByLabelText("Password"), "right{Enter}");
    expect(await screen.findByRole("row", { name: /Balancer rig 1/ })).toBeDefined();
    expect(address()).toBe(`${AT}?sort=name`);
  });
  it("never leads to another site", async () => {
    const { user, address } = openSignedOut("/sign-in?from=//elsewhere.example/x");
    await user.type(await screen.findByLabelText("Mail address"), "r.fennick@northquay.example");
    await user.type(screen.getByLabelText("Password"), "right{Enter}");
    await waitFor(() => expect(address()).toBe(AT));
  });
  it("says what is missing, and where", async () => {
    const { user } = openSignedOut("/sign-in");
    await user.click(await screen.findByRole("button", { name: "Sign in" }));
    expect(screen.getByText("Enter the mail address of your account.")).toBeDefined();
    const mail = screen.getByLabelText("Mail address");
    expect(document.activeElement).toBe(mail);
    expect(mail.getAttribute("aria-invalid")).toBe("true");
    await user.type(mail, "r.fennick@northquay.example{Enter}");
    expect(screen.getByText("Enter your password.")).toBeDefined();
    expect(server.asked.some(({ method }) => method === "POST")).toBe(false);
  });
  it("keeps what was typed after a wrong password, and can show it", async () => {
    const { user } = openSignedOut("/sign-in");
    await user.type(await screen.findByLabelText("Mail address"), "r.fennick@northquay.example");
    const password = screen.getByLabelText("Password") as HTMLInputElement;
    await user.type(password, "wrong{Enter}");
    expect(await screen.findByText("Mail address and password do not belong together.")).toBeDefined();
    expect(password.value).toBe("wrong");
    await user.click(screen.getByRole("button", { name: "Show the password" }));
    expect(password.type).toBe("text");
  });
  it("offers the people of the demo team only where the server has one", async () => {
    const person = { name: "R. Fennick", email: "r.fennick@northquay.example", memberships: [{ team: TEAM.name, roles: ["engineer"] }] };
    const { user } = openSignedOut("/sign-in", { password: "right", people: [person] });
    await user.click(await screen.findByRole("button", { name: "Sign in as R. Fennick" }));
    expect(await screen.findByRole("row", { name: /Balancer rig 1/ })).toBeDefined();
  });
  it("shows no demo team where there is none", async () => {
    openSignedOut("/sign-in");
    await screen.findByLabelText("Mail address");
    await waitFor(() => expect(server.askedOf("GET /api/demo")).toHaveLength(1));
    expect(screen.queryByText(/Demo team/)).toBeNull();
  });
});
