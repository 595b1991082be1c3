/** Debian packages, installed as root or by way of sudo. */
import { existsSync } from "node:fs";
import { isRoot, lastLines, run, say, seconds, Trouble } from "./system.mjs";

/** How to become root, or null where that is not possible. */
async function asRoot() {
  if (isRoot()) return [];
  if ((await run("sudo", ["-n", "true"], { quiet: true })).code === 0) return ["sudo"];
  // With a terminal, sudo may ask for the password itself.
  if (process.stdin.isTTY && (await run("sudo", ["--version"], { quiet: true })).code === 0) return ["sudo"];
  return null;
}

export async function installDebian(packages, topic, what, otherwise) {
  const byHand = `Install it yourself (apt-get install ${packages.join(" ")})${otherwise ? `, or ${otherwise}` : ""}.`;
  if (!existsSync("/usr/bin/apt-get")) throw new Trouble(`${what} is missing, and this system has no apt-get to install it. ${byHand}`);
  const prefix = await asRoot();
  if (!prefix) throw new Trouble(`${what} is missing, and installing it takes root or sudo. ${byHand}`);
  say(topic, `installing Debian's ${packages.join(", ")}; takes about a minute${prefix.length > 0 ? ", by way of sudo" : ""}`);
  const began = Date.now();
  const apt = async (...args) => {
    const line = [...prefix, "env", "DEBIAN_FRONTEND=noninteractive", "apt-get", "-qq", "-o", "DPkg::Lock::Timeout=300", ...args];
    return run(line[0], line.slice(1), { quiet: true, stdio: ["inherit", "pipe", "pipe"] });
  };
  const update = await apt("update");
  const install = await apt("install", "-y", "--no-install-recommends", ...packages);
  if (install.code !== 0) {
    const output = lastLines(`${update.code === 0 ? "" : `${update.output}\n`}${install.output}`);
    throw new Trouble(`${what} could not be installed. apt-get said:\n${output}\n${byHand}`);
  }
  say(topic, `installed in ${seconds(began)}`);
}
