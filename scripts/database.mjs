/** npm run db:migrate, npm run db:seed: one step of npm start by itself, on the same database. */
import { openDatabase } from "./lib/database.mjs";
import { ensurePackages } from "./lib/packages.mjs";
import { command, say, Trouble } from "./lib/system.mjs";

const STEPS = {
  async migrate(url) {
    const { migrateDatabase } = await import("../server/db/migrate.ts");
    await migrateDatabase(url);
    say("database", "migrated");
  },
  async seed(url) {
    await STEPS.migrate(url);
    const { seedDemo } = await import("../server/db/seed.ts");
    say("database", (await seedDemo(url)) ? "demo team laid out" : "the demo team was laid out before; nothing to do");
  },
};

await command(async () => {
  const step = process.argv[2];
  if (!Object.hasOwn(STEPS, step)) throw new Trouble(`Say which step: ${Object.keys(STEPS).join(" or ")}.`);
  await ensurePackages();
  const { register } = await import("tsx/esm/api");
  register();
  await STEPS[step](await openDatabase());
});
