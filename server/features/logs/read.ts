/** Reads a reception log as it comes: unpacks, counts, hashes, splits, packs anew. Runs in a thread of its own, and in the seed. */
import { createHash } from "node:crypto";
import { once } from "node:events";
import { Readable } from "node:stream";
import { createGunzip, createGzip } from "node:zlib";
import { MAX_LOG_BYTES } from "#shared/api/logs.ts";
import { logReader } from "#shared/reception/log-reader.ts";
import { type LogSummary, summariseLog } from "#shared/reception/log-summary.ts";
import type { ColumnMapping } from "#shared/reception/types.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import { inMb } from "../../http/file.ts";

const PIECE_BYTES = 1_000_000;
/** A file without line ends is no CSV. */
const MAX_LINE_BYTES = 1_000_000;
/** Changes between delivered and lost, over all links: what the page and a scenario can still work with. */
const MAX_RUNS = 5_000_000;
const GZIP_MAGIC = [0x1f, 0x8b];

export interface ReadLog {
  ok: true;
  bytes: number;
  sha256: string;
  rows: number;
  rowsUsed: number;
  troubles: number;
  links: number;
  packets: number;
  lost: number;
  intervalS: LogSummary["intervalS"];
  verdicts: LogSummary["verdicts"];
  /** JSON, made here so that nobody else has to. */
  report: string;
  linkTraces: string;
  /** The original, gzip. */
  pieces: Uint8Array<ArrayBuffer>[];
}
export interface RefusedLog {
  ok: false;
  code: "log-invalid" | "too-large";
  message: string;
  issues?: Issue[];
  size?: { bytes: number | null; permittedBytes: number };
}

class Refused extends Error {
  readonly refusal: RefusedLog;
  constructor(code: RefusedLog["code"], message: string, more: Pick<RefusedLog, "issues" | "size"> = {}) {
    super(message);
    this.refusal = { ok: false, code, message, ...more };
  }
}

/** gzip in pieces of one size, whatever sizes come out of the packer. */
function packer() {
  const gzip = createGzip({ level: 5 });
  const pieces: Uint8Array<ArrayBuffer>[] = [];
  let piece = new Uint8Array(PIECE_BYTES);
  let filled = 0;
  gzip.on("data", (bytes: Buffer) => {
    for (let at = 0; at < bytes.length; ) {
      const part = bytes.subarray(at, at + PIECE_BYTES - filled);
      piece.set(part, filled);
      filled += part.length;
      at += part.length;
      if (filled < PIECE_BYTES) continue;
      pieces.push(piece);
      piece = new Uint8Array(PIECE_BYTES);
      filled = 0;
    }
  });
  return {
    async add(bytes: Uint8Array): Promise<void> {
      if (!gzip.write(bytes)) await once(gzip, "drain");
    },
    async end(): Promise<Uint8Array<ArrayBuffer>[]> {
      gzip.end();
      await once(gzip, "end");
      if (filled > 0) pieces.push(piece.slice(0, filled));
      return pieces;
    },
    stop: () => void gzip.destroy(),
  };
}

/** What spreadsheets save by themselves is a ZIP file, and would be read as very bad rows. */
const isZip = (first: Uint8Array): boolean => [0x50, 0x4b, 0x03, 0x04].every((byte, i) => first[i] === byte);

/** Text as Excel and others write it: UTF-8, or UTF-16 when its mark says so. */
function decoderFor(first: Uint8Array): TextDecoder {
  if (first[0] === 0xff && first[1] === 0xfe) return new TextDecoder("utf-16le");
  if (first[0] === 0xfe && first[1] === 0xff) return new TextDecoder("utf-16be");
  return new TextDecoder("utf-8");
}

