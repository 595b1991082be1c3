import { screen } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import type { RunListResponse, RunSummary } from "#shared/api/runs.ts";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { FENNICK, item, sessionOf, TEAM, whole } from "../../helpers/team-data.ts";
import "#src/pages/run/runs-page.tsx";

const server = fakeServer();
const scenario = whole(item("Balancer rig 1"));
const RUNS = `GET /api/teams/${TEAM.id}/scenarios/${scenario.id}/runs`;
const address = `/teams/${TEAM.id}/scenarios/${scenario.id}/runs`;
const original = window.matchMedia;
afterEach(() => {
  window.matchMedia = original;
});

let made = 0;
function run(about: Partial<RunSummary> = {}): RunSummary {
  made += 1;
  return {
    id: `66666666-6666-4666-8666-${String(made).padStart(12, "0")}`,
    scenarioId: scenario.id,
    revision: 3,
    seed: made,
    engine: "1.0.0",
    ended: "complete",
    endedAtS: 10,
    durationS: 10,
    verdict: { state: "holds", word: "Holds", sentence: "All five limits kept." },
    delivery: { sent: 800, lost: 40, ratio: 0.95 },
    digest: "ab".repeat(32),
    author: FENNICK,
    createdAt: "2025-11-28T12:00:00.000Z",
    ...about,
  };
}
const listOf = (items: RunSummary[], total = items.length): RunListResponse => ({ items, total, page: 1, pageSize: 25 });

function open(list: RunListResponse, at = address) {
  server.on("GET /api/session", () => json(sessionOf("engineer")));
  server.on(`GET /api/teams/${TEAM.id}/scenarios/${scenario.id}`, () => json(scenario));
  server.on(RUNS, () => json(list));
  return renderApp(at);
}

describe("the runs of a scenario", () => {
  it("lists verdict, delivery, and how a run ended, with a link to each", async () => {
    const early = run({ seed: 77, ended: "diverged", endedAtS: 4.3, verdict: { state: "crosses", word: "Crosses", sentence: "It diverged." } });
    open(listOf([early]));
    const link = await screen.findByRole("link", { name: /open the run of revision 3 with seed 77$/ });
    expect(link.getAttribute("href")).toBe(`/teams/${TEAM.id}/runs/${early.id}`);
    const row = screen.getAllByRole("row")[1];
    expect(row?.textContent).toContain("It diverged.");
    expect(row?.textContent).toContain("95.0");
    expect(row?.textContent).toMatch(/diverged at 4\.3.*of 10/);
  });
  it("asks the server for the verdict and page that stand in the address", async () => {
    const app = open(listOf([run()], 60), `${address}?verdict=crosses&page=2`);
    await screen.findByRole("table");
    const asked = server.askedOf(RUNS).at(-1)?.query;
    expect([asked?.get("verdict"), asked?.get("page"), asked?.get("pageSize")]).toEqual(["crosses", "2", "25"]);
    await app.user.click(screen.getByRole("button", { name: /^Verdict/ }));
    await app.user.click(await screen.findByRole("menuitemradio", { name: "near a limit" }));
    expect(app.address()).toBe(`${address}?verdict=near`);
  });
  it("takes what makes no sense in the address as absent", async () => {
    open(listOf([run()]), `${address}?verdict=perhaps&page=-3&revision=x`);
    await screen.findByRole("table");
    const asked = server.askedOf(RUNS).at(-1)?.query;
    expect([asked?.get("verdict"), asked?.get("page"), asked?.get("revision")]).toEqual([null, "1", null]);
  });
  it("says how a first run gets here, and how to see all when a filter hides them", async () => {
    const { unmount } = open(listOf([]));
    expect(await screen.findByText("No run of this scenario is kept yet")).toBeDefined();
    unmount();
    const app = open(listOf([]), `${address}?verdict=near`);
    await app.user.click(await screen.findByRole("button", { name: "Show all runs" }));
    expect(app.address()).toBe(address);
  });
  it("is a list instead of a table on a phone", async () => {
    window.matchMedia = (media) => Object.assign(original(media), { matches: media.includes("719px") });
    open(listOf([run({ seed: 5 })]));
    expect(await screen.findByText("revision 3, seed 5")).toBeDefined();
    expect(screen.queryByRole("table")).toBeNull();
  });
  it("offers a way on when the scenario was deleted", async () => {
    open(listOf([]));
    server.on(`GET /api/teams/${TEAM.id}/scenarios/${scenario.id}`, () =>
      refusal("scenario-deleted", 410, "deleted", { deleted: { name: "Balancer rig 1", by: "T. Saltby", at: "2025-11-28T12:00:00.000Z" } }),
    );
    renderApp(address);
    expect(await screen.findByText("“Balancer rig 1” was deleted")).toBeDefined();
    expect(screen.getAllByRole("link", { name: "To the scenarios" }).length).toBeGreaterThan(0);
  });
});
