/**
 * Reception logs (model 8): how the columns of a CSV file are read, what was received on each link, and what was wrong
 * with the file. Stored by the server, sent by the API, computed alike in worker, server and command line.
 */
import { z } from "zod";
import { count, quantity } from "#shared/scenario/quantity.ts";

export const MAX_LINKS = 2000;
/** Troubles of one kind that are kept with their line; all are counted. */
export const MAX_TROUBLES = 200;
/** Lines that a logger may write before the header. */
export const MAX_PREAMBLE = 20;

// ---------------------------------------------------------------- mapping

/** A column by its header, or by its place counted from 1 (files without a header, or two headers alike). */
export const columnSchema = z.union([z.string().trim().min(1).max(120), count("column", "", 1, 500)]);
export const TIME_UNITS = ["s", "ms", "us", "ns", "iso"] as const;
export const DELIMITERS = [",", ";", "\t", "|"] as const;
export const MAPPED = ["number", "time", "source", "receiver", "received", "rssi"] as const;
export type Mapped = (typeof MAPPED)[number];

export const columnMappingSchema = z
  .strictObject({
    delimiter: z.enum(DELIMITERS).default(","),
    /** Sign before the decimals of times and RSSI values. */
    decimal: z.enum([".", ","]).default("."),
    header: z.boolean().default(true),
    /** The packet's number. null: no number, every row is the next packet; then `received` is needed. */
    number: z
      .strictObject({
        column: columnSchema,
        /**
         * sequence: each source counts its own packets, and a link lasts from its first number to its last.
         * round: one counter for all, so a link that begins late or falls silent has lost the rounds that others saw.
         */
        kind: z.enum(["sequence", "round"]).default("sequence"),
        /**
         * The counter returns to 0 after wrapsAt - 1: 256 for 8 bits, 65 536, 4 294 967 296. null: wraps of 8, 16 and 32 bits are
         * recognised by themselves.
         */
        wrapsAt: count("numbers before it wraps", "", 4, 281_474_976_710_656).nullable().default(null),
      })
      .nullable()
      .default(null),
    time: z
      .strictObject({ column: columnSchema, unit: z.enum(TIME_UNITS).default("s") })
      .nullable()
      .default(null),
    source: columnSchema.nullable().default(null),
    receiver: columnSchema.nullable().default(null),
    /** 1/0, true/false, yes/no, ok/lost, received/lost. null: every row is a received packet, missing numbers are lost. */
    received: columnSchema.nullable().default(null),
    /** What a 1, true or yes of that column says: received, or (a column "lost") lost. */
    receivedMarks: z.enum(["received", "lost"]).default("received"),
    rssi: columnSchema.nullable().default(null),
    /** Time from packet to packet; null: the usual one of the time column. */
    periodS: quantity("packet interval", "s", 1e-6, 86_400).nullable().default(null),
  })
  .superRefine((mapping, context) => {
    if (!mapping.number && !mapping.received) {
      context.addIssue({
        code: "custom",
        path: ["number"],
        message: "Neither a packet number nor a received column is chosen; one of them is needed to know what was lost.",
      });
    }
  });
export type ColumnMapping = z.infer<typeof columnMappingSchema>;

// ---------------------------------------------------------------- what was received

export const rssiSummarySchema = z.strictObject({
  count: z.int().min(1),
  meanDbm: z.number(),
  stdDb: z.number(),
  minDbm: z.number(),
  /** Quantiles to the nearest dB. */
  p05Dbm: z.number(),
  medianDbm: z.number(),
  p95Dbm: z.number(),
  maxDbm: z.number(),
});
export type RssiSummary = z.infer<typeof rssiSummarySchema>;

/** Packets and losses of one hour of the day, as the log's clock wrote it. */
export const hourSchema = z.strictObject({ packets: z.int().min(0), lost: z.int().min(0) });

export const linkTraceSchema = z.strictObject({
  /** Names as in the file; "" where the column is not mapped. */
  source: z.string().max(120),
  receiver: z.string().max(120),
  /** The first packet's number; 0 where there is none. */
  firstNumber: z.int(),
  /** Run lengths: delivered, lost, delivered, ...; only the first may be 0. */
  runs: z.array(z.int().min(0)),
  packets: z.int().min(0),
  lost: z.int().min(0),
  /** Rounds counted as lost before its first and after its last packet, because other links saw them (kind "round"). */
  lostBefore: z.int().min(0),
  lostAfter: z.int().min(0),
  /** Usual time from one packet to the next; the mapping's periodS where there is no time column; else null. */
  intervalS: z.number().positive().nullable(),
  /** First and last time in the file, seconds of its own clock (UTC since 1970 for ISO 8601). */
  firstTimeS: z.number().nullable(),
  lastTimeS: z.number().nullable(),
  /** 24 entries where the time is a time of the day (ISO 8601, or seconds since 1970), else null. */
  hours: z.array(hourSchema).length(24).nullable(),
  rssi: rssiSummarySchema.nullable(),
});
export type LinkTrace = z.infer<typeof linkTraceSchema>;

/** "3 > 7", or what is known of it. */
export function linkName({ source, receiver }: Pick<LinkTrace, "source" | "receiver">): string {
  if (source && receiver) return `${source} > ${receiver}`;
  return source || receiver || "all packets";
}

// ---------------------------------------------------------------- what was wrong with the file

export const TROUBLE_KINDS = ["bad-row", "duplicate", "out-of-order", "wrapped", "reset", "gap", "clock-jump"] as const;
export type TroubleKind = (typeof TROUBLE_KINDS)[number];

export const troubleSchema = z.strictObject({
  /** Line of the file, counted from 1. */
  line: z.int().min(1),
  link: z.string(),
  /** What is wrong and what was done about it: one sentence. */
  message: z.string(),
  /** The value as it stands in the file. */
  value: z.string(),
});
export type Trouble = z.infer<typeof troubleSchema>;

const troublesSchema = z.strictObject({ count: z.int().min(0), first: z.array(troubleSchema).max(MAX_TROUBLES) });

export const readReportSchema = z.strictObject({
  /** Rows with anything in them, without the header. */
  rows: z.int().min(0),
  rowsUsed: z.int().min(0),
  troubles: z.strictObject({
    "bad-row": troublesSchema,
    duplicate: troublesSchema,
    "out-of-order": troublesSchema,
    wrapped: troublesSchema,
    reset: troublesSchema,
    gap: troublesSchema,
    "clock-jump": troublesSchema,
  }),
});
export type ReadReport = z.infer<typeof readReportSchema>;

/** What a log holds after reading. */
export interface LogContent {
  links: LinkTrace[];
  report: ReadReport;
}
