/**
 * The browser of the end-to-end tests. `test` hands out signed-in pages and fails on what nobody expected: an error on
 * the console, an uncaught exception, an answer of 400 or more, a request that got none.
 */
import { mkdirSync } from "node:fs";
import { type Browser, type BrowserContext, type BrowserContextOptions, chromium, type Page } from "playwright-core";
import { test as base, expect, inject } from "vitest";
import type { Membership } from "#shared/api/session.ts";
import { CHROMIUM } from "../../scripts/lib/chromium.mjs";
import { DEMO_PASSWORD, DEMO_PEOPLE } from "../../server/db/demo.ts";

const SWITCHES = [
  ...["--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run"],
  ...["--disable-background-networking", "--disable-component-update", "--disable-sync"],
];
const OUTPUT = "tests/output";

export type Role = "engineer" | "reviewer" | "trainee" | "administrator";

/** The demo person who has this role in the first team. */
export const personWith = (role: Role) => {
  const found = DEMO_PEOPLE.find(({ roles }) => roles.northquay?.includes(role));
  if (!found) throw new Error(`No demo person is ${role}.`);
  return found;
};

export interface Visit {
  page: Page;
  context: BrowserContext;
  team: Membership["team"];
}

export interface Holdfast {
  address: string;
  /** A page of a person who is signed in already; it stands on the home page. */
  visit(role: Role, options?: BrowserContextOptions): Promise<Visit>;
  /** A page of somebody who is not. */
  stranger(options?: BrowserContextOptions): Promise<{ page: Page; context: BrowserContext }>;
  /** What this test provokes on purpose; everything else on a console or in an answer fails it. */
  expectTrouble(...patterns: RegExp[]): void;
}

/** Everything that went wrong in a context, one line each. */
function watch(context: BrowserContext, address: string, said: string[]): void {
  context.on("weberror", (error) => said.push(`uncaught: ${error.error().message}`));
  context.on("console", (message) => {
    // A failed answer is told by the response below, with its address.
    if (["error", "warning"].includes(message.type()) && !message.text().startsWith("Failed to load resource"))
      said.push(`console ${message.type()}: ${message.text()}`);
  });
  const path = (url: string) => url.replace(address, "");
  context.on("response", (response) => {
    if (response.status() >= 400) said.push(`answer ${response.status()}: ${response.request().method()} ${path(response.url())}`);
  });
  context.on("requestfailed", (request) => {
    const why = request.failure()?.errorText ?? "";
    // A page that goes away, or a newer query, gives up its requests.
    if (why !== "net::ERR_ABORTED") said.push(`no answer (${why}): ${request.method()} ${path(request.url())}`);
  });
}

const pictures = (name: string) => `${OUTPUT}/${name.replace(/[^a-z0-9]+/gi, "-").slice(0, 100)}`;

interface Fixtures {
  browser: Browser;
  holdfast: Holdfast;
}

/** Tests against the server at the given address; left out, the one that the global set-up started. */
export const testAt = (where: () => string) =>
  base.extend<Fixtures>({
    browser: [
      // biome-ignore lint/correctness/noEmptyPattern: the fixture's first argument has to be a pattern.
      async ({}, use) => {
        const browser = await chromium.launch({ executablePath: CHROMIUM, args: SWITCHES });
        await use(browser);
        await browser.close();
      },
      { scope: "file" },
    ],
    holdfast: async ({ browser, task }, use) => {
      const address = where();
      const said: string[] = [];
      const expected: RegExp[] = [];
      const contexts: BrowserContext[] = [];
      const stranger: Holdfast["stranger"] = async (options = {}) => {
        const context = await browser.newContext({ baseURL: address, viewport: { width: 1440, height: 900 }, ...options });
        context.setDefaultTimeout(15_000);
        contexts.push(context);
        watch(context, address, said);
        return { context, page: await context.newPage() };
      };
      await use({
        address,
        stranger,
        async visit(role, options) {
          const { context, page } = await stranger(options);
          const answer = await context.request.post("/api/session", { data: { email: personWith(role).email, password: DEMO_PASSWORD } });
          expect(answer.status(), await answer.text()).toBe(200);
          const { memberships } = (await answer.json()) as { memberships: Membership[] };
          await page.goto("/");
          return { page, context, team: memberships[0].team };
        },
        expectTrouble: (...patterns) => expected.push(...patterns),
      });
      if (task.result?.state === "fail") {
        mkdirSync(OUTPUT, { recursive: true });
        const pages = contexts.flatMap((context) => context.pages());
        for (const [i, page] of pages.entries()) await page.screenshot({ path: `${pictures(task.name)}-${i}.png`, fullPage: true }).catch(() => {});
      }
      for (const context of contexts) await context.close();
      expect(
        said.filter((line) => !expected.some((pattern) => pattern.test(line))),
        "nothing unexpected in the browser",
      ).toEqual([]);
    },
  });

export const test = testAt(() => inject("address"));
export { expect };
