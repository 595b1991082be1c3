/** One throw-away PostgreSQL for all test files of a run; each file makes a database of its own in it. */
import { startTestCluster } from "./database.ts";

export default async function setup() {
  const cluster = await startTestCluster();
  process.env.HOLDFAST_TEST_CLUSTER_URL = cluster.url;
  return () => cluster.remove();
}
