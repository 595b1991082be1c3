/** The scenario's page as a person reads it: sections, fields and the verdict by their names. */
import type { Page } from "playwright-core";
import { expect, type Visit } from "./app.ts";

export function benchOf(page: Page) {
  const bench = page.getByRole("region", { name: "Live bench" });
  // The first paragraph of the bench: its verdict, or what stands in its place.
  const verdict = () => bench.locator("p").first().textContent();
  return {
    verdict,
    async open({ team }: Visit, scenarioId: string): Promise<void> {
      await page.goto(`/teams/${team.id}/scenarios/${scenarioId}`);
      await bench.getByText(/run in/).waitFor();
    },
    /** Unfolds a section of the set-up, unless it is open. */
    async unfold(title: string): Promise<void> {
      const section = page.getByRole("group").filter({ has: page.getByRole("heading", { name: title, exact: true }) });
      if ((await section.getAttribute("open")) === null) await section.getByRole("heading", { name: title, exact: true }).click();
    },
    field: (label: RegExp) => page.getByRole("textbox", { name: label }),
    /** Waits for a verdict that is another one than before, and gives it back. */
    async verdictOtherThan(before: string | null): Promise<string | null> {
      await expect.poll(verdict, { timeout: 15_000 }).not.toBe(before);
      return verdict();
    },
    async save(revision: number, note: string): Promise<void> {
      await page.getByRole("button", { name: `Save revision ${revision}` }).click();
      const dialog = page.getByRole("dialog", { name: `Save revision ${revision}` });
      await dialog.getByLabel("Note for the others").fill(note);
      await dialog.getByRole("button", { name: `Save revision ${revision}` }).click();
    },
  };
}
