import { screen, waitFor, within } from "@testing-library/react";
import { describe, expect, it } from "vitest";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { item, listOf, sessionOf, TEAM, whole } from "../../helpers/team-data.ts";

const server = fakeServer();
const LIST = `GET /api/teams/${TEAM.id}/scenarios`;
const AT = `/teams/${TEAM.id}/scenarios`;

function open(path = AT, ...roles: Parameters<typeof sessionOf>) {
  server.on("GET /api/session", () => json(sessionOf(...(roles.length > 0 ? roles : (["engineer"] as const)))));
  return renderApp(path);
}

describe("the scenarios", () => {
  it("are a table with round, delivery, verdict, owner and time of change", async () => {
    server.on(LIST, () => json(listOf([item("Balancer rig 1")], { totalUnfiltered: 11, total: 11, archivedTotal: 2 })));
    open();
    const row = await screen.findByRole("row", { name: /Balancer rig 1/ });
    expect(within(row).getByRole("link", { name: "Balancer rig 1" })).toBeDefined();
    expect(row.textContent).toContain("Pendulum on cart · revision 3");
    expect(row.textContent).toContain("25\u2009\u2060ms");
    expect(row.textContent).toContain("88.5\u2009\u2060%");
    expect(row.textContent).toContain("HoldsAll five limits kept.");
    expect(screen.getByRole("heading", { level: 1 }).textContent).toBe("Scenarios 11 of the team, 2 archived");
  });
  it("say of a scenario without a run that nothing was delivered yet", async () => {
    server.on(LIST, () => json(listOf([item("New one", { delivery: null })])));
    open();
    expect((await screen.findByRole("row", { name: /New one/ })).textContent).toContain("none yet");
  });
  it("are sorted by a press on a head, and the address says so", async () => {
    server.on(LIST, () => json(listOf([item("A")])));
    const { user, address } = open();
    await user.click(await screen.findByRole("button", { name: "Scenario" }));
    expect(address()).toBe(`${AT}?sort=name&direction=ascending`);
    await waitFor(() => expect(server.asked.at(-1)?.query.get("sort")).toBe("name"));
    await user.click(screen.getByRole("button", { name: "Scenario" }));
    expect(address()).toBe(`${AT}?sort=name`);
    expect(screen.getByRole("columnheader", { name: "Scenario" }).getAttribute("aria-sort")).toBe("descending");
  });
  it("are searched with the key / and found when the typing pauses", async () => {
    server.on(LIST, () => json(listOf([item("A")])));
    const { user, address } = open();
    await screen.findByRole("row", { name: /^A/ });
    await user.keyboard("/");
    const box = screen.getByRole("searchbox", { name: "Search scenarios" });
    expect(document.activeElement).toBe(box);
    await user.keyboard("rig/2");
    expect((box as HTMLInputElement).value).toBe("rig/2");
    await waitFor(() => expect(address()).toBe(`${AT}?search=rig%2F2`));
    expect(document.activeElement).toBe(box);
  });
  it("that the filters leave out are offered back", async () => {
    server.on(LIST, ({ query }) => json(query.get("plant") ? listOf([], { totalUnfiltered: 11 }) : listOf([item("Back again")])));
    const { user } = open(`${AT}?plant=overhead-crane&verdict=does-not-fit`);
    expect(await screen.findByText("No overhead crane whose round does not fit")).toBeDefined();
    expect(screen.getByText("Eleven scenarios have other plants or other verdicts.")).toBeDefined();
    await user.click(screen.getByRole("button", { name: "Clear both filters" }));
    expect(await screen.findByRole("row", { name: /Back again/ })).toBeDefined();
  });
  it("that do not exist yet begin with a template", async () => {
    server.on(LIST, () => json(listOf([], { owners: [], plants: [] })));
    open();
    expect(await screen.findByText("No scenario yet")).toBeDefined();
    expect(screen.getByRole("button", { name: "New pendulum on cart" })).toBeDefined();
  });
  it("that cannot be loaded say why and can be asked for again", async () => {
    server.on(LIST, () => refusal("not-permitted", 403, "You may not open scenarios of this team."));
    const { user } = open();
    expect(await screen.findByText("You may not open scenarios of this team.")).toBeDefined();
    server.on(LIST, () => refusal("internal", 500, "Something went wrong on the server. Its log has the cause under ab12cd34."));
    const second = open();
    expect(await screen.findByText(/ab12cd34/, {}, { timeout: 4000 })).toBeDefined();
    server.on(LIST, () => json(listOf([item("There now")])));
    await user.click(screen.getByRole("button", { name: "Try again" }));
    expect(await within(second.container).findByRole("row", { name: /There now/ })).toBeDefined();
  });
  it("of a page that is no longer there lead to the last page", async () => {
    server.on(LIST, ({ query }) =>
      json(query.get("page") === "2" ? listOf([item("Last")], { page: 2, total: 11 }) : listOf([], { page: 7, total: 11 })),
    );
    const { address } = open(`${AT}?page=7`);
    expect(await screen.findByRole("row", { name: /Last/ })).toBeDefined();
    expect(address()).toBe(`${AT}?page=2`);
  });
  it("cannot be made by a trainee, who is told who can", async () => {
    server.on(LIST, () => json(listOf([item("To look at", { mayEdit: false })])));
    const { user } = open(AT, "trainee");
    expect(await screen.findByText(/You are a trainee in this team/)).toBeDefined();
    expect(screen.getByText(/An engineer, a reviewer or an administrator can\./)).toBeDefined();
    expect(screen.queryByRole("button", { name: /New scenario/ })).toBeNull();
    expect(screen.queryByRole("button", { name: /Import/ })).toBeNull();
    await user.click(await screen.findByRole("button", { name: "More for To look at" }));
    expect(screen.getAllByRole("menuitem").map(({ textContent }) => textContent)).toEqual(["Open", "Export as JSON"]);
  });
});

