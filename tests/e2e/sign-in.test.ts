import { DEMO_PASSWORD } from "../../server/db/demo.ts";
import { expect, personWith, test } from "./app.ts";

test("a link from outside leads to signing in, and then to where it pointed", async ({ holdfast }) => {
  const { page } = await holdfast.stranger();
  await page.goto("/account");
  await page.getByRole("heading", { name: "Sign in" }).waitFor();
  await page.getByLabel("Mail address").fill(personWith("reviewer").email);
  await page.getByLabel("Password", { exact: true }).fill(DEMO_PASSWORD);
  await page.keyboard.press("Enter");
  await page.waitForURL("**/account");
  await page.getByRole("main").getByText(personWith("reviewer").email).first().waitFor();
});

test("a newcomer signs in with one press, and out again", async ({ holdfast }) => {
  const { page } = await holdfast.stranger();
  await page.goto("/");
  const { name } = personWith("engineer");
  await page.getByRole("button", { name: `Sign in as ${name}` }).click();
  await page.getByRole("heading", { name: "Scenarios", level: 1 }).waitFor();
  await page.getByRole("button", { name: `Account of ${name}` }).click();
  await page.getByRole("menuitem", { name: "Sign out" }).click();
  await page.getByRole("heading", { name: "Sign in" }).waitFor();
  await page.goto("/account");
  await page.getByRole("heading", { name: "Sign in" }).waitFor();
});

test("a wrong password is told, and the mail address stays", async ({ holdfast }) => {
  holdfast.expectTrouble(/answer 401: POST \/api\/session/);
  const { page } = await holdfast.stranger();
  await page.goto("/sign-in");
  const mail = page.getByLabel("Mail address");
  await mail.fill(personWith("engineer").email);
  await page.getByLabel("Password", { exact: true }).fill("not the password");
  await page.getByRole("button", { name: "Sign in", exact: true }).click();
  await page.getByRole("alert").filter({ hasText: "Mail address and password do not belong together" }).waitFor();
  expect(await mail.inputValue()).toBe(personWith("engineer").email);
});

test("the chosen theme is there before the first paint of the next visit", async ({ holdfast }) => {
  const { page } = await holdfast.stranger({ colorScheme: "light" });
  await page.goto("/sign-in");
  const ground = () => page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor);
  const light = await ground();
  await page.getByRole("button", { name: "Turn light and dark" }).click();
  await expect.poll(ground).not.toBe(light);
  const dark = await ground();
  // Without the page's own script: what the blocking one in the head does alone.
  await page.route(/\/assets\/.*\.js/, (route) => route.fulfill({ contentType: "text/javascript", body: "" }));
  await page.reload();
  expect(await ground()).toBe(dark);
});
