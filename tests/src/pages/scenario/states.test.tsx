import { screen, waitFor } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import type { Scenario } from "#shared/scenario/schema.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { TEAM } from "../../helpers/team-data.ts";
import { changes, detailOf, field, MASS, MOORLING, openScenario, plain, SHORT, serveScenario, typeInto, untilRun } from "./open-scenario.tsx";

vi.mock("#src/workers/pool.ts", () => import("./in-process-engine.ts"));
vi.mock("#src/components/drawings/run-bench.tsx", () => import("./run-bench-stub.tsx"));

const server = fakeServer();
beforeEach(() => localStorage.clear());

describe("who may what", () => {
  it("lets a trainee try values and says that saving is for others", async () => {
    const { user } = await openScenario(server, { roles: ["trainee"], about: { mayEdit: false } });
    expect(screen.getByText(/saving is for engineers, reviewers and administrators/)).toBeDefined();
    expect(screen.queryByRole("button", { name: /^Save/ })).toBeNull();
    await typeInto(user, MASS, "1.5");
    await untilRun(({ mass }) => expect(mass).toBe("1.5"));
    expect(changes()).toBe("1 value tried");
  });

  it("keeps a run only of what is saved", async () => {
    const { user, at } = await openScenario(server);
    await typeInto(user, MASS, "1.5");
    const keep = screen.getByRole("button", { name: "Keep this run" });
    expect(keep.getAttribute("aria-disabled")).toBe("true");
    expect(keep.title).toContain("Save the changes first");
    await user.click(keep);
    expect(server.askedOf(`POST ${at}/runs`)).toHaveLength(0);
  });
});

describe("other states of the page", () => {
  it("opens an old revision to be read, and restores it as a draft that can be undone", async () => {
    const old = setAt(SHORT, ["loops", 0, "plant", "cartMassKg"], 0.9) as Scenario;
    const served = serveScenario(server);
    server.on(`GET ${served.at}/revisions/2`, () => json(detailOf(old, 2, { author: MOORLING, note: "Light cart" })));
    const { user } = renderApp(`/teams/${TEAM.id}/scenarios/${served.one.id}?revision=2`);
    await screen.findByText(/run in/);
    expect(field(MASS).readOnly).toBe(true);
    expect(screen.getByText(/A. Moorling saved this revision/)).toBeDefined();
    await user.click(screen.getByRole("button", { name: "Restore as a draft" }));
    await waitFor(() => expect(changes()).toBe("1 unsaved change"));
    expect([field(MASS).value, field(MASS).readOnly]).toEqual(["0.9", false]);
    await user.keyboard("{Control>}z{/Control}");
    expect(changes()).toBe("none");
  });

  it("says who deleted a scenario whose link is followed", async () => {
    const served = serveScenario(server);
    const deleted = { name: "Balancer rig 1", by: "T. Saltby", at: "2025-11-28T12:00:00.000Z" };
    server.on(`GET ${served.at}`, () => refusal("scenario-deleted", 410, "It was deleted.", { deleted }));
    renderApp(`/teams/${TEAM.id}/scenarios/${served.one.id}`);
    expect(await screen.findByText("“Balancer rig 1” was deleted")).toBeDefined();
    expect(screen.getByRole("link", { name: "To the scenarios" })).toBeDefined();
  });

  it("refuses a file that is no scenario, field by field, and takes one that is", async () => {
    const { user } = await openScenario(server);
    await user.click(screen.getByRole("button", { name: "More" }));
    await user.click(await screen.findByRole("menuitem", { name: "Import JSON into this scenario" }));
    const chooser = await screen.findByLabelText("File of a scenario");
    const file = (value: unknown) => new File([JSON.stringify(value)], "rig.json", { type: "application/json" });
    await user.upload(chooser, file(setAt(SHORT, ["loops", 0, "plant", "cartMassKg"], 0)));
    expect(plain((await screen.findByText(/Cart mass is 0/)).textContent ?? "")).toMatch(/permitted 0\.01 to \S+ kg/);
    await user.upload(chooser, file(setAt(SHORT, ["loops", 0, "plant", "cartMassKg"], 2)));
    await user.click(await screen.findByRole("button", { name: "Put it on the bench" }));
    expect([field(MASS).value, changes()]).toEqual(["2", "1 unsaved change"]);
  });
});
