import { createRunRequest, runListQuery } from "#shared/api/runs.ts";
import { SERIES_CONTENT_TYPE } from "#shared/api/series.ts";
import type { Database } from "../../db/client.ts";
import { notFound } from "../../http/errors.ts";
import { idFrom, type TeamRoute } from "../../http/team-routes.ts";
import { validated } from "../../http/validation.ts";
import type { ScenarioService } from "../scenarios/service.ts";
import { findSeries, listRuns } from "./repository.ts";
import type { RunService } from "./service.ts";

export const runRoutes = (db: Database, runs: RunService, scenarios: ScenarioService): TeamRoute[] => [
  {
    method: "get",
    path: "/scenarios/:id/runs",
    action: "open-scenarios",
    handle: async ({ member, params, query }) => {
      const { row } = await scenarios.find(member, idFrom(params, "id"));
      return { body: await listRuns(db, row.id, validated(runListQuery, query)) };
    },
  },
  {
    method: "post",
    path: "/scenarios/:id/runs",
    action: "make-runs",
    handle: async ({ member, params, body }) => {
      const { row } = await scenarios.find(member, idFrom(params, "id"));
      const { created, ...answer } = await runs.keep(member, row, validated(createRunRequest, body));
      return { status: created ? 201 : 200, body: answer };
    },
  },
  {
    method: "get",
    path: "/runs/:runId",
    action: "open-scenarios",
    handle: async ({ member, params }) => ({ body: await runs.detail(member.team.id, idFrom(params, "runId")) }),
  },
  {
    method: "get",
    path: "/runs/:runId/series",
    action: "open-scenarios",
    handle: async ({ member, params }) => {
      const bytes = await findSeries(db, member.team.id, idFrom(params, "runId"));
      if (!bytes) throw notFound();
      // A run never changes; only the viewer's browser may keep it.
      const headers = { "Content-Type": SERIES_CONTENT_TYPE, "Content-Encoding": "gzip", "Cache-Control": "private, max-age=3600" };
      return { bytes, headers };
    },
  },
];
