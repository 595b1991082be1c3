/** The whole server as one Express application. Opens nothing, listens nowhere: that is index.ts. */
import express, { type Express, type RequestHandler, type Router } from "express";
import type { Logger } from "pino";
import type { Connection } from "./db/client.ts";
import { activityRoutes } from "./features/activity/routes.ts";
import { createLogReader } from "./features/logs/reader.ts";
import { logRoutes } from "./features/logs/routes.ts";
import { createLogService } from "./features/logs/service.ts";
import { memberRoutes } from "./features/members/routes.ts";
import { pictureRoutes } from "./features/pictures/routes.ts";
import { createPictureService } from "./features/pictures/service.ts";
import { revisionRoutes } from "./features/revisions/routes.ts";
import { runRoutes } from "./features/runs/routes.ts";
import { createRunService } from "./features/runs/service.ts";
import { createSimulator } from "./features/runs/simulator.ts";
import { scenarioRoutes } from "./features/scenarios/routes.ts";
import { createScenarioService } from "./features/scenarios/service.ts";
import { sessionRouter } from "./features/session/routes.ts";
import { createSessionService } from "./features/session/service.ts";
import { errorHandler, notFound } from "./http/errors.ts";
import { databaseFirst, health } from "./http/health.ts";
import { ownPagesOnly } from "./http/origin.ts";
import { requestLog } from "./http/request-log.ts";
import { sessions } from "./http/session.ts";
import { type TeamRoute, teamRouter } from "./http/team-routes.ts";

export interface Dependencies {
  connection: Connection;
  log: Logger;
  sessionSecret: string;
  /** Show the demo sign-ins. */
  demo: boolean;
  security: RequestHandler;
  /** Serves every address outside /api. */
  client: RequestHandler | Router;
}

export interface App {
  app: Express;
  /** Every route below /api/teams/:teamId, with the action that it needs. */
  teamRoutes: readonly TeamRoute[];
  /** Makes ready what the first requests would wait for. */
  warmUp(): Promise<void>;
  close(): Promise<void>;
}

export function createApp({ connection, log, sessionSecret, demo, security, client }: Dependencies): App {
  const { db } = connection;
  const simulator = createSimulator();
  const runs = createRunService(db, simulator);
  const scenarios = createScenarioService(db, runs, log);
  const reader = createLogReader();
  const session = sessions(connection, sessionSecret, log);
  const teamRoutes = [
    ...scenarioRoutes(db, scenarios),
    ...revisionRoutes(db, scenarios),
    ...runRoutes(db, runs, scenarios),
    ...logRoutes(db, createLogService(db, reader)),
    ...pictureRoutes(db, createPictureService(db)),
    ...memberRoutes(db),
    ...activityRoutes(db),
  ];

  const api = express.Router();
  api.use((_request, response, next) => {
    response.setHeader("Cache-Control", "no-store");
    next();
  });
  api.get("/health", health(connection));
  api.use(ownPagesOnly, databaseFirst(connection), session.middleware);
  api.use(sessionRouter(createSessionService(db), demo));
  api.use("/teams", teamRouter(db, teamRoutes));
  api.use(() => {
    throw notFound();
  });

  const app = express();
  app.disable("x-powered-by");
  app.set("query parser", "simple");
  app.set("etag", false);
  app.use(security, requestLog(log));
  app.use("/api", api);
  app.use(client);
  app.use(errorHandler(log));

  return {
    app,
    teamRoutes,
    warmUp: () => simulator.warmUp(),
    async close() {
      await Promise.all([simulator.stop(), reader.stop()]);
      await session.close();
    },
  };
}
