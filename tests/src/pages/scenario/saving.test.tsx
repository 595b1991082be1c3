import { screen, waitFor, within } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import type { Scenario } from "#shared/scenario/schema.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { TEAM } from "../../helpers/team-data.ts";
import { changes, detailOf, field, MASS, MOORLING, openScenario, plain, SHORT, serveScenario, typeInto } from "./open-scenario.tsx";

vi.mock("#src/workers/pool.ts", () => import("./in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("./run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.clear());

describe("saving", () => {
  const savedAs = (scenario: Scenario, number: number) => (one: Awaited<ReturnType<typeof openScenario>>["one"]) =>
    json({ ...one, revision: number, latest: detailOf(scenario, number) }, 201);

  it("lists what changed, takes a note and makes the next revision", async () => {
    const { user, at, one } = await openScenario(server);
    server.on(`POST ${at}/revisions`, ({ body }) => savedAs((body as { scenario: Scenario }).scenario, 4)(one));
    await typeInto(user, MASS, "1.5");
    await user.keyboard("{Control>}s{/Control}");
    const dialog = await screen.findByRole("dialog", { name: "Save revision 4" });
    expect(plain(within(dialog).getByRole("row").textContent ?? "")).toBe("Cart mass1.2 kgbecomes1.5 kg");
    await user.type(within(dialog).getByLabelText("Note for the others"), "Heavier cart");
    await user.keyboard("{Control>}{Enter}{/Control}");
    expect(await screen.findByText("Saved as revision 4.")).toBeDefined();
    expect(server.askedOf(`POST ${at}/revisions`)[0].body).toMatchObject({
      baseRevision: 3,
      note: "Heavier cart",
      scenario: { loops: [{ plant: { cartMassKg: 1.5 } }] },
    });
    expect(changes()).toBe("none");
    expect(screen.getByRole("link", { name: "Revision 4" })).toBeDefined();
    await user.click(screen.getByRole("button", { name: "Show what changed" }));
    expect(plain((await screen.findByRole("dialog", { name: "What changed from revision 3 to 4" })).textContent ?? "")).toContain("1.5 kg");
  });

  it("says why when the server does not take it, and keeps the draft", async () => {
    const { user, at } = await openScenario(server);
    server.on(`POST ${at}/revisions`, () => refusal("database-unavailable", 503, "The database does not answer."));
    server.on("GET /api/health", () => json({ ok: true, database: true }));
    await typeInto(user, MASS, "1.5");
    await user.keyboard("{Control>}s{/Control}");
    await user.click(await screen.findByRole("button", { name: "Save revision 4" }));
    expect(await within(screen.getByRole("dialog")).findByText("The database does not answer.")).toBeDefined();
    expect(changes()).toBe("1 unsaved change");
  });

  async function meetConflict() {
    const page = await openScenario(server);
    const { user, at, one } = page;
    const theirs = setAt(setAt(SHORT, ["loops", 0, "plant", "cartMassKg"], 1.3), ["losses", "process", "command"], 0.2) as Scenario;
    const latest = { number: 4, author: MOORLING, savedAt: "2025-11-28T13:00:00.000Z", note: "Loss measured" };
    server.on(`POST ${at}/revisions`, ({ body }) => {
      const { baseRevision, scenario } = body as { baseRevision: number; scenario: Scenario };
      return baseRevision < 4 ? refusal("revision-conflict", 409, "Somebody saved.", { latest }) : savedAs(scenario, 5)(one);
    });
    server.on(`GET ${at}/revisions/4`, () => json(detailOf(theirs, 4, latest)));
    await typeInto(user, MASS, "1.5");
    await typeInto(user, "loops[0].plant.rodMassKg", "0.3");
    await user.keyboard("{Control>}s{/Control}");
    await user.click(await screen.findByRole("button", { name: "Save revision 4" }));
    const dialog = await screen.findByRole("dialog", { name: "A. Moorling saved revision 4 in the meantime" });
    return { ...page, dialog };
  }

  it("over somebody else's newer revision shows who, when, why and what differs", async () => {
    const { dialog } = await meetConflict();
    expect(dialog.textContent).toContain("“Loss measured”");
    const rows = within(dialog)
      .getAllByRole("row")
      .map(({ textContent }) => plain(textContent ?? ""));
    expect(rows.slice(1)).toEqual([
      "Cart mass both changed it1.2 kg1.3 kg1.5 kg",
      "Rod mass0.21 kgunchanged0.3 kg",
      "Command lost, chance5 %20 %unchanged",
    ]);
  });

  it("puts my changes on theirs when asked, and saves nothing by that", async () => {
    const { user, dialog, at } = await meetConflict();
    await user.click(within(dialog).getByRole("button", { name: "Put mine on theirs" }));
    await waitFor(() => expect(screen.queryByRole("dialog")).toBeNull());
    expect([field(MASS).value, field("losses.process.command").value]).toEqual(["1.5", "20"]);
    expect(screen.getByRole("link", { name: "Revision 4" })).toBeDefined();
    expect(changes()).toBe("2 unsaved changes");
    expect(server.askedOf(`POST ${at}/revisions`)).toHaveLength(1);
  });

  it("saves mine on top of theirs when asked", async () => {
    const { user, dialog, at } = await meetConflict();
    await user.click(within(dialog).getByRole("radio", { name: /^Save mine as revision 5/ }));
    await user.click(within(dialog).getByRole("button", { name: "Save revision 5" }));
    expect(await screen.findByText("Saved as revision 5.")).toBeDefined();
    expect(server.askedOf(`POST ${at}/revisions`)[1].body).toMatchObject({ baseRevision: 4, scenario: { losses: { process: { command: 0.05 } } } });
  });

  it("takes theirs when asked and keeps mine beside it", async () => {
    const { user, dialog } = await meetConflict();
    await user.click(within(dialog).getByRole("radio", { name: /^Take theirs/ }));
    await user.click(within(dialog).getByRole("button", { name: "Take theirs" }));
    expect(await screen.findByText(/Your own version of .* is kept in this browser/)).toBeDefined();
    expect([field(MASS).value, changes()]).toEqual(["1.3", "none"]);
    await user.click(screen.getByRole("button", { name: "Put it on the bench" }));
    expect(field(MASS).value).toBe("1.5");
  });

  it("makes a new scenario of mine when asked", async () => {
    const { user, dialog } = await meetConflict();
    const made = serveScenario(server, { scenario: { ...SHORT, name: "Another" } });
    server.on(`POST /api/teams/${TEAM.id}/scenarios`, () => json(made.one, 201));
    await user.click(within(dialog).getByRole("radio", { name: /^Save mine as a new scenario/ }));
    await user.click(within(dialog).getByRole("button", { name: "Save as a new scenario" }));
    expect(await screen.findByRole("heading", { level: 1, name: /^Another/ })).toBeDefined();
    expect(server.askedOf(`POST /api/teams/${TEAM.id}/scenarios`)[0].body).toMatchObject({
      scenario: { name: `${SHORT.name} (my version)`, loops: [{ plant: { cartMassKg: 1.5 } }] },
    });
  });
});
