/** What a thrown error says about the database, through the wrappers that libraries put around it. */

const DOWN_CODES = new Set([
  "ECONNREFUSED",
  "ECONNRESET",
  "EPIPE",
  "ENOENT",
  "ENOTFOUND",
  "EAI_AGAIN",
  "ETIMEDOUT",
  "EHOSTUNREACH",
  "ENETUNREACH",
  // admin_shutdown, crash_shutdown, cannot_connect_now, too_many_connections
  "57P01",
  "57P02",
  "57P03",
  "53300",
]);
const DOWN_MESSAGES =
  /Connection terminated|timeout exceeded when trying to connect|timeout expired|Query read timeout|connection error and is not queryable/;

function* chain(error: unknown): Generator<{ code?: unknown; message: string; syscall?: unknown }> {
  let at = error;
  for (let depth = 0; at instanceof Error && depth < 6; depth++) {
    yield at;
    // Several addresses of one host were tried: one error for each.
    if (at instanceof AggregateError) for (const inner of at.errors) yield* chain(inner);
    at = at.cause;
  }
}

export function isDatabaseDown(error: unknown): boolean {
  for (const { code, message, syscall } of chain(error)) {
    // A file that is not there has the same code as a socket that is not there.
    if (code === "ENOENT" && syscall !== "connect") continue;
    if (typeof code === "string" && (DOWN_CODES.has(code) || code.startsWith("08"))) return true;
    if (DOWN_MESSAGES.test(message)) return true;
  }
  return false;
}

const hasCode = (error: unknown, ...codes: string[]): boolean => [...chain(error)].some(({ code }) => codes.includes(String(code)));

/** character_not_in_repertoire: U+0000 in a text. */
export const isUnstorableText = (error: unknown): boolean => hasCode(error, "22021");
