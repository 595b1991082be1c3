/** npm run holdfast: the command line. Installs what is missing without a word on standard output, which is the result's. */
import { ensurePackages } from "./lib/packages.mjs";
import { checkNode, Trouble } from "./lib/system.mjs";

try {
  checkNode();
  await ensurePackages();
} catch (error) {
  if (!(error instanceof Trouble)) throw error;
  process.stderr.write(`${error.message}\n`);
  process.exit(1);
}
const { register } = await import("tsx/esm/api");
register();
// npm runs its scripts in the project's folder; a file is named as seen from where the person stands.
if (process.env.INIT_CWD) process.chdir(process.env.INIT_CWD);
await import("../server/cli.ts");
