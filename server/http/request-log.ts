import type { RequestHandler } from "express";
import type { Logger } from "pino";

/** One line a request, without bodies, cookies or query. */
export function requestLog(log: Logger): RequestHandler {
  return (request, response, next) => {
    const from = performance.now();
    const { method, path } = request;
    response.on("finish", () => log.info({ method, path, status: response.statusCode, ms: Math.round(performance.now() - from) }, "request"));
    next();
  };
}
