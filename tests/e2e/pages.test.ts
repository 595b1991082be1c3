/** Every page, in both themes, on a wall of pixels and on a small phone: accessible, nothing cut off, reachable by keys. */
import axe from "axe-core";
import type { Page } from "playwright-core";
import type { Scenario } from "#shared/scenario/schema.ts";
import { exampleFloor } from "#src/pages/floor/model/example-floor.ts";
import { newBlock, newInterferer, newWall } from "#src/pages/floor/model/floor-edits.ts";
import { anyLog, keepRun, makeScenario, pendulum, saveRevision } from "./api.ts";
import { expect, type Holdfast, test, type Visit } from "./app.ts";

interface Stop {
  name: string;
  path: string;
  /** A text that is there when the page is. */
  ready: RegExp;
}

/** A hall with everything that a floor may have on it. */
function onFloor(): Scenario {
  const laid = exampleFloor({ ...pendulum(), name: "A hall for every page" }, "Hall 2", 60, 32);
  const { floor } = laid;
  if (!floor) throw new Error("The example has a floor.");
  const nodes = floor.nodes.map((node, i) => (i === 4 ? { ...node, wayPoints: [{ atS: 20, xM: 30, yM: 20 }] } : node));
  const obstacles = [newWall(20, 0, 20, 12), newBlock(30, 8, 42, 10)];
  const interferers = [newInterferer(44, 6, 2462, 20, "Dryer")];
  return { ...laid, floor: { ...floor, nodes, obstacles, interferers }, losses: { ...laid.losses, process: { type: "flood" } } };
}

/** A scenario with two revisions and a run, and all pages that show it. */
async function stops(visit: Visit): Promise<Stop[]> {
  const made = await makeScenario(visit, { ...pendulum(), name: "For every page" });
  const saved = await saveRevision(visit, made.id, 1, { ...made.latest.scenario, description: "Changed once." });
  const run = await keepRun(visit, saved, 3);
  const hall = await makeScenario(visit, onFloor());
  const team = `/teams/${visit.team.id}`;
  return [
    { name: "scenarios", path: `${team}/scenarios`, ready: /of the team/ },
    { name: "no scenario found", path: `${team}/scenarios?search=nothing-of-this-name`, ready: /nothing-of-this-name/ },
    { name: "scenario", path: `${team}/scenarios/${made.id}`, ready: /run in/ },
    { name: "old revision", path: `${team}/scenarios/${made.id}?revision=1`, ready: /Revision 1/ },
    { name: "no floor", path: `${team}/scenarios/${made.id}/floor`, ready: /No floor yet|This flood/ },
    { name: "floor", path: `${team}/scenarios/${hall.id}/floor`, ready: /Delivered to|Lost at/ },
    { name: "revisions", path: `${team}/scenarios/${made.id}/revisions`, ready: /Saved for a test/ },
    { name: "runs", path: `${team}/scenarios/${made.id}/runs`, ready: /1 run|seed/i },
    { name: "run", path: `${team}/runs/${run.id}`, ready: /bit for bit/ },
    { name: "reception logs", path: `${team}/logs`, ready: /Hall 2, quiet shift/ },
    { name: "no log found", path: `${team}/logs?search=nothing-of-this-name`, ready: /nothing-of-this-name/ },
    { name: "upload a log", path: `${team}/logs/new`, ready: /or drop it here/ },
    { name: "log", path: `${team}/logs/${await anyLog(visit)}`, ready: /How long must I measure/ },
    { name: "team", path: `${team}/members`, ready: /Tove Saltby/ },
    { name: "account", path: "/account", ready: /rowan\.fennick@/ },
    { name: "methods", path: "/methods", ready: /Methods/ },
    { name: "not there", path: "/no/such/page", ready: /Nothing is at this address/ },
  ];
}

async function go(page: Page, { path, ready }: Stop): Promise<void> {
  await page.goto(path);
  await page.getByRole("main").getByText(ready).first().waitFor();
}

/** What axe finds against WCAG 2.2 AA, one line each. */
async function findings(page: Page): Promise<string[]> {
  await page.evaluate(axe.source);
  const { violations } = await page.evaluate(() =>
    (window as unknown as { axe: typeof axe }).axe.run({
      runOnly: ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"],
    }),
  );
  return violations.flatMap(({ id, nodes }) => nodes.map((node) => `${id} at ${node.target.join(" ")}: ${node.failureSummary}`));
}

