/** Throw-away PostgreSQL for tests: a cluster per process, or the one that `npm test` started, and a migrated database per test file. */
import { execFile, execFileSync } from "node:child_process";
import { randomBytes } from "node:crypto";
import { rmSync } from "node:fs";
import { chown, mkdtemp, readdir, rm } from "node:fs/promises";
import { createServer } from "node:net";
import { join } from "node:path";
import { promisify } from "node:util";
import pg from "pg";
import { migrateDatabase } from "#server/db/migrate.ts";

const run = promisify(execFile);

export interface TestCluster {
  /** Of the cluster's own "postgres" database. */
  url: string;
  /** Breaks every connection at once, as a power cut would look to the server. */
  halt(): Promise<void>;
  start(): Promise<void>;
  /** Stops it and removes its files. */
  remove(): Promise<void>;
}

export interface TestDatabase {
  url: string;
  remove(): Promise<void>;
}

async function programs(): Promise<string> {
  const root = "/usr/lib/postgresql";
  const versions = (await readdir(root)).filter((name) => /^\d+$/.test(name)).sort((a, b) => Number(b) - Number(a));
  if (!versions[0]) throw new Error(`No PostgreSQL below ${root}. Install Debian's package "postgresql".`);
  return join(root, versions[0], "bin");
}

/** PostgreSQL refuses to run as root; root hands over to the account that Debian's package made. */
const asPostgres = (file: string, args: string[]): [string, string[]] =>
  process.getuid?.() === 0 ? ["runuser", ["-u", "postgres", "--", file, ...args]] : [file, args];

/** Runs `undo` when this process ends before its time, by a signal too; gives back how to forget it. */
function whenBrokenOff(undo: () => void): () => void {
  const signals = ["SIGINT", "SIGTERM", "SIGHUP"] as const;
  const onSignal = (signal: NodeJS.Signals) => {
    forget();
    undo();
    // Without this listener the signal does what it is for.
    process.kill(process.pid, signal);
  };
  const forget = () => {
    for (const signal of signals) process.off(signal, onSignal);
    process.off("exit", undo);
  };
  for (const signal of signals) process.on(signal, onSignal);
  process.on("exit", undo);
  return forget;
}

async function freePort(): Promise<number> {
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const address = server.address();
  await new Promise((resolve) => server.close(resolve));
  if (address === null || typeof address === "string") throw new Error("No free port on loopback.");
  return address.port;
}

export async function startTestCluster(): Promise<TestCluster> {
  const bin = await programs();
  const directory = await mkdtemp("/tmp/holdfast-test-");
  if (process.getuid?.() === 0) {
    const { stdout } = await run("id", ["-u", "postgres"]);
    await chown(directory, Number(stdout), -1);
  }
  const data = join(directory, "data");
  const port = await freePort();
  await run(...asPostgres(join(bin, "initdb"), ["-D", data, "-U", "postgres", "--auth=trust", "--encoding=UTF8", "--locale=C", "--no-sync"]));
  const options = `-c listen_addresses=127.0.0.1 -p ${port} -k ${directory} -c fsync=off -c full_page_writes=off -c max_connections=200`;
  const control = (...args: string[]) => asPostgres(join(bin, "pg_ctl"), ["-D", data, "-w", "-l", join(directory, "log"), ...args]);
  const start = async () => void (await run(...control("-o", options, "start")));
  const stopping = control("-m", "immediate", "stop");
  const halt = async () => void (await run(...stopping));
  const forget = whenBrokenOff(() => {
    try {
      execFileSync(...stopping, { stdio: "ignore" });
    } catch {
      // It did not run.
    }
    rmSync(directory, { recursive: true, force: true });
  });
  await start();
  return {
    url: `postgres://postgres@127.0.0.1:${port}/postgres`,
    halt,
    start,
    async remove() {
      forget();
      await halt().catch(() => undefined);
      await rm(directory, { recursive: true, force: true });
    },
  };
}

async function administer(clusterUrl: string, statement: string): Promise<void> {
  const client = new pg.Client({ connectionString: clusterUrl });
  await client.connect();
  try {
    await client.query(statement);
  } finally {
    await client.end();
  }
}

/** A fresh database, migrated unless told otherwise. Uses the cluster at HOLDFAST_TEST_CLUSTER_URL, or starts one of its own. */
export async function createTestDatabase(
  clusterUrl = process.env.HOLDFAST_TEST_CLUSTER_URL,
  migrate: (url: string) => Promise<unknown> = migrateDatabase,
): Promise<TestDatabase> {
  const cluster = clusterUrl ? null : await startTestCluster();
  const admin = clusterUrl ?? (cluster as TestCluster).url;
  const name = `holdfast_test_${randomBytes(6).toString("hex")}`;
  await administer(admin, `create database ${name}`);
  const url = new URL(admin);
  url.pathname = `/${name}`;
  await migrate(url.href);
  return {
    url: url.href,
    remove: () => (cluster ? cluster.remove() : administer(admin, `drop database if exists ${name} with (force)`)),
  };
}
