/** The one way to the server: JSON in and out, errors with the codes of shared/api, an expired session and a server out of reach dealt with. */
import type { z } from "zod";
import { type ErrorBody, type ErrorCode, errorBodySchema } from "#shared/api/errors.ts";
import { connection } from "./connection.ts";
import { sessionExpiry } from "./session-expiry.ts";
import { sendFile, type Upload } from "./upload.ts";

/** "unreachable": no answer at all; "not-understood": an answer of another version, or of something in between. */
export type ClientErrorCode = ErrorCode | "unreachable" | "not-understood";

export class ApiError extends Error {
  readonly code: ClientErrorCode;
  readonly status: number;
  /** Issues, the newer revision, the size and so on, as far as the server gave them. */
  readonly details: Partial<ErrorBody["error"]>;
  constructor(code: ClientErrorCode, message: string, status = 0, details: Partial<ErrorBody["error"]> = {}) {
    super(message);
    this.name = "ApiError";
    this.code = code;
    this.status = status;
    this.details = details;
  }
}

export const isApiError = (error: unknown, ...codes: ClientErrorCode[]): error is ApiError =>
  error instanceof ApiError && (codes.length === 0 || codes.includes(error.code));

/** Nothing is wrong with the request: it can be sent again when the server is back. */
export const isOutage = (error: unknown): error is ApiError => isApiError(error, "unreachable", "database-unavailable");

export interface RequestOptions {
  method?: "GET" | "POST" | "PATCH" | "PUT" | "DELETE";
  body?: unknown;
  /** A file instead of a body of JSON. */
  upload?: Upload;
  signal?: AbortSignal;
  /** Signing in itself: "signed out" is then an answer, not an interruption. */
  anonymous?: boolean;
}

async function send(path: string, { method = "GET", body, upload, signal }: RequestOptions): Promise<Response> {
  try {
    if (upload) return await sendFile(path, method, upload, signal);
    return await fetch(path, {
      method,
      signal,
      credentials: "same-origin",
      headers: { Accept: "application/json", ...(body === undefined ? {} : { "Content-Type": "application/json" }) },
      body: body === undefined ? undefined : JSON.stringify(body),
    });
  } catch (cause) {
    if (signal?.aborted) throw cause;
    connection.lost("server");
    throw new ApiError("unreachable", "The server cannot be reached. Nothing is lost; it is tried again.");
  }
}

async function errorOf(response: Response): Promise<ApiError> {
  const body = errorBodySchema.safeParse(await response.json().catch(() => null));
  if (!body.success) {
    // A proxy or a server that is just starting answers without our body.
    if (response.status === 502 || response.status === 503 || response.status === 504) {
      connection.lost("server");
      return new ApiError("unreachable", "The server cannot be reached. Nothing is lost; it is tried again.", response.status);
    }
    return new ApiError("not-understood", `The server's answer (status ${response.status}) was not understood.`, response.status);
  }
  const { error } = body.data;
  if (error.code === "database-unavailable") connection.lost("database");
  return new ApiError(error.code, error.message, response.status, error);
}

/** The answer as it came, with the status checked. */
export async function requestRaw(path: string, options: RequestOptions = {}): Promise<Response> {
  const response = await send(path, options);
  if (response.ok) return response;
  const error = await errorOf(response);
  if (error.code !== "signed-out" || options.anonymous) throw error;
  // Asks on top of the page; what the person was doing waits and then goes on. Not answered: the error stands.
  if (!(await sessionExpiry.askToSignIn(options.signal))) throw error;
  const again = await send(path, options);
  if (again.ok) return again;
  throw await errorOf(again);
}

/** `schema` reads the answer; null for answers without a body. */
export async function request<Schema extends z.ZodType>(path: string, schema: Schema, options?: RequestOptions): Promise<z.output<Schema>>;
export async function request(path: string, schema: null, options?: RequestOptions): Promise<void>;
export async function request(path: string, schema: z.ZodType | null, options: RequestOptions = {}): Promise<unknown> {
  const response = await requestRaw(path, options);
  if (!schema) return;
  const parsed = schema.safeParse(await response.json().catch(() => undefined));
  if (parsed.success) return parsed.data;
  if (options.signal?.aborted) throw options.signal.reason;
  throw new ApiError("not-understood", "The server's answer was not understood: this page is probably older than the server.", response.status);
}

/** Parameters that differ from undefined, as "?a=1&b=2". */
export function queryText(parameters: Record<string, string | number | undefined>): string {
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(parameters)) if (value !== undefined && value !== "") search.set(name, String(value));
  const text = search.toString();
  return text && `?${text}`;
}
