import { act, screen, within } from "@testing-library/react";
import { beforeEach, describe, expect, it, vi } from "vitest";
import { type RunDetail, runDetailSchema } from "#shared/api/runs.ts";
import { encodeSeries, SERIES_CONTENT_TYPE } from "#shared/api/series.ts";
import { scenarioSchema } from "#shared/scenario/schema.ts";
import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import { fakeServer, json, noAnswer, refusal } from "../../helpers/fake-server.ts";
import { madeRun } from "../../helpers/made-run.ts";
import { renderApp } from "../../helpers/render-app.tsx";
import { FENNICK, sessionOf, TEAM } from "../../helpers/team-data.ts";
import "#src/pages/run/run-page.tsx";

const digest = vi.fn<() => Promise<string | null>>();
vi.mock("#src/workers/pool.ts", () => ({ createEngine: () => ({ digest, run: vi.fn(), cancel: vi.fn(), dispose: vi.fn() }) }));

const server = fakeServer();
const { scenario, result } = madeRun({
  events: [
    { atS: 1, kind: "reference", text: "position to 0.15" },
    { atS: 3, kind: "change", text: "rodMassKg becomes 0.25" },
    { atS: 6.5, kind: "outage", text: "outage" },
    { atS: 6.6, kind: "outage-ends", text: "ends" },
  ],
});
const RUN_ID = "55555555-5555-4555-8555-555555555555";
const SCENARIO_ID = "44444444-4444-4444-8444-444444444444";
const DIGEST = "ab".repeat(32);
const base = `/api/teams/${TEAM.id}`;

const run: RunDetail = runDetailSchema.parse({
  id: RUN_ID,
  scenarioId: SCENARIO_ID,
  scenarioName: "Balancer rig 1",
  revision: 3,
  seed: 10,
  engine: ENGINE_VERSION,
  ended: "complete",
  endedAtS: 10,
  durationS: 10,
  verdict: { state: "holds", word: "Holds", sentence: "All five limits kept." },
  delivery: { sent: 800, lost: 138, ratio: 1 - 138 / 800 },
  digest: DIGEST,
  author: FENNICK,
  createdAt: "2025-11-28T12:00:00.000Z",
  figures: { ...result.figures, signals: [{ name: "angle", unit: "rad", max: 0.1, min: -0.15, rms: 0.02, ise: 0.004 }] },
  limits: result.limits,
  events: result.events,
  series: { points: result.series.t.length, kept: result.series.t.length, keptEvery: 1, compressedBytes: 1000 },
});

function answer(record = encodeSeries(result).bytes) {
  server.on("GET /api/session", () => json(sessionOf("engineer")));
  server.on(`GET ${base}/runs/${RUN_ID}`, () => json(run));
  server.on(`GET ${base}/runs/${RUN_ID}/series`, () => new Response(record as BodyInit, { headers: { "Content-Type": SERIES_CONTENT_TYPE } }));
  server.on(`GET ${base}/scenarios/${SCENARIO_ID}/revisions/3`, () =>
    json({ number: 3, name: "Balancer rig 1", note: "", author: FENNICK, savedAt: run.createdAt, verdict: run.verdict, scenario }),
  );
}
const open = () => renderApp(`/teams/${TEAM.id}/runs/${RUN_ID}`);
const part = async (name: string) => within(await screen.findByRole("region", { name }));

beforeEach(() => {
  digest.mockReset().mockResolvedValue(DIGEST);
});

