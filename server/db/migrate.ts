import { fileURLToPath } from "node:url";
import { drizzle } from "drizzle-orm/node-postgres";
import { migrate } from "drizzle-orm/node-postgres/migrator";
import pg from "pg";

const MIGRATIONS = fileURLToPath(new URL("../../drizzle", import.meta.url));
/** Any number that no other program would take for its own lock in this database. */
const LOCK = 7_305_416_211;

/** Runs `work` while no other process migrates or seeds the same database. */
export async function underLock<T>(url: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url, connectionTimeoutMillis: 2_000, application_name: "holdfast-migrate" });
  await client.connect();
  try {
    await client.query("select pg_advisory_lock($1)", [LOCK]);
    return await work(client);
  } finally {
    // Ending the connection gives the lock back.
    await client.end();
  }
}

export function migrateDatabase(url: string): Promise<void> {
  return underLock(url, async (client) => {
    await client.query("set client_min_messages to warning");
    await migrate(drizzle(client), { migrationsFolder: MIGRATIONS });
  });
}
