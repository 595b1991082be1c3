/** The floor in a browser: laid out, edited by mouse, finger and key, flooded, surveyed, saved and found again. */
import type { Page } from "playwright-core";
import type { Scenario } from "#shared/scenario/schema.ts";
import { makeScenario, pendulum, readScenario } from "./api.ts";
import { expect, test, type Visit } from "./app.ts";
import { benchOf } from "./bench.ts";

const withoutFloor = (name: string): Scenario => {
  const scenario = pendulum();
  return { ...scenario, name, floor: null, losses: { ...scenario.losses, process: { type: "bernoulli", measurement: 0.05, command: 0.05 } } };
};

async function openFloor({ page, team }: Visit, id: string): Promise<void> {
  await page.goto(`/teams/${team.id}/scenarios/${id}/floor`);
}

const node = (page: Page, id: number) => page.locator(`[data-thing="node:${id}"]`);
const middle = async (page: Page, id: number) => {
  const box = await node(page, id).boundingBox();
  if (!box) throw new Error(`Node ${id} is not to be seen.`);
  return { x: box.x + box.width / 2, y: box.y + box.height / 2 };
};
const across = (page: Page) => page.getByRole("textbox", { name: /^Across/ });

test("an engineer lays out a floor, moves nodes, draws a wall, lets floods decide, steps the wave, surveys, saves and finds all of it again", async ({
  holdfast,
}) => {
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const { id } = await makeScenario(visit, withoutFloor("A floor from nothing"));
  await openFloor(visit, id);

  await page.getByRole("textbox", { name: "Name" }).fill("Hall 7");
  await page.getByRole("textbox", { name: "Width" }).fill("48");
  await page.getByRole("textbox", { name: "Depth" }).fill("30");
  await page.getByRole("button", { name: "Place the loop and relays" }).click();
  await page.getByRole("group", { name: /^Plan of Hall 7, 48.*across/ }).waitFor();

  // By key: 0.1 m and 1 m.
  await node(page, 3).focus();
  const before = Number(await across(page).inputValue());
  await page.keyboard.press("ArrowLeft");
  await page.keyboard.press("Shift+ArrowLeft");
  await expect.poll(async () => Number(await across(page).inputValue())).toBeCloseTo(before - 1.1, 6);

  // By mouse, and back by undo.
  const from = await middle(page, 5);
  await page.mouse.move(from.x, from.y);
  await page.mouse.down();
  await page.mouse.move(from.x + 60, from.y + 30, { steps: 6 });
  await page.mouse.up();
  await page.getByRole("heading", { name: "Node 5", exact: true }).waitFor();
  const moved = await across(page).inputValue();
  await page.keyboard.press("Control+z");
  await expect.poll(() => across(page).inputValue()).not.toBe(moved);
  await page.keyboard.press("Control+Shift+z");
  await expect.poll(() => across(page).inputValue()).toBe(moved);

  await page.getByRole("button", { name: "Wall", exact: true }).click();
  const plan = await page.locator(".plan-svg").boundingBox();
  if (!plan) throw new Error("There is no plan.");
  await page.mouse.move(plan.x + plan.width * 0.4, plan.y + plan.height * 0.2);
  await page.mouse.down();
  await page.mouse.move(plan.x + plan.width * 0.4, plan.y + plan.height * 0.6, { steps: 6 });
  await page.mouse.up();
  await page.getByRole("heading", { name: "Wall 1" }).waitFor();
  await page.getByRole("textbox", { name: "Weakens by" }).fill("11");

  await page.getByRole("button", { name: "Interferer", exact: true }).click();
  await page.mouse.click(plan.x + plan.width * 0.75, plan.y + plan.height * 0.3);
  await page.getByRole("heading", { name: "Interferer 1" }).waitFor();
  await page.getByRole("combobox", { name: "Band of" }).selectOption({ label: "Wi-Fi 11, 20 MHz" });
  await page.keyboard.press("Escape");

  await page.getByRole("button", { name: "Let floods decide" }).click();
  await page.getByRole("button", { name: "Let floods decide" }).waitFor({ state: "detached" });

  const slider = page.getByRole("slider", { name: "Step of the flood" });
  await slider.focus();
  await page.keyboard.press("Home");
  expect(await slider.getAttribute("aria-valuetext")).toMatch(/^step 1 of/);
  await page.keyboard.press("ArrowRight");
  expect(await slider.getAttribute("aria-valuetext")).toMatch(/^step 2 of/);

  await page.getByRole("button", { name: "Survey the floor" }).click();
  await page.getByRole("columnheader", { name: /Half by step/ }).waitFor({ timeout: 60_000 });

  await benchOf(page).save(2, "On a floor");
  await page.getByText("Saved as revision 2.").waitFor();
  await page.reload();
  await page.getByRole("heading", { level: 1, name: /Revision 2, On a floor · all saved/ }).waitFor();
  await page.getByRole("group", { name: /^Plan of Hall 7/ }).waitFor();
  const { latest } = await readScenario(visit, id);
  const { floor, losses } = latest.scenario;
  expect(losses.process).toEqual({ type: "flood" });
  expect(floor?.obstacles).toEqual([expect.objectContaining({ type: "wall", lossDb: 11 })]);
  expect(floor?.interferers).toEqual([expect.objectContaining({ name: "Wi-Fi 11, 20 MHz", centreMHz: 2462, bandwidthMHz: 20 })]);
}, 180_000);

