/** Answers that are sent as they lie in the database. */
import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { createGunzip } from "node:zlib";
import type { Request, Response } from "express";

export function sendJsonText(response: Response, json: string): void {
  response.type("json").send(json);
}

/** Fails like any other answer until the first piece is there. */
export async function sendGzipped(request: Request, response: Response, pieces: AsyncIterable<Buffer>): Promise<void> {
  const iterator = pieces[Symbol.asyncIterator]();
  const first = await iterator.next();
  async function* all() {
    for (let piece = first; !piece.done; piece = await iterator.next()) yield piece.value;
  }
  response.vary("Accept-Encoding");
  const packed = request.acceptsEncodings("gzip") !== false;
  if (packed) response.setHeader("Content-Encoding", "gzip");
  try {
    await (packed ? pipeline(Readable.from(all()), response) : pipeline(Readable.from(all()), createGunzip(), response));
  } catch (error) {
    // Whoever downloads may stop at any time.
    if ((error as NodeJS.ErrnoException).code !== "ERR_STREAM_PREMATURE_CLOSE") throw error;
  }
}
