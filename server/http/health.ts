import type { RequestHandler } from "express";
import type pg from "pg";
import type { HealthResponse } from "#shared/api/session.ts";
import type { Connection } from "../db/client.ts";

const ANSWER_WITHIN_MS = 2_000;

/** Fails when the database does not answer, and soon when it only keeps silent. */
const ask = ({ pool }: Connection) => pool.query({ text: "select 1", query_timeout: ANSWER_WITHIN_MS } as pg.QueryConfig);

export function health(connection: Connection): RequestHandler {
  return async (_request, response) => {
    const database = await ask(connection).then(
      () => true,
      () => false,
    );
    const body: HealthResponse = { ok: database, database };
    response.status(database ? 200 : 503).json(body);
  };
}

/** Without a database no answer can be trusted, not even "you are signed out": every route says so, at once. */
export function databaseFirst(connection: Connection): RequestHandler {
  return async (_request, _response, next) => {
    await ask(connection);
    next();
  };
}
