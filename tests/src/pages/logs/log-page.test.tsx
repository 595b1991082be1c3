import { screen, waitFor, within } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import type { LogDetail } from "#shared/api/logs.ts";
import type { Role } from "#shared/api/permissions.ts";
import { cleanDraft } from "#src/pages/scenario/model/draft.ts";
import { browserStore, draftKey } from "#src/pages/scenario/model/draft-store.ts";
import { fakeServer, json, refusal } from "../../helpers/fake-server.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { FENNICK, item, listOf, sessionOf, TEAM, whole } from "../../helpers/team-data.ts";
import { plain } from "../scenario/open-scenario.tsx";
import { itemOf, LOG_ID, listOfLogs, logOf, TEXT } from "./made-log.ts";
import "#src/pages/logs/logs-page.tsx";
import "#src/pages/logs/log-page.tsx";

vi.mock("#src/workers/log-client.ts", () => import("./in-process-log-client.ts"));
vi.mock("#src/workers/pool.ts", () => import("../scenario/in-process-engine.ts"));

const server = fakeServer();
const LOG = `/api/teams/${TEAM.id}/logs/${LOG_ID}`;
const scenario = item("Balancer rig 1");

beforeEach(() => localStorage.clear());

async function openLog(about: Partial<LogDetail> = {}, role: Role = "engineer", search = "") {
  const log = logOf(TEXT, undefined, about);
  server.on("GET /api/session", () => json(sessionOf(role)));
  server.on(`GET ${LOG}`, () => json(log));
  server.on(`GET /api/teams/${TEAM.id}/scenarios`, () => json(listOf([scenario])));
  server.on(`GET /api/teams/${TEAM.id}/scenarios/${scenario.id}`, () => json(whole(scenario)));
  server.on(`GET /api/teams/${TEAM.id}/scenarios/${scenario.id}/runs`, () => json({ items: [], total: 0, page: 1, pageSize: 1 }));
  server.on(`GET /api/teams/${TEAM.id}/logs`, () => json(listOfLogs([itemOf(log)])));
  const app = renderApp(`/teams/${TEAM.id}/logs/${LOG_ID}${search}`);
  await screen.findByRole("heading", { level: 1, name: log.name });
  return app;
}
const sheet = (name: string) => screen.findByRole("region", { name: `Link ${name}` });

