import type { RequestHandler } from "express";
import { HttpError } from "./errors.ts";

const READING = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * Against forged requests: a browser says where a request comes from, and only our own pages may change anything.
 * A request without these headers is not from a browser's page. Together with cookies of SameSite=Lax and bodies of
 * application/json only, which no foreign form can send.
 */
export const ownPagesOnly: RequestHandler = (request, _response, next) => {
  if (READING.has(request.method)) return next();
  const site = request.headers["sec-fetch-site"];
  const origin = request.headers.origin;
  const foreignSite = site !== undefined && site !== "same-origin" && site !== "none";
  const foreignOrigin = origin !== undefined && (URL.canParse(origin) ? new URL(origin).host : null) !== request.headers.host;
  if (foreignSite || foreignOrigin) throw new HttpError("foreign-origin", "This request comes from another site's page and was not carried out.");
  next();
};
