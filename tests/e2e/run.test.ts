/** A kept run: the same numbers as on the bench, to look at, to play and to take away. */
import { readFileSync } from "node:fs";
import { parseScenario } from "#shared/scenario/parse.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { keepRun, makeScenario, pendulum } from "./api.ts";
import { expect, test, type Visit } from "./app.ts";
import { benchOf } from "./bench.ts";

async function exported({ page }: Visit, entry: RegExp): Promise<Buffer> {
  await page.getByRole("button", { name: "Export" }).click();
  const download = page.waitForEvent("download");
  await page.getByRole("menuitem", { name: entry }).click();
  return readFileSync(await (await download).path());
}

test("a run kept from the bench has the same digest here, on the server and in Node", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const scenario = { ...pendulum(), name: "To be kept" };
  const { id } = await makeScenario(visit, scenario);
  await benchOf(page).open(visit, id);
  await page.getByRole("button", { name: "Keep this run" }).click();
  await page.getByText(/^Kept: revision 1, seed/).waitFor();
  await page.getByRole("link", { name: "Open the run" }).click();
  await page.getByText("This browser computed the same run, bit for bit.").waitFor();
  const outcome = simulate(scenario);
  await page.getByText(outcome.ok ? digestRun(outcome.result) : "none").waitFor();
});

test("a run is taken away as CSV, PNG and as a scenario with its losses written out that gives the same run", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer");
  const scenario = { ...pendulum(), name: "To be exported" };
  const run = await keepRun(visit, await makeScenario(visit, scenario), 5);
  await visit.page.goto(`/teams/${visit.team.id}/runs/${run.id}`);
  await visit.page.getByText("This browser computed the same run, bit for bit.").waitFor();
  const outcome = simulate(scenario, 5);
  if (!outcome.ok) throw new Error(outcome.issues[0].message);
  const { series, rounds } = outcome.result;

  const csv = (await exported(visit, /^Series, all .* as CSV/)).toString("utf8").trim().split(/\r?\n/);
  expect(csv[0]).toMatch(/angle/);
  const last = csv.at(-1)?.split(",").map(Number) ?? [];
  expect(csv.length - 1).toBe(series.t.length);
  // The file has ten significant digits.
  for (const [i, values] of [series.t, ...series.values].entries()) {
    const exact = values.at(-1) ?? Number.NaN;
    expect(Math.abs(last[i] - exact)).toBeLessThanOrEqual(1e-9 * Math.abs(exact));
  }

  const png = await exported(visit, /^Plots as PNG/);
  expect(png.subarray(1, 4).toString()).toBe("PNG");
  expect(png.readUInt32BE(16)).toBeGreaterThan(600);

  const explicit = JSON.parse((await exported(visit, /^Scenario with its losses and noise written out/)).toString("utf8"));
  const parsed = parseScenario(explicit);
  expect(parsed).toMatchObject({ ok: true });
  const again = simulate(explicit);
  if (!again.ok) throw new Error(again.issues[0].message);
  expect(again.result.rounds.commandDelivered).toEqual(rounds.commandDelivered);
  expect(again.result.series.values).toEqual(series.values);
});

test("an event moves the cursor to its time, and playing moves on from there", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const run = await keepRun(visit, await makeScenario(visit, { ...pendulum(), name: "To be played" }), 5);
  await page.goto(`/teams/${visit.team.id}/runs/${run.id}`);
  const events = page.getByRole("region", { name: "Events" });
  await events.getByRole("button", { name: /push/i }).first().click();
  const time = page.getByRole("slider").first();
  await expect.poll(async () => Number(await time.getAttribute("aria-valuenow"))).toBeCloseTo(4, 1);
  await page.getByRole("button", { name: /^Play/ }).first().click();
  await expect.poll(async () => Number(await time.getAttribute("aria-valuenow")), { timeout: 20_000 }).toBeGreaterThan(4.2);
});
