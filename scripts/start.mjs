/** npm start: from a clean clone to a running Holdfast. Environment: PORT, DATABASE_URL, HOLDFAST_DEMO=off, LOG_LEVEL. */
import { ensureClient } from "./lib/client.mjs";
import { openDatabase } from "./lib/database.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { announce, startServer } from "./lib/server.mjs";
import { command, Trouble } from "./lib/system.mjs";

await command(async () => {
  await ensurePackages();
  const url = await openDatabase();
  await ensureClient();
  const { address, ended } = await startServer(["--import", "tsx", "server/index.ts"], { DATABASE_URL: url, NODE_ENV: "production" });
  await announce(address);
  await ended;
  throw new Trouble("The server has ended by itself; what it said stands above.");
});
