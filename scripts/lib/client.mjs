/** The built page, made anew when anything that goes into it has changed. */
import { createHash } from "node:crypto";
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { lastLines, ROOT, run, say, seconds, Trouble } from "./system.mjs";

const INPUTS = ["index.html", "package-lock.json", "shared", "src", "tailwind.config.ts", "tsconfig.json", "vite.config.ts"];
const STAMP = join(ROOT, "dist/client.sha256");

function* filesIn(path) {
  if (!statSync(join(ROOT, path)).isDirectory()) yield path;
  else for (const name of readdirSync(join(ROOT, path)).sort()) yield* filesIn(`${path}/${name}`);
}

function fingerprint() {
  const hash = createHash("sha256");
  for (const input of INPUTS) {
    for (const file of filesIn(input)) hash.update(`${file}\0`).update(readFileSync(join(ROOT, file)));
  }
  return hash.digest("hex");
}

export async function ensureClient() {
  const wanted = fingerprint();
  if (existsSync(join(ROOT, "dist/client/index.html")) && existsSync(STAMP) && readFileSync(STAMP, "utf8") === wanted) return;
  say("page", "building; takes some seconds");
  const began = Date.now();
  const { code, output } = await run(process.execPath, ["node_modules/vite/bin/vite.js", "build", "--logLevel=warn"], { quiet: true });
  if (code !== 0) throw new Trouble(`The page could not be built. Vite said:\n${lastLines(output, 30)}`);
  mkdirSync(join(ROOT, "dist"), { recursive: true });
  writeFileSync(STAMP, wanted);
  say("page", `built in ${seconds(began)}`);
}
