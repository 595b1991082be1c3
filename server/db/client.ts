import { drizzle, type NodePgDatabase } from "drizzle-orm/node-postgres";
import pg from "pg";
import type { Logger } from "pino";
import * as schema from "./schema.ts";

export type Database = NodePgDatabase<typeof schema>;
/** A database or a transaction in it. */
export type Queries = Pick<Database, "select" | "selectDistinctOn" | "insert" | "update" | "delete" | "execute" | "$count">;

export interface Connection {
  pool: pg.Pool;
  db: Database;
}

const CONNECT_WITHIN_MS = 2_000;
const QUERY_WITHIN_MS = 20_000;

/** Opens no connection by itself; the pool connects, and connects anew after an outage, when a query comes. */
export function connect(url: string, log: Logger): Connection {
  const pool = new pg.Pool({
    connectionString: url,
    connectionTimeoutMillis: CONNECT_WITHIN_MS,
    query_timeout: QUERY_WITHIN_MS,
    statement_timeout: QUERY_WITHIN_MS,
    max: 10,
    application_name: "holdfast",
  });
  // An idle connection that breaks is reported here; without a listener the process would end.
  pool.on("error", (error) => log.warn({ err: error }, "A database connection was lost"));
  return { pool, db: drizzle(pool, { schema, casing: "snake_case" }) };
}
