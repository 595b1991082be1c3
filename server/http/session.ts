import { randomBytes } from "node:crypto";
import connectPgSimple from "connect-pg-simple";
import type { Request, RequestHandler } from "express";
import session from "express-session";
import type { Logger } from "pino";
import type { Connection } from "../db/client.ts";
import { settings } from "../db/schema.ts";

declare module "express-session" {
  interface SessionData {
    userId: string;
  }
}

/** Without a request for so long a session ends; every request moves the end on. */
export const SESSION_MS = 12 * 3600 * 1000;

/** The key that signs session cookies: made once and kept, so that a restart signs nobody out. */
export async function sessionSecret({ db }: Connection): Promise<string> {
  const key = "session-secret";
  await db
    .insert(settings)
    .values({ key, value: randomBytes(32).toString("base64url") })
    .onConflictDoNothing();
  const rows = await db.query.settings.findMany({ where: (row, { eq }) => eq(row.key, key) });
  return rows[0].value;
}

export function sessions({ pool }: Connection, secret: string, log: Logger): { middleware: RequestHandler; close(): Promise<void> } {
  const Store = connectPgSimple(session);
  const store = new Store({ pool, tableName: "sessions", errorLog: (...details) => log.warn({ details }, "The session store failed") });
  const middleware = session({
    store,
    secret,
    name: "holdfast.sid",
    resave: false,
    saveUninitialized: false,
    rolling: true,
    cookie: { httpOnly: true, sameSite: "lax", secure: "auto", maxAge: SESSION_MS },
  });
  return { middleware, close: async () => store.close() };
}

type Act = "regenerate" | "destroy" | "save";
const act = (request: Request, what: Act) =>
  new Promise<void>((resolve, reject) => request.session[what]((error?: unknown) => (error ? reject(error) : resolve())));

/** Signs a user in under a new session id, so that an id known before is worth nothing afterwards. */
export async function beginSession(request: Request, userId: string): Promise<void> {
  await act(request, "regenerate");
  request.session.userId = userId;
  await act(request, "save");
}

export const endSession = (request: Request): Promise<void> => act(request, "destroy");