describe("one log", () => {
  it("begins with the verdict on the first link, its figures, and what the round of a scenario makes of it", async () => {
    await openLog();
    const text = plain((await sheet("S1 > C1")).textContent ?? "");
    expect(text).toMatch(/Losses come in bursts of 3 packets on average\./);
    expect(text).toMatch(/Lost15 %95 % interval/);
    expect(text).toMatch(/Longest burst3 packets60 ms/);
    expect(await screen.findByText(/One packet every 20\s\u2060ms, a round every/)).toBeDefined();
  });
  it("shows another link by a press or an arrow key, and by its address", async () => {
    const app = await openLog();
    await sheet("S1 > C1");
    const list = screen.getByRole("navigation", { name: "Links of the log" });
    within(list)
      .getByRole("button", { name: /S1 > C1/ })
      .focus();
    await app.user.keyboard("{ArrowDown}");
    expect(plain((await sheet("C1 > A1")).textContent ?? "")).toMatch(/Lost2\.5 %/);
    expect(app.address()).toMatch(/\?link=2$/);
    expect(document.activeElement?.textContent).toMatch(/C1 > A1/);
    app.unmount();
    await openLog({}, "engineer", "?link=2");
    await sheet("C1 > A1");
  });
  it("enlarges a stretch by keys, and goes from loss to loss", async () => {
    const app = await openLog();
    await sheet("S1 > C1");
    const slider = screen.getByRole("slider", { name: "Stretch that is enlarged below" });
    const said = () => plain(slider.getAttribute("aria-valuetext") ?? "");
    slider.focus();
    await app.user.keyboard("{+}{+}{+}{+}{Home}");
    expect(said()).toMatch(/^Packets 0 to 19, from 0 s on: 3 lost, at most 3 in a row\.$/);
    await app.user.keyboard("{ArrowRight}");
    expect(said()).toMatch(/^Packets 10 to 29/);
    await app.user.click(screen.getByRole("button", { name: "Next loss" }));
    expect(said()).toMatch(/^Packets 29 to 48/);
    await app.user.keyboard("{End}");
  });
  it("says how long to measure, and at a field what is wrong with it", async () => {
    const app = await openLog();
    await sheet("S1 > C1");
    const answer = () => plain(document.querySelector(".lg-answer")?.textContent ?? "");
    expect(answer()).toBe("2 995 packets without a loss: 59.9 s of measuring.");
    const allowed = screen.getByLabelText("Losses allowed");
    await app.user.clear(allowed);
    await app.user.type(allowed, "1");
    expect(answer()).toBe("4 742 packets with at most 1 lost: 94.8 s of measuring.");
    const reliability = screen.getByLabelText("Delivered, at least");
    await app.user.clear(reliability);
    await app.user.type(reliability, "100");
    expect(screen.getByText("Delivered, at least: 100 %.")).toBeDefined();
    expect(screen.getByText(/Permitted: 50 to 99\.9999 %/)).toBeDefined();
    expect(answer()).toBe("");
  });
  it("has a link of very many bursts studied in the worker, and shows its pictures meanwhile", async () => {
    const [link] = logOf(TEXT).linkTraces;
    const runs = Array<number>(40_001).fill(1);
    const large = { ...link, runs, packets: 40_001, lost: 20_000 } as LogDetail["linkTraces"][number];
    await openLog({ linkTraces: [large], links: 1 });
    const region = await sheet("S1 > C1");
    expect(within(region).getByRole("slider", { name: "Stretch that is enlarged below" })).toBeDefined();
    expect(await within(region).findByText(/Losses keep apart more than chance would have it/)).toBeDefined();
  });
  it("offers the original file, and a trainee neither renaming nor deleting nor use", async () => {
    const app = await openLog({ mayEdit: false }, "trainee");
    expect(screen.getByRole("button", { name: "Use in a scenario" }).getAttribute("aria-disabled")).toBe("true");
    await app.user.click(screen.getByRole("button", { name: "More for Line west" }));
    expect(screen.getByRole("menuitem", { name: "Download the original file" }).getAttribute("href")).toBe(`${LOG}/original`);
    expect(screen.queryByRole("menuitem", { name: /Delete/ })).toBeNull();
  });
  it("is said not to be there, with a way on", async () => {
    server.on("GET /api/session", () => json(sessionOf("engineer")));
    server.on(`GET ${LOG}`, () => refusal("not-found", 404));
    renderApp(`/teams/${TEAM.id}/logs/${LOG_ID}`);
    expect(await screen.findByText("Nothing is at this address")).toBeDefined();
    expect(screen.getByRole("link", { name: "To the reception logs" })).toBeDefined();
  });
});

