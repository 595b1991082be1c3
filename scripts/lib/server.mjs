/** The server as a process of its own, out of reach of the terminal's Ctrl-C: this command ends it first and its database after. */
import { spawn } from "node:child_process";
import { once } from "node:events";
import { createInterface } from "node:readline";
import { onClose, ROOT, say, Trouble } from "./system.mjs";

const ADDRESS = /^Holdfast is at (http:\S+)$/;

/** Starts it and waits until it listens; `ended` settles when it stops by itself or by `stop`. */
export async function startServer(args, env) {
  const child = spawn(process.execPath, ["--import", "./scripts/lib/with-parent.mjs", ...args], {
    cwd: ROOT,
    env: { ...process.env, ...env },
    stdio: ["ignore", "pipe", "inherit", "ipc"],
    detached: true,
  });
  const ended = once(child, "exit");
  const stop = async () => {
    if (child.exitCode === null && child.signalCode === null) child.kill("SIGTERM");
    await ended;
  };
  onClose(stop);
  const address = await new Promise((resolve, reject) => {
    createInterface({ input: child.stdout }).on("line", (line) => {
      const found = ADDRESS.exec(line);
      if (found) resolve(found[1]);
      else say("server", line);
    });
    ended.then(([code]) => reject(new Trouble(`The server did not start${code === null ? "" : ` (exit code ${code})`}; what it said stands above.`)));
  });
  return { address, ended, stop };
}

/** The block at the end of a start. The sign-ins come from the server itself: whoever removed the demo team sees none. */
export async function announce(address) {
  const { password, people } = await (await fetch(`${address}/api/demo`)).json();
  const lines = ["", `  Holdfast is at ${address}`, ""];
  if (people.length > 0) {
    lines.push(`  Demo sign-ins, all with the password ${password}`);
    for (const { name, email, memberships } of people) {
      const roles = memberships.map(({ team, roles }) => `${roles.join(", ")} (${team})`).join("; ");
      lines.push(`    ${email.padEnd(34)}${name.padEnd(18)}${roles}`);
    }
    lines.push("");
  }
  lines.push("  Ctrl-C stops the server and its database.", "", "");
  process.stdout.write(lines.join("\n"));
}
