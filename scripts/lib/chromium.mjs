import { existsSync } from "node:fs";
import { installDebian } from "./debian.mjs";

export const CHROMIUM = "/usr/bin/chromium";

export async function ensureChromium() {
  if (!existsSync(CHROMIUM)) await installDebian(["chromium"], "browser", "Chromium, which the browser tests drive,");
}
