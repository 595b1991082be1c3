/**
 * GET /api/teams/:teamId/runs/:runId/series: the whole record of a run as bytes (the server stores them compressed).
 * Layout: "HFS1", header length as uint32, header as JSON in ASCII padded with spaces to a multiple of 8, then the
 * columns in the header's order, each padded to a multiple of 8. Numbers are little-endian; f64 or u8.
 */
import { z } from "zod";
import type { RunResult } from "#shared/simulation/result.ts";

export const SERIES_CONTENT_TYPE = "application/vnd.holdfast.series";
/** A longer series is kept at every second, third, ... point. */
const MAX_SERIES_POINTS = 200_000;
/** Of more rounds than this only delivered / lost is kept, without measurements, estimates and commands. */
const MAX_DETAILED_ROUNDS = 200_000;

const blockSchema = z.strictObject({ name: z.string(), type: z.enum(["f64", "u8"]), length: z.int().nonnegative() });
const headerSchema = z.strictObject({
  version: z.literal(1),
  points: z.int(),
  keptEvery: z.int().positive(),
  columns: z.array(
    z.strictObject({
      name: z.string(),
      label: z.string(),
      symbol: z.string(),
      unit: z.string(),
      kind: z.enum(["state", "output", "input", "reference"]),
    }),
  ),
  rounds: z.strictObject({
    count: z.int(),
    periodS: z.number(),
    sampleAtS: z.number(),
    latencyS: z.number(),
    commandDelay: z.union([z.literal(0), z.literal(1)]),
    measured: z.array(z.strictObject({ name: z.string(), unit: z.string(), symbol: z.string(), label: z.string() })),
    hasMeasurementSlot: z.boolean(),
    hasCommandSlot: z.boolean(),
  }),
  blocks: z.array(blockSchema),
});
export type SeriesHeader = z.infer<typeof headerSchema>;

/** `detailed` is false when measurement, noise, estimate and command are left empty. */
export interface SeriesRecord extends Pick<RunResult, "series" | "rounds"> {
  points: number;
  keptEvery: number;
  detailed: boolean;
}

const MAGIC = [0x48, 0x46, 0x53, 0x31];
const padded = (length: number) => (length + 7) & ~7;

/** JSON in ASCII, so that neither end needs a text encoder. */
const asciiJson = (value: unknown) =>
  JSON.stringify(value).replace(/[\u007f-\uffff]/g, (unit) => `\\u${unit.charCodeAt(0).toString(16).padStart(4, "0")}`);

function every(values: Float64Array, step: number): Float64Array {
  if (step === 1) return values;
  const kept = new Float64Array(Math.ceil(values.length / step));
  for (let i = 0; i < kept.length; i++) kept[i] = values[i * step];
  return kept;
}

export function encodeSeries(
  result: Pick<RunResult, "series" | "rounds">,
  maxPoints = MAX_SERIES_POINTS,
): { bytes: Uint8Array; header: SeriesHeader } {
  const { series, rounds } = result;
  const keptEvery = Math.max(1, Math.ceil(series.t.length / maxPoints));
  const detailed = rounds.count <= MAX_DETAILED_ROUNDS;
  const blocks: { name: string; data: Float64Array | Uint8Array }[] = [
    { name: "t", data: every(series.t, keptEvery) },
    ...series.columns.map((column, i) => ({ name: column.name, data: every(series.values[i], keptEvery) })),
    { name: "measurementDelivered", data: rounds.measurementDelivered },
    { name: "commandDelivered", data: rounds.commandDelivered },
    ...(detailed ? (["measurement", "noise", "estimate", "command"] as const).map((name) => ({ name, data: rounds[name] })) : []),
  ];
  const header: SeriesHeader = {
    version: 1,
    points: series.t.length,
    keptEvery,
    columns: series.columns.map(({ name, label, symbol, unit, kind }) => ({ name, label, symbol, unit, kind })),
    rounds: {
      count: rounds.count,
      periodS: rounds.periodS,
      sampleAtS: rounds.sampleAtS,
      latencyS: rounds.latencyS,
      commandDelay: rounds.commandDelay,
      measured: rounds.measured.map(({ name, unit, symbol, label }) => ({ name, unit, symbol, label })),
      hasMeasurementSlot: rounds.hasMeasurementSlot,
      hasCommandSlot: rounds.hasCommandSlot,
    },
    blocks: blocks.map(({ name, data }) => ({ name, type: data instanceof Uint8Array ? "u8" : "f64", length: data.length })),
  };
  const text = asciiJson(header);
  const headerBytes = padded(8 + text.length) - 8;
  const size = 8 + headerBytes + blocks.reduce((sum, { data }) => sum + padded(data.byteLength), 0);
  const bytes = new Uint8Array(size);
  const view = new DataView(bytes.buffer);
  bytes.set(MAGIC);
  view.setUint32(4, headerBytes, true);
  for (let i = 0; i < headerBytes; i++) bytes[8 + i] = i < text.length ? text.charCodeAt(i) : 0x20;
  let at = 8 + headerBytes;
  for (const { data } of blocks) {
    if (data instanceof Uint8Array) bytes.set(data, at);
    else for (let i = 0; i < data.length; i++) view.setFloat64(at + 8 * i, data[i], true);
    at += padded(data.byteLength);
  }
  return { bytes, header };
}

/** Throws when the bytes are not a series record. */
export function decodeSeries(bytes: Uint8Array): SeriesRecord {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (bytes.length < 8 || MAGIC.some((byte, i) => bytes[i] !== byte)) throw new Error("These bytes are not a series record.");
  const headerBytes = view.getUint32(4, true);
  let text = "";
  for (let i = 8; i < 8 + headerBytes; i++) text += String.fromCharCode(bytes[i]);
  const header = headerSchema.parse(JSON.parse(text));
  let at = 8 + headerBytes;
  const read = header.blocks.map(({ type, length }) => {
    const data = type === "u8" ? new Uint8Array(bytes.subarray(at, at + length)) : new Float64Array(length);
    if (data instanceof Float64Array) for (let i = 0; i < length; i++) data[i] = view.getFloat64(at + 8 * i, true);
    at += padded(data.byteLength);
    return data;
  });
  const columns = header.columns.length;
  const [measurementDelivered, commandDelivered] = read.slice(1 + columns, 3 + columns) as Uint8Array[];
  const rest = read.slice(3 + columns) as Float64Array[];
  const none = () => new Float64Array(0);
  const [measurement, noise, estimate, command] = rest.length === 4 ? rest : [none(), none(), none(), none()];
  return {
    points: header.points,
    keptEvery: header.keptEvery,
    detailed: rest.length === 4,
    series: { t: read[0] as Float64Array, columns: header.columns, values: read.slice(1, 1 + columns) as Float64Array[] },
    rounds: { ...header.rounds, measurementDelivered, commandDelivered, measurement, noise, estimate, command },
  };
}