describe("what is done to a scenario", () => {
  it("archives it, and takes that back on demand", async () => {
    const one = item("Old rig");
    server.on(LIST, () => json(listOf([one])));
    server.on(`PATCH /api/teams/${TEAM.id}/scenarios/${one.id}`, ({ body }) =>
      json(whole({ ...one, archivedAt: (body as { archived: boolean }).archived ? "2025-12-01T10:00:00.000Z" : null })),
    );
    const { user } = open();
    await user.click(await screen.findByRole("button", { name: "More for Old rig" }));
    await user.click(screen.getByRole("menuitem", { name: "Archive" }));
    expect(await screen.findByText("“Old rig” is archived.")).toBeDefined();
    await user.click(screen.getByRole("button", { name: "Undo" }));
    expect(await screen.findByText("“Old rig” is back in the table.")).toBeDefined();
    expect(server.asked.filter(({ method }) => method === "PATCH").map(({ body }) => body)).toEqual([{ archived: true }, { archived: false }]);
  });
  it("deletes an archived one only after a question that says what goes with it", async () => {
    const one = item("Gone rig", { archivedAt: "2025-12-01T10:00:00.000Z", revision: 4 });
    server.on(LIST, () => json(listOf([one])));
    server.on(`DELETE /api/teams/${TEAM.id}/scenarios/${one.id}`, () => json({ deleted: true }));
    const { user } = open(`${AT}?archived=only`);
    await user.click(await screen.findByRole("button", { name: "More for Gone rig" }));
    await user.click(screen.getByRole("menuitem", { name: "Delete …" }));
    expect(screen.getByRole("dialog").textContent).toContain("Its 4 revisions and all of its runs go with it");
    expect(server.asked.some(({ method }) => method === "DELETE")).toBe(false);
    await user.click(screen.getByRole("button", { name: "Delete for good" }));
    expect(await screen.findByText("“Gone rig” is deleted.")).toBeDefined();
  });
  it("tells of a refusal above the table and leaves the rows", async () => {
    const one = item("Kept rig");
    server.on(LIST, () => json(listOf([one])));
    server.on(`POST /api/teams/${TEAM.id}/scenarios/${one.id}/duplicate`, () =>
      refusal("database-unavailable", 503, "The database does not answer."),
    );
    server.on("GET /api/health", () => json({ ok: true, database: true }));
    const { user } = open();
    await user.click(await screen.findByRole("button", { name: "More for Kept rig" }));
    await user.click(screen.getByRole("menuitem", { name: "Duplicate" }));
    expect(await screen.findByText("“Kept rig” was not duplicated. The database does not answer.")).toBeDefined();
    expect(screen.getByRole("row", { name: /Kept rig/ })).toBeDefined();
    expect(await screen.findByText("Connected again.", {}, { timeout: 4000 })).toBeDefined();
  });
});
