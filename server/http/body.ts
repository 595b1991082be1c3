/** Request bodies: JSON only, read whole, with a size that is said and the place where JSON breaks. */
import express, { type ErrorRequestHandler, type RequestHandler } from "express";
import { MAX_SCENARIO_BYTES } from "#shared/api/errors.ts";
import { parseJson } from "#shared/api/json.ts";
import { HttpError } from "./errors.ts";
import { tooLarge } from "./file.ts";

/** Read this far, so that somebody who sends a file of 10 MB gets an answer instead of a broken connection. */
const READ_BYTES = 12_000_000;
/** Note, field names and the like around a scenario. */
const ENVELOPE_BYTES = 10_000;
const SMALL_BYTES = 100_000;

const decode: (permittedBytes: number, shownBytes: number) => RequestHandler = (permittedBytes, shownBytes) => (request, _response, next) => {
  if (!Buffer.isBuffer(request.body)) {
    if (Number(request.headers["content-length"] ?? 0) > 0 || request.headers["transfer-encoding"])
      throw new HttpError("not-json-type", "Requests to the API are JSON: send Content-Type application/json.");
    request.body = undefined;
    return next();
  }
  if (request.body.length === 0) {
    request.body = undefined;
    return next();
  }
  if (request.body.length > permittedBytes) throw tooLarge(request.body.length, shownBytes);
  const parsed = parseJson(request.body.toString("utf8"));
  if (!parsed.ok) throw new HttpError("not-json", parsed.message, { position: parsed.position });
  request.body = parsed.value;
  next();
};

const refuse =
  (permittedBytes: number): ErrorRequestHandler =>
  (error, request, response, next) => {
    if (error?.type === "entity.too.large") {
      // Take the rest in, or the sender would see a reset connection before the answer.
      request.resume();
      response.setHeader("Connection", "close");
      return next(tooLarge(typeof error.length === "number" ? error.length : null, permittedBytes));
    }
    if (error?.type === "request.aborted") return;
    next(error);
  };

const reader = (limit: number) => express.raw({ type: ["application/json", "application/*+json"], limit });

/** For bodies that carry a scenario. */
export const scenarioBody: (RequestHandler | ErrorRequestHandler)[] = [
  reader(READ_BYTES),
  refuse(MAX_SCENARIO_BYTES),
  decode(MAX_SCENARIO_BYTES + ENVELOPE_BYTES, MAX_SCENARIO_BYTES),
];
export const smallBody: (RequestHandler | ErrorRequestHandler)[] = [reader(SMALL_BYTES), refuse(SMALL_BYTES), decode(SMALL_BYTES, SMALL_BYTES)];
