/** A file as the body of a request: read as it comes, with a size that is said when it is too large. */
import type { IncomingMessage } from "node:http";
import type { RequestHandler } from "express";
import { BrokenOff, HttpError } from "./errors.ts";

export interface SentFile {
  /** Content-Type without parameters, in lower case. */
  type: string;
  /** Throws as soon as more than the permitted size is declared or has come. */
  chunks(permittedBytes: number): AsyncGenerator<Buffer>;
}

export const inMb = (bytes: number) => `${(bytes / 1e6).toFixed(bytes < 1e6 ? 2 : 1)} MB`;

export function tooLarge(bytes: number | null, permittedBytes: number, what = "This"): HttpError {
  const size = bytes === null ? `${what} is` : `${what} is ${inMb(bytes)},`;
  return new HttpError("too-large", `${size} more than is taken: at most ${inMb(permittedBytes)}.`, { size: { bytes, permittedBytes } });
}

async function* chunksOf(request: IncomingMessage, permittedBytes: number): AsyncGenerator<Buffer> {
  const declared = Number(request.headers["content-length"] ?? 0);
  if (declared > permittedBytes) throw tooLarge(declared, permittedBytes, "This file");
  let bytes = 0;
  try {
    // Left open when reading stops early: the answer goes over the same connection.
    for await (const chunk of request.iterator({ destroyOnReturn: false })) {
      bytes += chunk.length;
      if (bytes > permittedBytes) break;
      yield chunk;
    }
  } catch (error) {
    throw request.complete ? error : new BrokenOff("The upload was broken off.", { cause: error });
  }
  if (bytes > permittedBytes) throw tooLarge(null, permittedBytes, "This file");
}

export function sentFile(request: IncomingMessage): SentFile {
  return {
    type: (request.headers["content-type"] ?? "").split(";")[0].trim().toLowerCase(),
    chunks: (permittedBytes) => chunksOf(request, permittedBytes),
  };
}

/** What is left of a body after a refusal is taken in, or the sender would see a reset connection before the answer. */
export const takeIn: RequestHandler = (request, response, next) => {
  response.once("finish", () => request.resume());
  next();
};
