/** Puts the server together and runs it: `tsx server/index.ts`, with --dev for a client that rebuilds itself. */
import { once } from "node:events";
import { createServer, type Server } from "node:http";
import { fileURLToPath } from "node:url";
import pino from "pino";
import { type App, createApp } from "./app.ts";
import { connect } from "./db/client.ts";
import { isDatabaseDown } from "./db/failures.ts";
import { migrateDatabase } from "./db/migrate.ts";
import { seedDemo } from "./db/seed.ts";
import { readEnv } from "./env.ts";
import { refreshSummaries } from "./features/scenarios/refresh.ts";
import { builtClient, builtPolicy, securityHeaders } from "./http/client.ts";
import { sessionSecret } from "./http/session.ts";

const HOST = "127.0.0.1";
const PORTS_TRIED = 20;
const CLOSE_WITHIN_MS = 3_000;
const CLIENT = fileURLToPath(new URL("../dist/client", import.meta.url));

const say = (line: string) => process.stdout.write(`${line}\n`);

/** Listens on the port, or on the next one that is free. */
async function listen(server: Server, wanted: number): Promise<number> {
  for (let port = wanted; port < wanted + PORTS_TRIED && port <= 65_535; port++) {
    server.listen(port, HOST);
    try {
      await once(server, "listening");
      return port;
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code !== "EADDRINUSE") throw error;
      say(`Port ${port} is taken by another program; trying ${port + 1}.`);
    }
  }
  throw new Error(`No free port from ${wanted} to ${wanted + PORTS_TRIED - 1}. Set PORT to another one.`);
}

async function developmentClient(server: Server) {
  const { createServer: createVite } = await import("vite");
  const vite = await createVite({ appType: "spa", server: { middlewareMode: true, ws: { server } } });
  return {
    client: vite.middlewares,
    security: securityHeaders({ scripts: ["'unsafe-inline'"], connections: ["ws:"] }),
    close: () => vite.close(),
  };
}

const productionClient = () => ({ client: builtClient(CLIENT), security: securityHeaders(builtPolicy(CLIENT)), close: async () => undefined });

async function main(): Promise<void> {
  const env = readEnv(process.env);
  const log = pino({ level: env.LOG_LEVEL }, pino.destination(2));
  await migrateDatabase(env.DATABASE_URL);
  await refreshSummaries(env.DATABASE_URL, log);
  if (env.HOLDFAST_DEMO) await seedDemo(env.DATABASE_URL);

  const connection = connect(env.DATABASE_URL, log);
  const server = createServer();
  const client = process.argv.includes("--dev") ? await developmentClient(server) : productionClient();
  const secret = env.HOLDFAST_SESSION_SECRET ?? (await sessionSecret(connection));
  const app: App = createApp({ connection, log, sessionSecret: secret, demo: env.HOLDFAST_DEMO, ...client });
  app.warmUp().catch((error: unknown) => log.error({ err: error }, "The thread of the runs did not start"));
  server.on("request", app.app);
  const port = await listen(server, env.PORT);

  let closing = false;
  const close = async () => {
    // A second signal means: now.
    if (closing) process.exit(1);
    closing = true;
    const closed = once(server, "close");
    server.close();
    server.closeIdleConnections();
    const impatience = setTimeout(() => server.closeAllConnections(), CLOSE_WITHIN_MS);
    await app.close();
    await client.close();
    await closed;
    clearTimeout(impatience);
    await connection.pool.end();
  };
  for (const signal of ["SIGINT", "SIGTERM"] as const) process.on(signal, () => void close());
  say(`Holdfast is at http://${HOST}:${port}`);
}

main().catch((error: unknown) => {
  const message = error instanceof Error ? error.message : String(error);
  process.stderr.write(`${isDatabaseDown(error) ? `The database at DATABASE_URL does not answer: ${message}` : message}\n`);
  process.exit(1);
});
