import type { RequestHandler } from "express";
import type { HealthResponse } from "#shared/api/session.ts";
import type { Connection } from "../db/client.ts";

export function health({ pool }: Connection): RequestHandler {
  return async (_request, response) => {
    const database = await pool.query("select 1").then(
      () => true,
      () => false,
    );
    const body: HealthResponse = { ok: database, database };
    response.status(database ? 200 : 503).json(body);
  };
}

/** Without a database no answer can be trusted, not even "you are signed out": every route says so, at once. */
export function databaseFirst({ pool }: Connection): RequestHandler {
  return async (_request, _response, next) => {
    await pool.query("select 1");
    next();
  };
}
