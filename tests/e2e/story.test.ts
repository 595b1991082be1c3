/** The main job, end to end: open, run, change the loss, save, find again; alone, together, and after a session ended. */
import pg from "pg";
import { inject } from "vitest";
import { DEMO_PASSWORD } from "../../server/db/demo.ts";
import { makeScenario, pendulum, readScenario, saveRevision } from "./api.ts";
import { expect, personWith, test } from "./app.ts";
import { benchOf } from "./bench.ts";

test("a newcomer opens a scenario, worsens the loss, takes it back, does it again, saves it and finds it again", async ({ holdfast }) => {
  const { page } = await holdfast.stranger();
  const bench = benchOf(page);
  await page.goto("/");
  await page.getByRole("button", { name: `Sign in as ${personWith("engineer").name}` }).click();
  await page.getByRole("button", { name: /^New: Pendulum on cart/ }).click();
  await page.getByRole("heading", { level: 1, name: /^Pendulum on cart/ }).waitFor();

  const first = await bench.verdictOtherThan(null);
  expect(first).toMatch(/^Holds/);

  await bench.unfold("Losses");
  const loss = bench.field(/^Command lost/);
  const before = await loss.inputValue();
  const began = performance.now();
  await loss.fill("75");
  const worse = await bench.verdictOtherThan(first);
  console.info(`  new verdict ${Math.round(performance.now() - began)} ms after the edit, browser and test included`);
  expect(worse).toMatch(/^Crosses/);
  await page.getByRole("button", { name: "1 unsaved change" }).waitFor();

  await page.keyboard.press("Control+z");
  expect(await bench.verdictOtherThan(worse)).toBe(first);
  expect(await loss.inputValue()).toBe(before);
  await page.keyboard.press("Control+Shift+z");
  expect(await bench.verdictOtherThan(first)).toBe(worse);
  await page.getByRole("button", { name: /^Undo/ }).click();
  expect(await bench.verdictOtherThan(worse)).toBe(first);
  await page.getByRole("button", { name: /^Redo/ }).click();
  expect(await bench.verdictOtherThan(first)).toBe(worse);

  await bench.save(2, "Three of four commands lost");
  await page.getByText("Saved as revision 2.").waitFor();
  await page.reload();
  await page.getByRole("heading", { level: 1, name: /Revision 2, Three of four commands lost · all saved/ }).waitFor();
  expect(await bench.verdictOtherThan(null)).toBe(worse);
  await bench.unfold("Losses");
  expect(await loss.inputValue()).toBe("75");
});

test("a bad value is explained at its field, and the last good result stays", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const bench = benchOf(page);
  const { id } = await makeScenario(visit, { ...pendulum(), name: "Bad value" });
  await bench.open(visit, id);
  const good = await bench.verdict();
  await bench.unfold("Losses");
  const loss = bench.field(/^Command lost/);
  await loss.fill("120");
  expect(await loss.getAttribute("aria-invalid")).toBe("true");
  await page.getByRole("alert").filter({ hasText: "120" }).waitFor();
  expect(await page.getByRole("alert").filter({ hasText: "120" }).textContent()).toMatch(/0 to 100/);
  expect(await bench.verdictOtherThan(good)).toMatch(/^Last good result/);
  await loss.press("Escape");
  await expect.poll(bench.verdict).toBe(good);
});

test("two people save the same scenario: the second is told, puts the changes of both together and saves", async ({ holdfast }) => {
  holdfast.expectTrouble(/answer 409: POST .*\/revisions/);
  const rowan = await holdfast.visit("engineer");
  const tove = await holdfast.visit("administrator");
  const { id } = await makeScenario(rowan, { ...pendulum(), name: "Of two people" });
  await benchOf(rowan.page).open(rowan, id);
  await benchOf(tove.page).open(tove, id);

  await benchOf(rowan.page).unfold("Losses");
  await benchOf(rowan.page)
    .field(/^Command lost/)
    .fill("7");
  await benchOf(rowan.page).save(2, "Rowan's loss");
  await rowan.page.getByText("Saved as revision 2.").waitFor();

  await benchOf(tove.page).unfold("Losses");
  await benchOf(tove.page)
    .field(/^Measurement lost/)
    .fill("9");
  await benchOf(tove.page).save(2, "Tove's loss");
  const dialog = tove.page.getByRole("dialog", { name: `${personWith("engineer").name} saved revision 2 in the meantime` });
  await dialog.getByText("Rowan's loss").waitFor();
  await dialog.getByRole("radio", { name: /^Put my changes on theirs/ }).check();
  await dialog.getByRole("button", { name: "Put mine on theirs" }).click();
  await benchOf(tove.page).save(3, "Both");
  await tove.page.getByText("Saved as revision 3.").waitFor();
  const { latest } = await readScenario(tove, id);
  expect(latest).toMatchObject({ number: 3, scenario: { losses: { process: { command: 0.07, measurement: 0.09 } } } });
});

