import { changeLogRequest, logListQuery, uploadLogQuery } from "#shared/api/logs.ts";
import type { Database } from "../../db/client.ts";
import { contentDisposition } from "../../http/disposition.ts";
import { limitPerPerson } from "../../http/rate.ts";
import { idFrom, type TeamRoute } from "../../http/team-routes.ts";
import { validated } from "../../http/validation.ts";
import { listLogs } from "./repository.ts";
import type { LogService } from "./service.ts";

const UPLOADS = 60;

export const logRoutes = (db: Database, logs: LogService): TeamRoute[] => [
  {
    method: "get",
    path: "/logs",
    action: "open-logs",
    handle: async ({ member, query }) => ({ body: await listLogs(db, member, validated(logListQuery, query)) }),
  },
  {
    method: "post",
    path: "/logs",
    action: "edit-logs",
    body: "file",
    before: limitPerPerson("reception logs", UPLOADS),
    handle: async ({ member, query, file }) => {
      const { existed, json } = await logs.upload(member, validated(uploadLogQuery, query), file);
      return { status: existed ? 200 : 201, json };
    },
  },
  {
    method: "get",
    path: "/logs/:id",
    action: "open-logs",
    handle: async ({ member, params }) => ({ json: await logs.detail(member, idFrom(params, "id")) }),
  },
  {
    method: "patch",
    path: "/logs/:id",
    action: "edit-logs",
    handle: async ({ member, params, body }) => {
      const { name } = validated(changeLogRequest, body);
      return { json: await logs.rename(member, idFrom(params, "id"), name) };
    },
  },
  {
    method: "delete",
    path: "/logs/:id",
    action: "edit-logs",
    handle: async ({ member, params }) => {
      await logs.remove(member, idFrom(params, "id"));
      return { body: { deleted: true } };
    },
  },
  {
    method: "get",
    path: "/logs/:id/original",
    action: "open-logs",
    handle: async ({ member, params }) => {
      const { fileName, pieces } = await logs.original(member, idFrom(params, "id"));
      const headers = {
        "Content-Type": "text/csv; charset=utf-8",
        "Content-Disposition": contentDisposition("attachment", fileName),
        "Cache-Control": "private, no-cache",
      };
      return { gzipped: pieces, headers };
    },
  },
];
