/** A reception log from the file to the bench: read, saved, fitted, replayed, and kept while it is in use. */
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { makeScenario, pendulum } from "./api.ts";
import { expect, test } from "./app.ts";

const ROUGH = "examples/logs/rough-recording.csv";
/** A busy machine takes its time. */
const PATIENT = { timeout: 20_000 };
const plain = (text: string | null) => (text ?? "").replaceAll("\u2009", " ").replaceAll("\u2060", "");

test("a rough recording is read, put right, saved, replayed in a scenario, and then not deletable", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer");
  const { page, team } = visit;
  const { id } = await makeScenario(visit, { ...pendulum(), name: "Meets what was received" });

  await page.getByRole("navigation", { name: "Holdfast" }).getByRole("link", { name: "Reception logs" }).click();
  await page.getByRole("link", { name: "Upload a log" }).click();
  await page.getByLabel("File of a reception log").setInputFiles(ROUGH);
  const sum = page.locator(".lg-sum");
  await expect.poll(async () => plain(await sum.textContent()), PATIENT).toMatch(/^2 links, 5 200 packets, 432 lost/);
  expect(await page.getByLabel("Divided by").inputValue()).toBe(";");
  await page.getByText("8 rows that cannot be read").waitFor();
  await page.getByText("line 820", { exact: true }).waitFor();

  // Every number once, whoever sent it: another reading of the same file, and then the first one again.
  await page.getByLabel("What From is").selectOption({ label: "not used" });
  await expect.poll(async () => plain(await sum.textContent()), PATIENT).toMatch(/^1 link, /);
  await page.getByLabel("What From is").selectOption({ label: "source" });
  await page.getByLabel("What RSSI is").selectOption({ label: "not used" });
  await expect.poll(async () => plain(await sum.textContent()), PATIENT).toMatch(/^2 links, 5 200 packets, 432 lost/);
  await page.getByRole("textbox", { name: "Name" }).fill("Pillar C4, night");
  await page.getByRole("button", { name: "Save the log" }).click();

  await page.getByRole("heading", { level: 1, name: "Pillar C4, night" }).waitFor();
  await page.getByText(/the server read 2 links in it, the same as this page/).waitFor();
  const log = page.url();
  const sheet = page.getByRole("region", { name: "Link K2 > K1" });
  expect(plain(await sheet.textContent())).toMatch(/Losses come in bursts of 2\.\d+ packets on average/);
  expect(plain(await sheet.textContent())).toMatch(/Mean burst, fitted2\.\d+ packetsbad to good/);
  await page
    .getByRole("navigation", { name: "Links of the log" })
    .getByRole("button", { name: /K6 > K1/ })
    .click();
  await page.getByRole("region", { name: "Link K6 > K1" }).waitFor();

  await page.getByRole("button", { name: "Use in a scenario" }).click();
  const dialog = page.getByRole("dialog");
  await dialog.getByLabel("Scenario", { exact: true }).selectOption(id);
  await dialog.getByText(/The run needs 400 rounds/).waitFor();
  await dialog.getByRole("button", { name: "Before the longest burst" }).click();
  await dialog.getByRole("button", { name: "Open the scenario with it" }).click();
  await page.getByRole("heading", { level: 1, name: /^Meets what was received/ }).waitFor();
  await page.getByText("1 unsaved change").waitFor();
  await page.getByText(/as recorded in “Pillar C4, night”/).waitFor();
  await page.getByText(/run in/).waitFor();
  await page.getByRole("button", { name: /^Undo/ }).click();
  await expect.poll(() => page.getByText("1 unsaved change").count(), PATIENT).toBe(0);
  await page.getByRole("button", { name: /^Redo/ }).click();
  await page.getByRole("button", { name: "Save revision 2" }).click();
  await page.getByRole("dialog").getByRole("button", { name: "Save revision 2" }).click();
  await page.getByText("Saved as revision 2.").waitFor();

  await page.goto(log);
  await page.getByRole("button", { name: "More for Pillar C4, night" }).click();
  await page.getByRole("menuitem", { name: /Delete/ }).click();
  const refusal = page.getByRole("dialog", { name: "“Pillar C4, night” is in use" });
  await refusal.getByText("revision 2").waitFor();
  expect(await refusal.getByRole("link", { name: "Meets what was received" }).getAttribute("href")).toBe(`/teams/${team.id}/scenarios/${id}`);
}, 120_000);

test("the page goes on moving while a log of 50 MB is read, and the reading can be stopped", async ({ holdfast }) => {
  const folder = mkdtempSync(join(tmpdir(), "holdfast-log-"));
  try {
    const file = join(folder, "long.csv");
    const block = Array.from({ length: 1000 }, (_, k) => `${k % 7 === 3 ? 0 : 1},-6${k % 10}.5,S1,C1,free text to make the row longer`).join("\n");
    writeFileSync(file, `ok,rssi,from,to,note\n${`${block}\n`.repeat(1100)}`);
    const { page, team } = await holdfast.visit("engineer");
    await page.goto(`/teams/${team.id}/logs/new`);
    await page.getByRole("button", { name: "Choose a file" }).waitFor();
    // The longest time for which nothing could have been drawn.
    await page.evaluate(() => {
      const seen = { first: performance.now(), last: performance.now(), longest: 0 };
      Object.assign(window, { seen });
      const tick = () => {
        const now = performance.now();
        seen.longest = Math.max(seen.longest, now - seen.last);
        seen.last = now;
        setTimeout(tick, 10);
      };
      tick();
    });
    await page.getByLabel("File of a reception log").setInputFiles(file);
    await page.getByText(/Reading the whole file/).waitFor();
    await page.getByRole("button", { name: "Stop reading" }).click();
    await page.getByText("The reading was stopped; nothing is known of the whole file yet.").waitFor();
    await page.getByRole("button", { name: "Read the file" }).click();
    await expect.poll(async () => plain(await page.locator(".lg-sum").textContent()), { timeout: 60_000 }).toMatch(/^1 link, 1 100 000 packets/);
    // Held up for the whole reading, it would have stood still for nearly all of this time, on a slow machine as on a quick one.
    const { first, last, longest } = await page.evaluate(() => (window as unknown as { seen: Record<"first" | "last" | "longest", number> }).seen);
    expect(longest).toBeLessThan((last - first) / 4);
  } finally {
    rmSync(folder, { recursive: true });
  }
}, 120_000);
