import { createHash } from "node:crypto";
import type { z } from "zod";
import { parseJson } from "#shared/api/json.ts";
import { MAX_LOG_SENT_BYTES, type uploadLogQuery } from "#shared/api/logs.ts";
import { type ColumnMapping, columnMappingSchema } from "#shared/reception/types.ts";
import type { Database, Queries } from "../../db/client.ts";
import { searchText, sortKey } from "../../db/text.ts";
import { HttpError, notFound } from "../../http/errors.ts";
import type { SentFile } from "../../http/file.ts";
import type { Member } from "../../http/team-routes.ts";
import { validated } from "../../http/validation.ts";
import { record } from "../activity/repository.ts";
import { inUse, usesOf } from "../uses/repository.ts";
import type { ReadLog } from "./read.ts";
import type { LogReader } from "./reader.ts";
import { deleteLog, findLog, findLogId, findReading, insertLog, lockLog, piecesOf, renameLog } from "./repository.ts";

const PACKED_TYPES = ["application/gzip", "application/x-gzip"];
const TYPES = [...PACKED_TYPES, "text/csv", "application/octet-stream"];

interface NewLog {
  name: string;
  fileName: string;
  mapping: ColumnMapping;
}

/** The same file under another mapping is another reading. */
const readingKey = (sha256: string, mapping: ColumnMapping): string =>
  createHash("sha256")
    .update(`${sha256}\n${JSON.stringify(mapping)}`)
    .digest("hex");

const nameColumns = (name: string, fileName: string, author: string) => ({
  name,
  sortKey: sortKey(name),
  searchText: searchText(name, fileName, author),
});

/** Stores what was read, unless the team has it already. */
export async function storeLog(
  transaction: Queries,
  member: Pick<Member, "user" | "team">,
  { name, fileName, mapping }: NewLog,
  { ok: _ok, report, linkTraces, pieces, ...counts }: ReadLog,
  at = new Date(),
): Promise<{ id: string; existed: boolean }> {
  const { team, user } = member;
  const key = readingKey(counts.sha256, mapping);
  const names = nameColumns(name, fileName, user.name);
  const row = { ...names, ...counts, fileName, mapping, readingKey: key, teamId: team.id, authorId: user.id, uploadedAt: at };
  const id = await insertLog(transaction, row, { report, linkTraces, pieces });
  if (id === null) return { id: (await findLogId(transaction, team.id, key)) as string, existed: true };
  await record(transaction, member, { what: "log-uploaded", subject: { id, name }, at });
  return { id, existed: false };
}

function parsedMapping(text: string): ColumnMapping {
  const parsed = parseJson(text);
  if (!parsed.ok) {
    const message = `The mapping of the columns is not JSON. ${parsed.message}`;
    throw new HttpError("request-invalid", message, { issues: [{ code: "not-json", path: "mapping", message }] });
  }
  return validated(columnMappingSchema, parsed.value, "The mapping of the columns is not valid");
}

export function createLogService(db: Database, reader: LogReader) {
  /** JSON of a LogDetail, put together from what lies in the database as JSON. */
  const detail = async (member: Member, id: string): Promise<string> => {
    const item = await findLog(db, member, id);
    const reading = item && (await findReading(db, id));
    if (!reading) throw notFound();
    const known = JSON.stringify({ ...item, usedBy: await usesOf(db, "log", id) });
    return `${known.slice(0, -1)},"mapping":${reading.mapping},"report":${reading.report},"linkTraces":${reading.linkTraces}}`;
  };

  return {
    detail,

    async upload(member: Member, { name, fileName, mapping: text }: z.output<typeof uploadLogQuery>, file: SentFile) {
      const mapping = parsedMapping(text);
      if (!TYPES.includes(file.type)) {
        const sent = file.type === "" ? "none was sent" : `${file.type} was sent`;
        throw new HttpError("type-not-taken", `A reception log is sent with Content-Type ${TYPES.join(", ")}; ${sent}.`);
      }
      const packed = PACKED_TYPES.includes(file.type);
      const read = await reader.read(file.chunks(MAX_LOG_SENT_BYTES), { mapping, packed });
      if (!read.ok) throw new HttpError(read.code, read.message, { issues: read.issues, size: read.size });
      const { id, existed } = await db.transaction((transaction) => storeLog(transaction, member, { name, fileName, mapping }, read));
      return { existed, json: `{"log":${await detail(member, id)},"existed":${existed}}` };
    },

    async original(member: Member, id: string) {
      const log = await findLog(db, member, id);
      if (!log) throw notFound();
      return { fileName: log.fileName || `${log.name}.csv`, pieces: piecesOf(db, id) };
    },

    async rename(member: Member, id: string, name: string): Promise<string> {
      await db.transaction(async (transaction) => {
        const log = await lockLog(transaction, member.team.id, id);
        if (!log) throw notFound();
        if (log.name === name) return;
        await renameLog(transaction, id, nameColumns(name, log.fileName, log.author));
        await record(transaction, member, { what: "log-renamed", subject: { id, name } });
      });
      return await detail(member, id);
    },

    async remove(member: Member, id: string): Promise<void> {
      const { name, uses } = await db.transaction(async (transaction) => {
        const log = await lockLog(transaction, member.team.id, id);
        if (!log) throw notFound();
        const found = await usesOf(transaction, "log", id);
        await record(transaction, member, { what: found.length > 0 ? "log-deletion-refused" : "log-deleted", subject: log });
        if (found.length === 0) await deleteLog(transaction, id);
        return { name: log.name, uses: found };
      });
      if (uses.length > 0) throw inUse(`The reception log “${name}”`, uses);
    },
  };
}
export type LogService = ReturnType<typeof createLogService>;