describe("renaming and deleting", () => {
  it("renames it at once", async () => {
    const app = await openLog();
    server.on(`PATCH ${LOG}`, () => json(logOf(TEXT, undefined, { name: "Hall 2" })));
    await app.user.click(screen.getByRole("button", { name: "More for Line west" }));
    await app.user.click(screen.getByRole("menuitem", { name: /Rename/ }));
    await app.user.clear(screen.getByLabelText("Name"));
    await app.user.type(screen.getByLabelText("Name"), "Hall 2{Enter}");
    expect(await screen.findByRole("heading", { level: 1, name: "Hall 2" })).toBeDefined();
    expect(server.askedOf(`PATCH ${LOG}`)[0]?.body).toEqual({ name: "Hall 2" });
  });
  it("says which scenarios keep it from being deleted", async () => {
    const app = await openLog({ usedBy: [{ id: scenario.id, name: "Balancer rig 1", archived: false, revisions: [2, 4] }], scenarios: 1 });
    await app.user.click(screen.getByRole("button", { name: "More for Line west" }));
    await app.user.click(screen.getByRole("menuitem", { name: /Delete/ }));
    const dialog = screen.getByRole("dialog", { name: "“Line west” is in use" });
    expect(dialog.textContent).toContain("Balancer rig 1 revisions 2 and 4");
    expect(within(dialog).queryByRole("button", { name: "Delete for good" })).toBeNull();
  });
  it("says so too when the use began after the page was opened", async () => {
    const app = await openLog();
    const uses = [{ id: scenario.id, name: "Balancer rig 1", archived: true, revisions: [5] }];
    server.on(`DELETE ${LOG}`, () => refusal("in-use", 409, "It is in use.", { uses }));
    await app.user.click(screen.getByRole("button", { name: "More for Line west" }));
    await app.user.click(screen.getByRole("menuitem", { name: /Delete/ }));
    await app.user.click(screen.getByRole("button", { name: "Delete for good" }));
    expect((await screen.findByRole("dialog", { name: "“Line west” is in use" })).textContent).toContain("revision 5, archived");
  });
  it("deletes an unused one and goes back to the table", async () => {
    const app = await openLog();
    server.on(`DELETE ${LOG}`, () => json({ deleted: true }));
    await app.user.click(screen.getByRole("button", { name: "More for Line west" }));
    await app.user.click(screen.getByRole("menuitem", { name: /Delete/ }));
    server.on(`GET /api/teams/${TEAM.id}/logs`, () => json(listOfLogs([])));
    await app.user.click(screen.getByRole("button", { name: "Delete for good" }));
    await waitFor(() => expect(app.address()).toBe(`/teams/${TEAM.id}/logs`));
    expect(await screen.findByText("“Line west” is deleted.")).toBeDefined();
  });
});

describe("use in a scenario", () => {
  it("shows what it sets, link by link, for the rounds of the run and a reserve", async () => {
    const app = await openLog();
    await app.user.click(screen.getByRole("button", { name: "Use in a scenario" }));
    const dialog = screen.getByRole("dialog");
    const sets = async (pattern: RegExp) => waitFor(() => expect(plain(dialog.querySelector(".lg-sets")?.textContent ?? "")).toMatch(pattern));
    await sets(/MeasurementS1 > C1: 60 of 400 packets lost \(15 %\).*CommandC1 > A1: 10 of 400/);
    expect(plain(dialog.textContent ?? "")).toMatch(/The run needs 400 rounds of/);
    await app.user.click(within(dialog).getByRole("radio", { name: /In bursts like these/ }));
    await sets(/Measurementgood to bad 5\.88 %, bad to good 32\.2 % a round: 15\.4 % lost, in bursts of 3\.11 on average/);
    await app.user.click(within(dialog).getByRole("radio", { name: /on the safe side/ }));
    await sets(/Measurement18\.9 % lost, each by itself/);
    await app.user.click(within(dialog).getByRole("radio", { name: /As it was received/ }));
    const start = within(dialog).getByLabelText("Measurement starts at packet");
    await app.user.clear(start);
    await app.user.type(start, "400");
    expect(plain(dialog.textContent ?? "")).toMatch(/“400” is no packet of this link\. Permitted: whole numbers from 0 to 399/);
    expect(within(dialog).getByRole("button", { name: "Open the scenario with it" }).getAttribute("aria-disabled")).toBe("true");
  });
  it("takes period and length of the run from the person's own draft", async () => {
    const { scenario: saved } = whole(scenario).latest;
    browserStore(draftKey(scenario.id, FENNICK.id)).write({
      state: "open",
      base: 3,
      draft: cleanDraft({ ...saved, run: { ...saved.run, durationS: 2 }, round: { ...saved.round, periodS: 0.04 } }),
      at: 0,
      tab: "x",
      turn: 1,
    });
    const app = await openLog();
    await app.user.click(screen.getByRole("button", { name: "Use in a scenario" }));
    expect(plain((await screen.findByText(/as in your unsaved draft/)).textContent ?? "")).toMatch(/a run of 2 s, 40 ms a round/);
    const dialog = screen.getByRole("dialog");
    await waitFor(() =>
      expect(plain(dialog.textContent ?? "")).toMatch(/The run needs 50 rounds of 40 ms; 150 packets go into the scenario, a reserve of 100/),
    );
    expect(plain(dialog.textContent ?? "")).toMatch(/of every 2 packets one stands for a round/);
  });
});
