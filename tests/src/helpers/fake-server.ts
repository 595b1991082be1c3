/** Answers of a server, route by route, in place of fetch; and what was asked of it. */
import { afterEach, beforeEach, vi } from "vitest";
import type { ErrorBody, ErrorCode } from "#shared/api/errors.ts";

export interface Asked {
  method: string;
  path: string;
  query: URLSearchParams;
  body: unknown;
}
type Answer = Response | Promise<Response>;
type Handler = (asked: Asked) => Answer;

export const json = (value: unknown, status = 200) =>
  new Response(JSON.stringify(value), { status, headers: { "Content-Type": "application/json" } });
export const refusal = (code: ErrorCode, status: number, message = `refused: ${code}`, details: Partial<ErrorBody["error"]> = {}) =>
  json({ error: { code, message, ...details } }, status);
/** As a browser says it when nobody listens at the address. */
export const noAnswer = () => Promise.reject(new TypeError("Failed to fetch"));

export function fakeServer() {
  const handlers = new Map<string, Handler>();
  const asked: Asked[] = [];
  const original = globalThis.fetch;

  beforeEach(() => {
    handlers.clear();
    asked.length = 0;
    globalThis.fetch = vi.fn(async (input: RequestInfo | URL, init: RequestInit = {}) => {
      if (init.signal?.aborted) throw init.signal.reason;
      const url = new URL(String(input), "http://holdfast.test");
      const one: Asked = {
        method: init.method ?? "GET",
        path: url.pathname,
        query: url.searchParams,
        body: typeof init.body === "string" ? JSON.parse(init.body) : undefined,
      };
      asked.push(one);
      const handler = handlers.get(`${one.method} ${one.path}`);
      if (!handler) throw new Error(`The fake server has no answer to ${one.method} ${one.path}.`);
      return handler(one);
    }) as typeof fetch;
  });
  afterEach(() => {
    globalThis.fetch = original;
  });

  return {
    asked,
    /** `on("GET /api/session", () => json(...))`; a later answer replaces the earlier one. */
    on(route: string, handler: Handler) {
      handlers.set(route, handler);
    },
    askedOf: (route: string) => asked.filter(({ method, path }) => `${method} ${path}` === route),
  };
}
