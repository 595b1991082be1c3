/** npm packages, exactly as the lock file has them. */
import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { lastLines, ROOT, run, say, seconds, Trouble } from "./system.mjs";

const packagesIn = (file) => JSON.parse(readFileSync(join(ROOT, file), "utf8")).packages;

/** npm keeps a copy of what it installed; a package for another processor or system may be left out. */
function upToDate() {
  const record = "node_modules/.package-lock.json";
  if (!existsSync(join(ROOT, record))) return false;
  const installed = packagesIn(record);
  return Object.entries(packagesIn("package-lock.json")).every(([path, wanted]) => {
    if (path === "") return true;
    const found = installed[path];
    return found ? found.version === wanted.version && found.integrity === wanted.integrity : Boolean(wanted.optional);
  });
}

export async function ensurePackages() {
  if (upToDate()) return;
  say("packages", "installing npm packages by the lock file; takes one to two minutes");
  const began = Date.now();
  const npm = process.env.npm_execpath?.endsWith(".js") ? [process.execPath, process.env.npm_execpath] : ["npm"];
  const { code, output } = await run(npm[0], [...npm.slice(1), "ci", "--no-audit", "--no-fund", "--loglevel=error"], {
    quiet: true,
    // Development packages are part of every command: the page is built and the tests run on this machine.
    env: { ...process.env, NODE_ENV: "development", npm_config_omit: "" },
  });
  if (code !== 0) throw new Trouble(`The npm packages could not be installed. npm said:\n${lastLines(output)}`);
  say("packages", `installed in ${seconds(began)}`);
}
