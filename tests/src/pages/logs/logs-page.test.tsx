import { screen, waitFor, within } from "@testing-library/react";
import { describe, expect, it } from "vitest";
import type { LogListResponse } from "#shared/api/logs.ts";
import type { Role } from "#shared/api/permissions.ts";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { sessionOf, TEAM } from "../../helpers/team-data.ts";
import { itemOf, listOfLogs, logOf, TEXT } from "./made-log.ts";
import "#src/pages/logs/logs-page.tsx";
import "#src/pages/logs/upload-page.tsx";
import "#src/pages/logs/log-page.tsx";

const server = fakeServer();
const LIST = `GET /api/teams/${TEAM.id}/logs`;
const item = itemOf(logOf(TEXT));

function open(list: LogListResponse, role: Role = "engineer", search = "") {
  server.on("GET /api/session", () => json(sessionOf(role)));
  server.on(LIST, () => json(list));
  return renderApp(`/teams/${TEAM.id}/logs${search}`);
}

describe("the reception logs of a team", () => {
  it("stand in a table with links, packets, losses, remarks and use, and open on a press", async () => {
    open(listOfLogs([{ ...item, scenarios: 2 }]));
    const row = await screen.findByRole("row", { name: /Line west/ });
    expect(within(row).getByRole("link").getAttribute("href")).toBe(`/teams/${TEAM.id}/logs/${item.id}`);
    const cells = within(row).getAllByRole("cell");
    expect(cells.slice(1, 9).map(({ textContent }) => textContent)).toEqual([
      "2",
      "800",
      "8.75\u2009\u2060%",
      "20\u2009\u2060ms",
      "in bursts on 1 of 2 links",
      "read without a remark",
      "in 2 scenarios",
      "R. Fennick",
    ]);
  });
  it("say what a log is and offer to upload one when there is none", async () => {
    const app = open(listOfLogs([]));
    expect(await screen.findByText("No reception log yet")).toBeDefined();
    expect(screen.getByText(/which packets arrived on a link/)).toBeDefined();
    await app.user.click(screen.getByRole("button", { name: "What a log has to hold" }));
    const dialog = screen.getByRole("dialog", { name: "What a reception log has to hold" });
    expect(within(dialog).getByRole("row", { name: /Packet number.*needed/ })).toBeDefined();
    await app.user.click(within(dialog).getByRole("button", { name: "Close" }));
    await app.user.click(screen.getByRole("link", { name: "Upload a log" }));
    expect(app.address()).toBe(`/teams/${TEAM.id}/logs/new`);
  });
  it("are searched for at the server, by a link that can be handed on", async () => {
    const app = open(listOfLogs([item]));
    await screen.findByRole("link", { name: "Line west" });
    server.on(LIST, () => json(listOfLogs([], { totalUnfiltered: 1 })));
    await app.user.type(screen.getByRole("searchbox"), "hall 2");
    expect(await screen.findByText("No log named like “hall 2”")).toBeDefined();
    expect(app.address()).toBe(`/teams/${TEAM.id}/logs?search=hall+2`);
    expect(server.askedOf(LIST).at(-1)?.query.get("search")).toBe("hall 2");
    server.on(LIST, () => json(listOfLogs([item])));
    await app.user.click(screen.getByRole("button", { name: "Clear the search" }));
    await waitFor(() => expect(app.address()).toBe(`/teams/${TEAM.id}/logs`));
    expect((screen.getByRole("searchbox") as HTMLInputElement).value).toBe("");
  });
  it("tell a trainee who may upload, and offer no upload", async () => {
    open(listOfLogs([{ ...item, mayEdit: false }]), "trainee");
    expect(await screen.findByText(/You are a trainee in this team: you may open every log/)).toBeDefined();
    expect(screen.queryByRole("link", { name: "Upload a log" })).toBeNull();
  });
  it("say why they cannot be shown and are asked for again", async () => {
    const app = open(listOfLogs([]));
    server.on(LIST, () => refusal("internal", 500, "Something went wrong at the server."));
    expect(await screen.findByText("The reception logs cannot be shown")).toBeDefined();
    server.on(LIST, () => json(listOfLogs([item])));
    await app.user.click(screen.getByRole("button", { name: "Try again" }));
    expect(await screen.findByRole("link", { name: "Line west" })).toBeDefined();
  });
});

it("the page of uploading sends a trainee back with the reason", async () => {
  server.on("GET /api/session", () => json(sessionOf("trainee")));
  renderApp(`/teams/${TEAM.id}/logs/new`);
  expect(await screen.findByRole("heading", { name: "Uploading is not for your role" })).toBeDefined();
  expect(screen.getByText(/uploaded by an engineer, a reviewer or an administrator/)).toBeDefined();
});
