/** npm run check: types, lint, unused code. */
import { checkSource } from "./lib/checks.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { command } from "./lib/system.mjs";

await command(async () => {
  await ensurePackages();
  const { failed } = await checkSource();
  if (failed > 0) process.exitCode = 1;
});
