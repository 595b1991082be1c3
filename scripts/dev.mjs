/** npm run dev: the same database as npm start; the page follows each saved file, and the server starts anew. */
import { openDatabase } from "./lib/database.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { announce, startServer } from "./lib/server.mjs";
import { command } from "./lib/system.mjs";

await command(async () => {
  await ensurePackages();
  const url = await openDatabase();
  const watched = ["node_modules/tsx/dist/cli.mjs", "watch", "--clear-screen=false", "--exclude=**/node_modules/**", "server/index.ts", "--dev"];
  const { address, ended } = await startServer(watched, { DATABASE_URL: url, NODE_ENV: "development" });
  await announce(address);
  await ended;
});