test("somebody who takes the other's revision keeps the own version in the browser", async ({ holdfast }) => {
  holdfast.expectTrouble(/answer 409: POST .*\/revisions/);
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const bench = benchOf(page);
  const { id, latest } = await makeScenario(visit, { ...pendulum(), name: "Given way" });
  await bench.open(visit, id);
  await bench.unfold("Losses");
  await bench.field(/^Command lost/).fill("33");
  await saveRevision(await holdfast.visit("administrator"), id, 1, { ...latest.scenario, description: "Theirs" });
  await bench.save(2, "Mine");
  const dialog = page.getByRole("dialog", { name: /saved revision 2 in the meantime/ });
  await dialog.getByRole("radio", { name: /^Take theirs/ }).check();
  await dialog.getByRole("button", { name: "Take theirs" }).click();
  await expect.poll(() => bench.field(/^Command lost/).inputValue()).not.toBe("33");
  await page.getByRole("button", { name: "Put it on the bench" }).click();
  await expect.poll(() => bench.field(/^Command lost/).inputValue()).toBe("33");
});

/** Ends everybody's session, as time would. */
async function endSessions(): Promise<void> {
  const client = new pg.Client({ connectionString: inject("databaseUrl") });
  await client.connect();
  await client.query("delete from sessions");
  await client.end();
}

test("a session that ends in mid-edit is signed in again on top of the page, and the save goes on", async ({ holdfast }) => {
  holdfast.expectTrouble(/answer 401/);
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const bench = benchOf(page);
  const { id } = await makeScenario(visit, { ...pendulum(), name: "Ended session" });
  await bench.open(visit, id);
  await bench.unfold("Losses");
  await bench.field(/^Command lost/).fill("11");
  await endSessions();
  await bench.save(2, "Through the end of a session");
  const dialog = page.getByRole("dialog", { name: "Sign in again" });
  await dialog.getByLabel("Password").fill(DEMO_PASSWORD);
  await dialog.getByRole("button", { name: "Sign in" }).click();
  await page.getByText("Saved as revision 2.").waitFor();
  expect((await readScenario(visit, id)).latest.scenario.losses.process).toMatchObject({ command: 0.11 });
});

test("an edit survives that the page is loaded anew after the session ended", async ({ holdfast }) => {
  holdfast.expectTrouble(/answer 401/);
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const bench = benchOf(page);
  const { id } = await makeScenario(visit, { ...pendulum(), name: "Loaded anew" });
  await bench.open(visit, id);
  await bench.unfold("Losses");
  await bench.field(/^Command lost/).fill("12");
  await page.getByRole("button", { name: "1 unsaved change" }).waitFor();
  await endSessions();
  await page.reload();
  await page.getByRole("button", { name: `Sign in as ${personWith("engineer").name}` }).click();
  await page.getByText(/Your unsaved changes of .* are back/).waitFor();
  await bench.unfold("Losses");
  expect(await bench.field(/^Command lost/).inputValue()).toBe("12");
});

test("a trainee may try every value and is not offered to save", async ({ holdfast }) => {
  const maker = await holdfast.visit("engineer");
  const { id } = await makeScenario(maker, { ...pendulum(), name: "For trainees" });
  const visit = await holdfast.visit("trainee");
  const bench = benchOf(visit.page);
  await bench.open(visit, id);
  const first = await bench.verdict();
  await bench.unfold("Losses");
  await bench.field(/^Command lost/).fill("75");
  expect(await bench.verdictOtherThan(first)).toMatch(/^Crosses/);
  expect(await visit.page.getByRole("button", { name: /^Save revision/ }).count()).toBe(0);
});