describe("the page of a run", () => {
  it("shows verdict, machine, limits, figures and messages of the kept run", async () => {
    answer();
    open();
    expect(await screen.findByText("All five limits kept.")).toBeDefined();
    expect(screen.getByRole("img", { name: /^Pendulum on cart/ })).toBeDefined();
    expect((await part("Limits")).getAllByRole("row")).toHaveLength(6);
    expect((await part("Figures")).getByRole("row", { name: /Angle/ }).textContent).toContain("−8.594°");
    expect((await part("Messages")).getByRole("row", { name: /Measurement/ }).textContent).toContain("400");
  });
  it("takes the cursor to an event that is pressed, named with its unit", async () => {
    answer();
    const { user } = open();
    const events = await part("Events");
    expect(events.getByRole("button", { name: /Reference Position to 0\.15/ })).toBeDefined();
    await user.click(events.getByRole("button", { name: /Change Rod mass becomes 0\.25/ }));
    await act(() => new Promise((resolve) => requestAnimationFrame(() => resolve(undefined))));
    expect(screen.getByRole("slider", { name: "Time cursor of the plots" }).getAttribute("aria-valuenow")).toBe("3");
  });
  it("computes the run again in this browser and says that the bits are the same", async () => {
    answer();
    open();
    expect((await (await part("Same bits")).findByText("Equal.")).parentElement?.textContent).toContain("bit for bit");
  });
  it("says so when the bits differ, and when nothing could be compared", async () => {
    answer();
    digest.mockResolvedValueOnce("cd".repeat(32)).mockResolvedValueOnce(null).mockRejectedValueOnce(new Error("stopped"));
    const { user } = open();
    const bits = await part("Same bits");
    expect(await bits.findByText("Not equal.")).toBeDefined();
    await user.click(bits.getByRole("button", { name: "Compute it again" }));
    expect(await bits.findByText(/does not run this revision; nothing was compared/)).toBeDefined();
    await user.click(bits.getByRole("button", { name: "Compute it again" }));
    expect(await bits.findByText(/engine stopped; nothing was compared/)).toBeDefined();
  });
  it("offers the run as files, named after scenario, revision and seed", async () => {
    answer();
    const saved: { name: string; size: number }[] = [];
    vi.spyOn(HTMLAnchorElement.prototype, "click").mockImplementation(function (this: HTMLAnchorElement) {
      saved.push({ name: this.download, size: 0 });
    });
    URL.createObjectURL = (blob) => {
      saved.push({ name: "blob", size: (blob as Blob).size });
      return "blob:test";
    };
    URL.revokeObjectURL = () => {};
    const { user } = open();
    for (const name of [/^Series, all/, /^One row per round/, /^Whole run as JSON/, /^Scenario with its losses/]) {
      await user.click(await screen.findByRole("button", { name: "Export" }));
      await user.click(await screen.findByRole("menuitem", { name }));
    }
    await vi.waitFor(() => expect(saved).toHaveLength(8));
    expect(saved.flatMap(({ name }) => (name === "blob" ? [] : [name]))).toEqual([
      "balancer-rig-1-r3-seed10-series.csv",
      "balancer-rig-1-r3-seed10-rounds.csv",
      "balancer-rig-1-r3-seed10-run.json",
      "balancer-rig-1-r3-seed10-explicit.json",
    ]);
    expect(saved.filter(({ name }) => name === "blob").every(({ size }) => size > 1000)).toBe(true);
    vi.restoreAllMocks();
  });
  it("offers what is zoomed to as a file only while something is zoomed to", async () => {
    answer();
    const { user } = open();
    await user.click(await screen.findByRole("button", { name: "Export" }));
    expect(await screen.findByRole("menuitem", { name: /^Series, all/ })).toBeDefined();
    expect(screen.queryByRole("menuitem", { name: /zoomed/ })).toBeNull();
    await user.keyboard("{Escape}");
    await user.click(screen.getByRole("button", { name: "Zoom in around the cursor" }));
    await user.click(screen.getByRole("button", { name: "Export" }));
    expect(await screen.findByRole("menuitem", { name: /zoomed/ })).toBeDefined();
  });
  it("does not draw floods that another engine drew, and says so", async () => {
    answer();
    const nodes = [1, 2, 3].map((id) => ({ id, xM: 5 * id, yM: 5 }));
    const [loop] = scenario.loops;
    const onFloor = scenarioSchema.parse({
      ...scenario,
      floor: { widthM: 40, depthM: 20, nodes },
      loops: [{ ...loop, nodes: { sensor: 1, controller: 3, actuator: 2 } }],
      losses: { ...scenario.losses, process: { type: "flood" } },
    });
    server.on(`GET ${base}/runs/${RUN_ID}`, () => json({ ...run, engine: "0.9.0" }));
    server.on(`GET ${base}/scenarios/${SCENARIO_ID}/revisions/3`, () =>
      json({ number: 3, name: "Balancer rig 1", note: "", author: FENNICK, savedAt: run.createdAt, verdict: run.verdict, scenario: onFloor }),
    );
    open();
    expect(await screen.findByText(/The floods of this run were drawn by engine 0\.9\.0/)).toBeDefined();
    expect(screen.queryByRole("region", { name: "Flood at the cursor" })).toBeNull();
  });
  it("tells that only one point in two of a long run is drawn", async () => {
    answer(encodeSeries(result, 2500).bytes);
    open();
    expect(await screen.findByText(/one point in 2 is kept and drawn/)).toBeDefined();
  });
  it("offers a way on when the run is gone, and when the server does not answer", async () => {
    answer();
    server.on(`GET ${base}/runs/${RUN_ID}`, () => refusal("not-found", 404));
    const { unmount } = open();
    expect(await screen.findByRole("link", { name: "To the scenarios" })).toBeDefined();
    expect(screen.getByText("Nothing is at this address")).toBeDefined();
    unmount();
    answer();
    server.on(`GET ${base}/runs/${RUN_ID}/series`, noAnswer);
    const { user } = open();
    const again = await screen.findByRole("button", { name: "Try now" });
    expect(screen.getByRole("link", { name: "To the runs" })).toBeDefined();
    answer();
    await user.click(again);
    expect(await screen.findByText("All five limits kept.")).toBeDefined();
  });
});
