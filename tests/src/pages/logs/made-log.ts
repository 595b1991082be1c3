/** Reception logs as the server would describe them, read from texts by the engine itself. */
import type { LogDetail, LogItem, LogListResponse } from "#shared/api/logs.ts";
import { logReader } from "#shared/reception/log-reader.ts";
import { summariseLog } from "#shared/reception/log-summary.ts";
import { type ColumnMapping, columnMappingSchema, TROUBLE_KINDS } from "#shared/reception/types.ts";
import { FENNICK } from "../../helpers/team-data.ts";

export const LOG_ID = "66666666-6666-4666-8666-000000000001";
export const MAPPING = columnMappingSchema.parse({
  number: { column: "seq" },
  time: { column: "time_s" },
  source: "from",
  receiver: "to",
  received: "ok",
});
const HEADER = "seq,time_s,from,to,ok";

/** Rows of one link: "1" received, "0" lost, one every 20 ms. */
const rowsOf = (bits: string, from: string, to: string): string[] => [...bits].map((bit, k) => `${k},${(k * 0.02).toFixed(3)},${from},${to},${bit}`);

/** Bursts of three losses in a row, and single ones: 400 packets each. */
export const BURSTS = `${"1".repeat(17)}000`.repeat(20);
export const SINGLE = `${"1".repeat(39)}0`.repeat(10);
export const TEXT = [HEADER, ...rowsOf(BURSTS, "S1", "C1"), ...rowsOf(SINGLE, "C1", "A1")].join("\n");

export function logOf(text: string, mapping: ColumnMapping = MAPPING, about: Partial<LogDetail> = {}): LogDetail {
  const reader = logReader(mapping);
  reader.push(text);
  const outcome = reader.finish();
  if (!outcome.ok) throw new Error(outcome.issues.map(({ message }) => message).join(" "));
  const { links, report } = outcome.value;
  return {
    id: LOG_ID,
    name: "Line west",
    fileName: "line-west.csv",
    author: FENNICK,
    uploadedAt: "2025-11-28T12:00:00.000Z",
    bytes: text.length,
    sha256: "0".repeat(64),
    rows: report.rows,
    rowsUsed: report.rowsUsed,
    troubles: TROUBLE_KINDS.reduce((sum, kind) => sum + report.troubles[kind].count, 0),
    links: links.length,
    packets: links.reduce((sum, { packets }) => sum + packets, 0),
    lost: links.reduce((sum, { lost }) => sum + lost, 0),
    ...summariseLog(links),
    scenarios: 0,
    mayEdit: true,
    mapping,
    usedBy: [],
    report,
    linkTraces: links,
    ...about,
  };
}

export function itemOf({ mapping: _mapping, usedBy: _usedBy, report: _report, linkTraces: _linkTraces, ...item }: LogDetail): LogItem {
  return item;
}

export const listOfLogs = (items: LogItem[], about: Partial<LogListResponse> = {}): LogListResponse => ({
  items,
  total: items.length,
  page: 1,
  pageSize: 10,
  totalUnfiltered: items.length,
  ...about,
});
