/** What the log worker does with a file, piece by piece; without comlink, so that tests run it where there are no workers. */
import { csvRows } from "#shared/reception/csv-rows.ts";
import { guessMapping, previewLog } from "#shared/reception/guess.ts";
import { logReader } from "#shared/reception/log-reader.ts";
import type { ColumnMapping } from "#shared/reception/types.ts";
import type { LinkSummary, LogProgress, PackOutcome, PreviewOutcome, PreviewRow, ReadOutcome } from "./log-contract.ts";

/** So much of a file says what it is like. */
const SAMPLE_BYTES = 65_536;
const SAMPLE_ROWS = 50;
const SHOWN_ROWS = 12;

export interface Task {
  /** False once it was cancelled or a newer one began. */
  wanted: () => boolean;
  tell: (progress: LogProgress) => void;
}

const CANCELLED = { ok: false, cancelled: true } as const;
const failed = (error: unknown) => ({ ok: false, message: messageOf(error) }) as const;

/** Browsers say it in many ways. */
function messageOf(error: unknown): string {
  if (error instanceof DOMException && (error.name === "NotFoundError" || error.name === "NotReadableError"))
    return "It was moved, changed or deleted since it was chosen, or it is a folder. Choose it again.";
  return error instanceof Error ? error.message : String(error);
}

async function isPacked(file: Blob): Promise<boolean> {
  const [first, second] = new Uint8Array(await file.slice(0, 2).arrayBuffer());
  return first === 0x1f && second === 0x8b;
}

/** The file's bytes, unpacked; `onBytes` hears how many of the file were taken. */
async function openBytes(file: Blob, onBytes: (bytes: number) => void): Promise<ReadableStream<Uint8Array>> {
  let bytes = 0;
  const counted = file.stream().pipeThrough(
    new TransformStream<Uint8Array, Uint8Array>({
      transform(chunk, controller) {
        bytes += chunk.byteLength;
        onBytes(bytes);
        controller.enqueue(chunk);
      },
    }),
  );
  if (!(await isPacked(file))) return counted;
  return counted.pipeThrough(new DecompressionStream("gzip") as unknown as ReadableWritablePair<Uint8Array, Uint8Array>);
}

/** Text as spreadsheets write it: UTF-8, or UTF-16 when its mark says so; as the server takes it. */
function decoderFor([first, second]: Uint8Array): TextDecoder {
  if (first === 0xff && second === 0xfe) return new TextDecoder("utf-16le");
  if (first === 0xfe && second === 0xff) return new TextDecoder("utf-16be");
  return new TextDecoder();
}

/** What spreadsheets save by themselves is a ZIP file. */
const isZip = (bytes: Uint8Array): boolean => [0x50, 0x4b, 0x03, 0x04].every((byte, i) => bytes[i] === byte);

/** The beginning of the file as text. */
async function sampleOf(file: Blob): Promise<string> {
  const reader = (await openBytes(file, () => {})).getReader();
  let decoder: TextDecoder | null = null;
  let text = "";
  let bytes = 0;
  while (bytes < SAMPLE_BYTES) {
    const { done, value } = await reader.read();
    if (done) break;
    bytes += value.byteLength;
    if (!decoder && isZip(value)) throw new Error("It is a ZIP file or a spreadsheet. Save the table as CSV and choose that.");
    decoder ??= decoderFor(value);
    text += decoder.decode(value, { stream: true });
  }
  void reader.cancel().catch(() => {});
  return text.slice(0, SAMPLE_BYTES);
}

/** The first rows with their lines, split as the reader will split them. */
function numberedRows(text: string, delimiter: string): PreviewRow[] {
  const rows: PreviewRow[] = [];
  const splitter = csvRows(delimiter, ({ cells, line }) => {
    if (rows.length < SAMPLE_ROWS) rows.push({ line, cells: [...cells] });
  });
  splitter.push(text);
  splitter.end();
  // The sample may cut its last line off.
  return rows.length < SAMPLE_ROWS && text.length === SAMPLE_BYTES ? rows.slice(0, -1) : rows;
}

export async function previewFile(file: Blob, split: ColumnMapping["delimiter"] | null): Promise<PreviewOutcome> {
  try {
    if (file.size === 0) return { ok: false, message: "It is empty." };
    const text = await sampleOf(file);
    if (text.includes("\0")) return { ok: false, message: "It is not a text: it holds zero bytes. Export it as CSV in UTF-8." };
    const seen = previewLog(text, SAMPLE_ROWS);
    const delimiter = split ?? seen.delimiter;
    const rows = numberedRows(text, delimiter);
    if (rows.length === 0) return { ok: false, message: "It has no rows." };
    const cells = rows.map((row) => row.cells);
    const header = seen.header !== null;
    const { mapping, reasons } =
      delimiter === seen.delimiter
        ? seen.guess
        : guessMapping(header ? (cells[0] ?? []).map((cell) => cell.trim()) : null, header ? cells.slice(1) : cells, {
            delimiter,
            decimal: seen.decimal,
          });
    const width = Math.max(...cells.map((row) => row.length));
    return {
      ok: true,
      preview: { delimiter, decimal: seen.decimal, header, rows: rows.slice(0, SHOWN_ROWS), width, guess: mapping, reasons },
    };
  } catch (error) {
    return failed(error);
  }
}

export async function readFile(file: Blob, mapping: ColumnMapping, { wanted, tell }: Task): Promise<ReadOutcome> {
  try {
    const bytes = await openBytes(file, (taken) => tell({ bytes: taken, ofBytes: file.size }));
    const reader = bytes.getReader();
    let decoder: TextDecoder | null = null;
    const log = logReader(mapping);
    for (;;) {
      const { done, value } = await reader.read();
      if (!wanted()) {
        void reader.cancel().catch(() => {});
        return CANCELLED;
      }
      if (done) break;
      decoder ??= decoderFor(value);
      log.push(decoder.decode(value, { stream: true }));
    }
    log.push(decoder?.decode() ?? "");
    const outcome = log.finish();
    if (!outcome.ok) return { ok: false, message: outcome.issues.map(({ message }) => message).join(" ") };
    const links = outcome.value.links.map(({ runs: _runs, hours: _hours, ...summary }): LinkSummary => summary);
    return { ok: true, reading: { links, report: outcome.value.report } };
  } catch (error) {
    return failed(error);
  }
}

export async function packFile(file: Blob, { wanted, tell }: Task): Promise<PackOutcome> {
  try {
    if (await isPacked(file)) return { ok: true, packed: file };
    const bytes = await openBytes(file, (taken) => tell({ bytes: taken, ofBytes: file.size }));
    const reader = bytes.pipeThrough(new CompressionStream("gzip") as unknown as ReadableWritablePair<Uint8Array, Uint8Array>).getReader();
    const parts: Uint8Array<ArrayBuffer>[] = [];
    for (;;) {
      const { done, value } = await reader.read();
      if (!wanted()) {
        void reader.cancel().catch(() => {});
        return CANCELLED;
      }
      if (done) break;
      parts.push(value as Uint8Array<ArrayBuffer>);
    }
    return { ok: true, packed: new Blob(parts, { type: "application/gzip" }) };
  } catch (error) {
    return failed(error);
  }
}
