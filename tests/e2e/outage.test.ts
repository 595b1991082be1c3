/** The database stops under a page that is being worked on, and comes back. A Holdfast of its own, since others would stop too. */
import { afterAll, beforeAll } from "vitest";
import { makeScenario, pendulum, readScenario } from "./api.ts";
import { expect, testAt } from "./app.ts";
import { benchOf } from "./bench.ts";
import { type Stack, startStack } from "./stack.ts";

let stack: Stack;
beforeAll(async () => {
  stack = await startStack();
});
afterAll(() => stack.stop());
const test = testAt(() => stack.address);

test("a stopped database is told, nothing typed is lost, and all goes on when it is back", async ({ holdfast }) => {
  holdfast.expectTrouble(/answer 503/);
  const visit = await holdfast.visit("engineer");
  const { page } = visit;
  const bench = benchOf(page);
  const { id } = await makeScenario(visit, { ...pendulum(), name: "Through an outage" });
  await bench.open(visit, id);
  await bench.unfold("Losses");
  await bench.field(/^Command lost/).fill("13");

  await stack.cluster.halt();
  await bench.save(2, "While the database was away");
  await page.getByText("The database does not answer.").first().waitFor();
  const newcomer = await holdfast.stranger();
  await newcomer.page.goto("/");
  await newcomer.page
    .getByText(/The database does not answer/)
    .first()
    .waitFor();

  await stack.cluster.start();
  await page.getByText("Connected again.").waitFor({ timeout: 30_000 });
  await page.getByRole("dialog", { name: "Save revision 2" }).getByRole("button", { name: "Save revision 2" }).click();
  await page.getByText("Saved as revision 2.").waitFor();
  const { latest } = await readScenario(visit, id);
  expect(latest).toMatchObject({ note: "While the database was away", scenario: { losses: { process: { command: 0.13 } } } });
  await newcomer.page.getByRole("heading", { name: "Sign in" }).waitFor({ timeout: 30_000 });
});
