/** The one place that decides who may do what. No route of a team exists without an action of the role matrix. */
import { and, eq } from "drizzle-orm";
import express, { type Request, type RequestHandler, type Response, type Router } from "express";
import { z } from "zod";
import { type Action, actionText, may, type Role, rolesThatMay } from "#shared/api/permissions.ts";
import type { Database } from "../db/client.ts";
import { memberships, teams, users } from "../db/schema.ts";
import { scenarioBody, smallBody } from "./body.ts";
import { HttpError, notFound } from "./errors.ts";
import { type SentFile, sentFile, takeIn } from "./file.ts";
import { sendGzipped, sendJsonText } from "./send.ts";

/** Who asks, in which team, with which roles there. */
export interface Member {
  user: { id: string; name: string };
  team: { id: string; name: string };
  roles: Role[];
}

interface Call {
  member: Member;
  params: Record<string, string>;
  query: unknown;
  body: unknown;
  /** Of a route whose body is a file. */
  file: SentFile;
}

type Headers = Record<string, string>;
type Answer =
  | { status?: 200 | 201; body: unknown }
  /** JSON that is text already. */
  | { status?: 200 | 201; json: string }
  | { bytes: Buffer; headers: Headers }
  /** Packed by gzip, piece by piece; unpacked on the way to somebody who does not take gzip. */
  | { gzipped: AsyncIterable<Buffer>; headers: Headers };

export interface TeamRoute {
  method: "get" | "post" | "patch" | "delete";
  /** Below /api/teams/:teamId. */
  path: string;
  action: Action;
  body?: "scenario" | "small" | "file";
  /** Asked before anything of the body is read, and after the role. */
  before?: (member: Member) => void;
  handle(call: Call): Promise<Answer>;
}

const uuid = z.uuid();

/** An id from the address; what never was an id is answered like an id that is not there. */
export function idFrom(params: Record<string, string>, name: string): string {
  const parsed = uuid.safeParse(params[name]);
  if (!parsed.success) throw notFound();
  return parsed.data;
}

export function numberFrom(params: Record<string, string>, name: string): number {
  const text = params[name];
  if (!/^[1-9]\d{0,8}$/.test(text)) throw notFound();
  return Number(text);
}

const signedOut = () => new HttpError("signed-out", "You are signed out. Sign in to go on; what you typed is still there.");

async function findMember(db: Database, userId: string, teamId: string): Promise<Member | null | "unknown-user"> {
  const [row] = await db
    .select({ user: { id: users.id, name: users.name }, team: { id: teams.id, name: teams.name }, roles: memberships.roles })
    .from(users)
    .leftJoin(memberships, and(eq(memberships.userId, users.id), eq(memberships.teamId, teamId)))
    .leftJoin(teams, eq(teams.id, memberships.teamId))
    .where(eq(users.id, userId));
  if (!row) return "unknown-user";
  return row.team && row.roles ? { user: row.user, team: row.team, roles: row.roles } : null;
}

function listed(roles: Role[]): string {
  const named = roles.map((role) => `${/^[aeiou]/.test(role) ? "an" : "a"} ${role}`);
  return named.length === 1 ? named[0] : `${named.slice(0, -1).join(", ")} or ${named[named.length - 1]}`;
}

function allow(member: Member, action: Action): void {
  if (may(member.roles, action)) return;
  throw new HttpError("not-permitted", `You may not ${actionText(action)} in ${member.team.name}. Ask ${listed(rolesThatMay(action))} of the team.`);
}

async function send(request: Request, response: Response, answer: Answer): Promise<void> {
  if ("gzipped" in answer) await sendGzipped(request, response.set(answer.headers), answer.gzipped);
  else if ("bytes" in answer) response.set(answer.headers).send(answer.bytes);
  else if ("json" in answer) sendJsonText(response.status(answer.status ?? 200), answer.json);
  else response.status(answer.status ?? 200).json(answer.body);
}

const BODIES = { scenario: scenarioBody, small: smallBody, file: [takeIn] };

export function teamRouter(db: Database, routes: readonly TeamRoute[]): Router {
  const members = new WeakMap<Request, Member>();
  const router = express.Router();

  const enter: RequestHandler = async (request, _response, next) => {
    const { userId } = request.session;
    if (!userId) throw signedOut();
    const member = await findMember(db, userId, idFrom(request.params as Record<string, string>, "teamId"));
    if (member === "unknown-user") throw signedOut();
    if (!member) throw notFound();
    members.set(request, member);
    next();
  };
  const memberOf = (request: Request): Member => members.get(request) as Member;

  for (const { method, path, action, body = "small", before, handle } of routes) {
    const permitted: RequestHandler = (request, _response, next) => {
      allow(memberOf(request), action);
      before?.(memberOf(request));
      next();
    };
    const answer: RequestHandler = async (request, response) => {
      const { params, query, body: sent } = request;
      const call = { member: memberOf(request), params: params as Record<string, string>, query: { ...query }, body: sent, file: sentFile(request) };
      await send(request, response, await handle(call));
    };
    router[method](`/:teamId${path}`, enter, permitted, ...BODIES[body], answer);
  }
  for (const path of new Set(routes.map((route) => route.path))) {
    const methods = routes.filter((route) => route.path === path).map((route) => route.method.toUpperCase());
    router.all(`/:teamId${path}`, enter, (request, response) => {
      response.setHeader("Allow", methods.join(", "));
      throw new HttpError("method-not-allowed", `${request.method} is not possible here; permitted: ${methods.join(", ")}.`);
    });
  }
  return router;
}
