import { readFileSync } from "node:fs";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { expect, test } from "./app.ts";

const [pendulum] = TEMPLATES;
const json = (change: (scenario: typeof pendulum.scenario) => unknown) => Buffer.from(JSON.stringify(change(structuredClone(pendulum.scenario))));

test("a template becomes a scenario and stands in the table, where it can be found, copied and put away", async ({ holdfast }) => {
  const { page } = await holdfast.visit("engineer");
  await page.getByRole("button", { name: /^New: Overhead crane/ }).click();
  await page.getByRole("heading", { level: 1, name: /^Overhead crane/ }).waitFor();
  await page
    .getByRole("region", { name: "Live bench" })
    .getByText(/run in/)
    .waitFor();

  await page.getByRole("navigation", { name: "Holdfast" }).getByRole("link", { name: "Scenarios" }).click();
  await page
    .getByRole("button", { name: /^More for Overhead crane/ })
    .first()
    .click();
  await page.getByRole("menuitem", { name: "Duplicate" }).click();
  const copy = page.getByRole("row").filter({ hasText: "Copy of Overhead crane" });
  await copy.first().waitFor();

  await page.getByRole("searchbox").fill("copy of overhead");
  await expect.poll(() => page.getByRole("rowgroup").last().getByRole("row").count()).toBe(1);
  await copy.getByRole("button", { name: /^More for/ }).click();
  await page.getByRole("menuitem", { name: "Archive" }).click();
  await expect.poll(() => copy.count()).toBe(0);
});

test("an import says field, value and permitted range, and takes the file when it is right", async ({ holdfast }) => {
  const { page } = await holdfast.visit("engineer");
  await page.getByRole("button", { name: "Import" }).click();
  const dialog = page.getByRole("dialog", { name: "Import a scenario" });
  const give = (name: string, buffer: Buffer) =>
    dialog.getByLabel("File of a scenario").setInputFiles({ name, mimeType: "application/json", buffer });

  await give("broken.json", Buffer.from('{ "format": "holdfast-scenario",\n  "version": NaN }'));
  await dialog.getByText(/not JSON: line 2, column 14/).waitFor();

  await give(
    "bad.json",
    json((scenario) => {
      scenario.loops[0].plant = { ...scenario.loops[0].plant, cartMassKg: -3 } as never;
      return { ...scenario, colour: "blue" };
    }),
  );
  const issues = dialog.getByRole("list", { name: "What has to be put right" });
  await issues.getByText("loops[0].plant.cartMassKg").waitFor();
  expect(await issues.textContent()).toMatch(/is -3 kg; permitted .* to .* kg/);
  expect(await issues.textContent()).toContain('"colour" is not a field here');

  await give("large.json", Buffer.alloc(10_000_000, " "));
  await dialog.getByText(/^This has .*MB; at most .*MB are taken\.$/).waitFor();

  await give(
    "good.json",
    json((scenario) => ({ ...scenario, name: "Brought along" })),
  );
  await dialog.getByRole("button", { name: "Import “Brought along”" }).click();
  await page.getByRole("heading", { level: 1, name: /^Brought along/ }).waitFor();
});

test("what is exported is what is imported", async ({ holdfast }) => {
  const { page, context, team } = await holdfast.visit("engineer");
  const made = await context.request.post(`/api/teams/${team.id}/scenarios`, {
    data: { scenario: { ...pendulum.scenario, name: "To and fro" }, note: "" },
    headers: { origin: holdfast.address },
  });
  expect(made.status()).toBe(201);
  await page.goto("/");
  await page.getByRole("button", { name: "More for To and fro" }).click();
  const download = page.waitForEvent("download");
  await page.getByRole("menuitem", { name: "Export as JSON" }).click();
  const file = await (await download).path();
  expect(JSON.parse(readFileSync(file, "utf8"))).toEqual({ ...pendulum.scenario, name: "To and fro" });
});

test("a trainee sees the table and is told who may make scenarios", async ({ holdfast }) => {
  const { page } = await holdfast.visit("trainee");
  await page.getByText(/You are a trainee in this team/).waitFor();
  expect(await page.getByRole("button", { name: "New scenario" }).count()).toBe(0);
});

test("a link to a scenario that is not there says so and offers a way on", async ({ holdfast }) => {
  holdfast.expectTrouble(/answer 404: GET \/api\/teams\/.*\/scenarios\/00000000/);
  const { page, team } = await holdfast.visit("engineer");
  await page.goto(`/teams/${team.id}/scenarios/00000000-0000-4000-8000-000000000000`);
  await page.getByRole("link", { name: "To the scenarios" }).click();
  await page.getByRole("heading", { name: "Scenarios", level: 1 }).waitFor();
});
