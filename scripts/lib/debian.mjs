/** Debian packages, installed as root or by way of sudo. */
import { existsSync } from "node:fs";
import { isRoot, lastLines, run, say, seconds, Trouble } from "./system.mjs";

/** How to become root, or null where that is not possible; `asks` when sudo wants a password, which takes a terminal. */
async function asRoot() {
  if (isRoot()) return { prefix: [], asks: false };
  if ((await run("sudo", ["-n", "true"], { quiet: true })).code === 0) return { prefix: ["sudo"], asks: false };
  const asks = process.stdin.isTTY && (await run("sudo", ["--version"], { quiet: true })).code === 0;
  return asks ? { prefix: ["sudo"], asks } : null;
}

export async function installDebian(packages, topic, what, otherwise) {
  const byHand = `Install it yourself (apt-get install ${packages.join(" ")})${otherwise ? `, or ${otherwise}` : ""}.`;
  if (!existsSync("/usr/bin/apt-get")) throw new Trouble(`${what} is missing, and this system has no apt-get to install it. ${byHand}`);
  const root = await asRoot();
  if (!root) throw new Trouble(`${what} is missing, and installing it takes root or sudo. ${byHand}`);
  say(topic, `installing Debian's ${packages.join(", ")}; takes about a minute${isRoot() ? "" : ", by way of sudo"}`);
  const began = Date.now();
  const asAdministrator = (...line) => {
    const [command, ...args] = [...root.prefix, "env", "DEBIAN_FRONTEND=noninteractive", ...line];
    return run(command, args, { quiet: true, whole: !root.asks, stdio: ["inherit", "pipe", "pipe"] });
  };
  const apt = (...args) => asAdministrator("apt-get", "-qq", "-o", "DPkg::Lock::Timeout=300", ...args);
  const update = await apt("update");
  const install = () => apt("install", "-y", "--no-install-recommends", ...packages);
  let installed = await install();
  if (/dpkg was interrupted/.test(installed.output)) {
    await asAdministrator("dpkg", "--configure", "-a");
    installed = await install();
  }
  if (installed.code !== 0) {
    const output = lastLines(`${update.code === 0 ? "" : `${update.output}\n`}${installed.output}`);
    throw new Trouble(`${what} could not be installed. apt-get said:\n${output}\n${byHand}`);
  }
  say(topic, `installed in ${seconds(began)}`);
}