test("bench and floor show the same draft and the same instant", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const { id } = await makeScenario(visit, withoutFloor("One draft"));
  await openFloor(visit, id);
  await page.getByRole("button", { name: "Place the loop and relays" }).click();
  const round = page.getByRole("textbox", { name: /^Round, 0 to/ });
  await round.fill("120");
  await round.press("Enter");
  await page.getByRole("link", { name: "Bench" }).click();
  await page
    .getByRole("region", { name: "Live bench" })
    .getByText(/run in/)
    .waitFor();
  const text = await page.getByRole("region", { name: "Live bench" }).textContent();
  expect(text).toContain("120");
  await page.getByRole("button", { name: /unsaved change/ }).waitFor();
  await page.getByRole("navigation", { name: "One draft", exact: true }).getByRole("link", { name: "Floor" }).click();
  await expect.poll(() => round.inputValue()).toBe("120");
  await page.getByRole("button", { name: /^Undo/ }).click();
  await page.getByText("No floor yet").waitFor();
}, 120_000);

test("on a phone the plan is looked at: a finger chooses nodes and moves none, and the wave is stepped", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer", { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true });
  const { page } = visit;
  const { id } = await makeScenario(visit, withoutFloor("By finger"));
  await openFloor(visit, id);
  await page.getByRole("button", { name: "Place the loop and relays" }).tap();
  await node(page, 3).tap();
  await page.getByRole("heading", { name: "Node 3", exact: true }).waitFor();
  const place = await across(page).inputValue();
  await page.getByRole("button", { name: "Zoom in" }).tap();
  await page.getByRole("button", { name: "Step on" }).tap();
  expect(await across(page).inputValue()).toBe(place);
}, 120_000);

test("a picture of the hall is uploaded, scaled by two points and a distance, and what is no picture is explained", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const { id } = await makeScenario(visit, withoutFloor("With a picture"));
  await openFloor(visit, id);
  await page.getByRole("button", { name: "Start with an empty plan" }).click();
  await page.getByRole("button", { name: "Picture", exact: true }).click();
  const input = page.locator("[data-picture-file]");
  await input.setInputFiles({ name: "hall.pdf", mimeType: "application/pdf", buffer: Buffer.from("%PDF-1.7") });
  await page.getByText(/“hall.pdf” is no PNG or JPEG picture/).waitFor();
  // One pixel wide and high: enough to be a picture.
  const png = Buffer.from("iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNk+M9QDwADhgGAWjR9awAAAABJRU5ErkJggg==", "base64");
  await input.setInputFiles({ name: "hall.png", mimeType: "image/png", buffer: png });
  await page.getByText(/Press the first of two points/).waitFor();
  const plan = await page.locator(".plan-svg").boundingBox();
  if (!plan) throw new Error("There is no plan.");
  await page.mouse.click(plan.x + plan.width * 0.2, plan.y + plan.height * 0.3);
  await page.mouse.click(plan.x + plan.width * 0.6, plan.y + plan.height * 0.3);
  await page.getByRole("textbox", { name: "Distance" }).fill("10");
  await page.getByRole("button", { name: "Scale the picture" }).click();
  await page.getByRole("button", { name: "Set the scale by two points" }).waitFor();
  expect(Number(await page.getByRole("textbox", { name: /^One pixel/ }).inputValue())).toBeLessThan(72);
  await page.getByRole("button", { name: "Remove the picture" }).click();
  await page.getByRole("button", { name: "Upload a picture" }).waitFor();
}, 120_000);