/** The source's chunks, unpacked when they are gzip or are said to be. */
async function* unpacked(source: AsyncIterable<Uint8Array>, packed: boolean): AsyncGenerator<Uint8Array> {
  const iterator = source[Symbol.asyncIterator]();
  const first = await iterator.next();
  if (first.done) return;
  async function* all() {
    for (let chunk = first as IteratorResult<Uint8Array>; !chunk.done; chunk = await iterator.next()) yield chunk.value;
  }
  if (!packed && !GZIP_MAGIC.every((byte, i) => first.value[i] === byte)) return yield* all();
  const gunzip = createGunzip({ chunkSize: 64 * 1024 });
  const feeding = Readable.from(all());
  feeding.on("error", (error) => gunzip.destroy(error));
  try {
    yield* feeding.pipe(gunzip);
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    if (code === "Z_BUF_ERROR") throw new Refused("log-invalid", "The packed file is not whole: it ends in the middle. Upload it again.");
    if (code?.startsWith("Z_"))
      throw new Refused("log-invalid", "The file was sent as gzip and cannot be unpacked: it is damaged, or not gzip at all.");
    throw error;
  } finally {
    feeding.destroy();
  }
}

/** Throws when a line does not end. */
function lineGuard() {
  let open = 0;
  return (chunk: Uint8Array): void => {
    const end = Math.max(chunk.lastIndexOf(0x0a), chunk.lastIndexOf(0x0d));
    open = end < 0 ? open + chunk.length : chunk.length - end - 1;
    if (open > MAX_LINE_BYTES)
      throw new Refused("log-invalid", `The file has a line of more than ${inMb(MAX_LINE_BYTES)}; it is not a CSV file with one row a line.`);
  };
}

/** `packed`: it has to be gzip; otherwise its first bytes say. */
export async function readLog(source: AsyncIterable<Uint8Array>, mapping: ColumnMapping, packed: boolean): Promise<ReadLog | RefusedLog> {
  const hash = createHash("sha256");
  const pack = packer();
  const guard = lineGuard();
  const reader = logReader(mapping);
  let decoder: TextDecoder | null = null;
  let bytes = 0;
  try {
    for await (const chunk of unpacked(source, packed)) {
      bytes += chunk.length;
      if (bytes > MAX_LOG_BYTES) {
        const message = `Unpacked, this file is larger than is taken: at most ${inMb(MAX_LOG_BYTES)}.`;
        throw new Refused("too-large", message, { size: { bytes: null, permittedBytes: MAX_LOG_BYTES } });
      }
      guard(chunk);
      hash.update(chunk);
      if (!decoder && isZip(chunk)) throw new Refused("log-invalid", "This is a ZIP file or a spreadsheet. Save the table as CSV and upload that.");
      decoder ??= decoderFor(chunk);
      reader.push(decoder.decode(chunk, { stream: true }));
      await pack.add(chunk);
    }
    if (!decoder) throw new Refused("log-invalid", "The file is empty.");
    reader.push(decoder.decode());
    const read = reader.finish();
    if (!read.ok) throw new Refused("log-invalid", `The log cannot be read: ${read.issues[0].message}`, { issues: read.issues });
    const { links, report } = read.value;
    const sum = (of: (link: (typeof links)[number]) => number) => links.reduce((total, link) => total + of(link), 0);
    const runs = sum((link) => link.runs.length);
    if (runs > MAX_RUNS)
      throw new Refused(
        "log-invalid",
        `The log changes ${runs} times between delivered and lost; permitted ${MAX_RUNS}. Split it into shorter logs.`,
      );
    return {
      ok: true,
      bytes,
      sha256: hash.digest("hex"),
      rows: report.rows,
      rowsUsed: report.rowsUsed,
      troubles: Object.values(report.troubles).reduce((total, { count }) => total + count, 0),
      links: links.length,
      packets: sum((link) => link.packets),
      lost: sum((link) => link.lost),
      ...summariseLog(links),
      report: JSON.stringify(report),
      linkTraces: JSON.stringify(links),
      pieces: await pack.end(),
    };
  } catch (error) {
    if (error instanceof Refused) return error.refusal;
    throw error;
  } finally {
    pack.stop();
  }
}
