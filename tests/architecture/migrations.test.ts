import { execFileSync } from "node:child_process";
import { cpSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, expect, it } from "vitest";
import { ROOT } from "./files.ts";

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "holdfast-migrations-"));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

it("the migrations say the same as the schema: generating adds nothing", () => {
  const out = join(folder, "drizzle");
  cpSync(join(ROOT, "drizzle"), out, { recursive: true });
  const config = join(folder, "drizzle.config.ts");
  writeFileSync(
    config,
    `import config from ${JSON.stringify(join(ROOT, "drizzle.config.ts"))};\nexport default { ...config, out: ${JSON.stringify(out)} };\n`,
  );
  const said = execFileSync(process.execPath, [join(ROOT, "node_modules/drizzle-kit/bin.cjs"), "generate", `--config=${config}`], {
    cwd: ROOT,
    encoding: "utf8",
    stdio: ["ignore", "pipe", "pipe"],
  });
  expect(readdirSync(out).sort(), said).toEqual(readdirSync(join(ROOT, "drizzle")).sort());
}, 60_000);
