import express, { type Request, type RequestHandler, type Router } from "express";
import { ipKeyGenerator, rateLimit } from "express-rate-limit";
import { type DemoResponse, type SessionResponse, signInRequest } from "#shared/api/session.ts";
import { DEMO_PASSWORD, DEMO_PEOPLE } from "../../db/demo.ts";
import { smallBody } from "../../http/body.ts";
import { HttpError } from "../../http/errors.ts";
import { beginSession, endSession, SESSION_MS } from "../../http/session.ts";
import { validated } from "../../http/validation.ts";
import type { SessionService } from "./service.ts";

const WINDOW_MS = 15 * 60 * 1000;
const FAILURES_PER_ADDRESS_AND_MAIL = 10;
const FAILURES_PER_ADDRESS = 100;

/** Counts failed sign-ins only. */
const failures = (limit: number, key: (request: Request) => string) =>
  rateLimit({
    windowMs: WINDOW_MS,
    limit,
    keyGenerator: key,
    standardHeaders: false,
    legacyHeaders: false,
    skipSuccessfulRequests: true,
    requestWasSuccessful: (_request, response) => response.statusCode !== 401,
    handler: (request, _response, next) => {
      const until = (request as Request & { rateLimit?: { resetTime?: Date } }).rateLimit?.resetTime;
      const retryAfterS = Math.max(1, Math.ceil(((until?.getTime() ?? Date.now() + WINDOW_MS) - Date.now()) / 1000));
      const minutes = Math.ceil(retryAfterS / 60);
      next(
        new HttpError("too-many-attempts", `Too many failed sign-ins. Try again in ${minutes} ${minutes === 1 ? "minute" : "minutes"}.`, {
          retryAfterS,
        }),
      );
    },
  });

const address = (request: Request) => ipKeyGenerator(request.ip ?? "");
const mail = (request: Request) =>
  String((request.body as { email?: unknown } | undefined)?.email ?? "")
    .trim()
    .toLowerCase()
    .slice(0, 254);

const SIGNED_OUT: SessionResponse = { user: null, memberships: [], expiresAt: null };

export function sessionRouter(service: SessionService, demo: boolean): Router {
  const router = express.Router();

  const whoIs = async (userId: string | undefined): Promise<SessionResponse> => {
    const found = userId ? await service.findUser(userId) : null;
    return found ? { ...found, expiresAt: new Date(Date.now() + SESSION_MS).toISOString() } : SIGNED_OUT;
  };

  router.get("/session", async (request, response) => {
    response.json(await whoIs(request.session.userId));
  });

  router.post(
    "/session",
    ...smallBody,
    failures(FAILURES_PER_ADDRESS, address),
    failures(FAILURES_PER_ADDRESS_AND_MAIL, (request) => `${address(request)} ${mail(request)}`),
    (async (request, response) => {
      const { email, password } = validated(signInRequest, request.body, "Sign-in needs a mail address and a password");
      const userId = await service.checkPassword(email, password);
      if (!userId) throw new HttpError("wrong-credentials", "Mail address and password do not belong together. Check both.");
      await beginSession(request, userId);
      await service.recordSignIn(userId);
      response.json(await whoIs(userId));
    }) satisfies RequestHandler,
  );

  router.delete("/session", async (request, response) => {
    await endSession(request);
    response.clearCookie("holdfast.sid").json(SIGNED_OUT);
  });

  router.get("/demo", async (_request, response) => {
    const people = demo ? await service.peopleWith(DEMO_PEOPLE.map(({ email }) => email)) : [];
    const body: DemoResponse = { password: people.length > 0 ? DEMO_PASSWORD : null, people };
    response.json(body);
  });

  return router;
}
