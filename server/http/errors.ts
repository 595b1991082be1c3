/** Errors with a code for the page, and the one place that turns whatever was thrown into an answer. */
import { randomUUID } from "node:crypto";
import type { ErrorRequestHandler, Response } from "express";
import type { Logger } from "pino";
import type { ErrorBody, ErrorCode } from "#shared/api/errors.ts";
import { isDatabaseDown, isUnstorableText } from "../db/failures.ts";

const STATUS: Record<ErrorCode, number> = {
  "not-json": 400,
  "request-invalid": 400,
  "signed-out": 401,
  "wrong-credentials": 401,
  "not-permitted": 403,
  "foreign-origin": 403,
  "not-found": 404,
  "method-not-allowed": 405,
  "scenario-deleted": 410,
  "revision-conflict": 409,
  "scenario-archived": 409,
  "scenario-not-archived": 409,
  "in-use": 409,
  "too-large": 413,
  "not-json-type": 415,
  "type-not-taken": 415,
  "scenario-invalid": 422,
  "log-invalid": 422,
  "picture-invalid": 422,
  "too-many-attempts": 429,
  internal: 500,
  "database-unavailable": 503,
};

type Details = Omit<ErrorBody["error"], "code" | "message">;

export class HttpError extends Error {
  readonly code: ErrorCode;
  readonly details: Details;
  constructor(code: ErrorCode, message: string, details: Details = {}) {
    super(message);
    this.code = code;
    this.details = details;
  }
}

/** Whoever sent a file has gone, or was too slow: there is nobody to answer. */
export class BrokenOff extends Error {}

/** The same for what is not there, what belongs to another team and what never was an id. */
export const notFound = () => new HttpError("not-found", "There is nothing at this address, or it is not your team's.");

function sendError(response: Response, { code, message, details }: HttpError): void {
  const body: ErrorBody = { error: { code, message, ...details } };
  response.status(STATUS[code]).json(body);
}

function asHttpError(error: unknown, log: Logger): HttpError {
  if (error instanceof HttpError) return error;
  if (isDatabaseDown(error)) {
    log.warn({ err: error }, "The database does not answer");
    return new HttpError("database-unavailable", "The database does not answer. Nothing is lost; try again in a moment.");
  }
  if (isUnstorableText(error)) {
    return new HttpError("request-invalid", "A text holds the character U+0000, which cannot be stored. Remove it.");
  }
  // An address that cannot be decoded, a file that is not there: Express and its parts say so by status.
  const status = (error as { status?: unknown } | null)?.status;
  if (error instanceof URIError || status === 404) return notFound();
  if (typeof status === "number" && status >= 400 && status < 500) return new HttpError("request-invalid", "The request cannot be read.");
  const reference = randomUUID().slice(0, 8);
  log.error({ err: error, reference }, "A request failed");
  return new HttpError("internal", `Something went wrong on the server. Its log has the cause under ${reference}.`, { reference });
}

export function errorHandler(log: Logger): ErrorRequestHandler {
  return (error, _request, response, _next) => {
    // There is nobody left to tell.
    if (error instanceof BrokenOff) return void response.destroy();
    const known = asHttpError(error, log);
    // A session that cannot be saved is reported after the answer has begun; there is nobody left to tell.
    if (response.headersSent) return;
    if (known.code === "too-many-attempts" && known.details.retryAfterS) response.setHeader("Retry-After", known.details.retryAfterS);
    sendError(response, known);
  };
}