/** What is wider than the window, if anything makes the page scroll sideways. */
const overflow = (page: Page) =>
  page.evaluate(() => {
    const { scrollWidth, clientWidth } = document.documentElement;
    if (scrollWidth <= clientWidth) return [];
    const wide = [...document.querySelectorAll("body *")].filter((element) => element.getBoundingClientRect().right > clientWidth + 1);
    return [`${scrollWidth} px in ${clientWidth} px`, ...wide.slice(0, 5).map((element) => element.outerHTML.slice(0, 120))];
  });

interface Look {
  colorScheme: "light" | "dark";
  width: number;
  /** Further widths at which nothing may be cut off. */
  also: number[];
}

/** Goes to every page and gives back everything that is wrong with any of them. */
async function look(holdfast: Holdfast, { colorScheme, width, also }: Look): Promise<string[]> {
  holdfast.expectTrouble(/answer 404/);
  const height = 800;
  const options = { colorScheme, viewport: { width, height }, reducedMotion: "reduce" } as const;
  const found: string[] = [];
  const check = async (page: Page, stop: Stop) => {
    await go(page, stop);
    found.push(...(await findings(page)).map((line) => `${stop.name}: ${line}`));
    for (const wide of [width, ...also]) {
      await page.setViewportSize({ width: wide, height });
      // The pictures follow the new width in the frames after it; what has not by then does not.
      await page
        .waitForFunction(() => document.documentElement.scrollWidth <= document.documentElement.clientWidth, null, { timeout: 2000 })
        .catch(() => {});
      found.push(...(await overflow(page)).map((line) => `${stop.name}, ${wide} px wide: ${line}`));
    }
    await page.setViewportSize({ width, height });
  };
  const visit = await holdfast.visit("engineer", options);
  for (const stop of await stops(visit)) await check(visit.page, stop);
  const { page } = await holdfast.stranger(options);
  await check(page, { name: "sign-in", path: "/sign-in", ready: /Demo team/ });
  return found;
}

test("every page is accessible in the light theme, and nothing is cut off between tablet and wall screen", async ({ holdfast }) => {
  expect(await look(holdfast, { colorScheme: "light", width: 1440, also: [768, 1024, 2560] })).toEqual([]);
}, 240_000);

test("every page is accessible in the dark theme", async ({ holdfast }) => {
  expect(await look(holdfast, { colorScheme: "dark", width: 1440, also: [] })).toEqual([]);
}, 240_000);

test("every page is accessible on a phone, and nothing is cut off", async ({ holdfast }) => {
  expect(await look(holdfast, { colorScheme: "light", width: 390, also: [360] })).toEqual([]);
}, 240_000);

/** Presses Tab from the top of the page until the focus leaves it; what was focused, by name. */
async function tabbed(page: Page): Promise<{ name: string; ring: boolean }[]> {
  const seen: { name: string; ring: boolean }[] = [];
  for (let presses = 0; presses < 300; presses++) {
    await page.keyboard.press("Tab");
    const at = await page.evaluate(() => {
      const element = document.activeElement;
      if (!element || element === document.body) return null;
      const labels = (element as HTMLInputElement).labels;
      const name = element.getAttribute("aria-label") ?? labels?.[0]?.textContent ?? element.textContent ?? "";
      const { boxShadow, outlineStyle } = getComputedStyle(element);
      return { name: name.trim(), ring: boxShadow !== "none" || outlineStyle !== "none" };
    });
    if (!at) return seen;
    seen.push(at);
  }
  throw new Error(`The focus does not leave the page; last: ${seen.slice(-5).map(({ name }) => name)}`);
}

test("every main control of the bench is reached by Tab, with a ring to be seen, and no trap", async ({ holdfast }) => {
  const visit = await holdfast.visit("engineer");
  const { id } = await makeScenario(visit, { ...pendulum(), name: "By keys alone" });
  await go(visit.page, { name: "scenario", path: `/teams/${visit.team.id}/scenarios/${id}`, ready: /run in/ });
  const seen = await tabbed(visit.page);
  expect(seen[0].name).toBe("Skip to the content");
  const names = seen.map(({ name }) => name);
  for (const wanted of [/^Scenarios$/, /account of/, /^More$/, /^Losses/, /^Command lost/, /^Another seed/, /^Keep this run$/, /^Play/]) {
    expect(
      names.some((name) => wanted.test(name)),
      `${wanted} among: ${names.join(" | ")}`,
    ).toBe(true);
  }
  expect(seen.filter(({ ring }) => !ring).map(({ name }) => name)).toEqual([]);
}, 120_000);
