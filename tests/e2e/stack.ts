/** A whole Holdfast of its own for browser tests: cluster, demo team, built page, server on a free port. */
import { freePort } from "../../scripts/lib/ports.mjs";
import { startServer } from "../../scripts/lib/server.mjs";
import { startTestCluster, type TestCluster } from "../helpers/database.ts";

export interface Stack {
  address: string;
  databaseUrl: string;
  cluster: TestCluster;
  stop(): Promise<void>;
}

/** The page has to be built already; the global set-up does that once. */
export async function startStack(): Promise<Stack> {
  const cluster = await startTestCluster();
  const server = await startServer(["--import", "tsx", "server/index.ts"], {
    DATABASE_URL: cluster.url,
    PORT: String(await freePort()),
    NODE_ENV: "production",
    // What a test provokes, such as a stopped database, is not worth a line.
    LOG_LEVEL: "error",
  });
  return {
    address: server.address,
    databaseUrl: cluster.url,
    cluster,
    async stop() {
      await server.stop();
      await cluster.remove();
    },
  };
}
