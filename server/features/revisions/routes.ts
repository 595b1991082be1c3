import { z } from "zod";
import { revisionListQuery, saveRevisionRequest } from "#shared/api/revisions.ts";
import type { Database } from "../../db/client.ts";
import { notFound } from "../../http/errors.ts";
import { idFrom, numberFrom, type TeamRoute } from "../../http/team-routes.ts";
import { validated, validatedScenario } from "../../http/validation.ts";
import type { ScenarioService } from "../scenarios/service.ts";
import { findRevision, listRevisions } from "./repository.ts";

const envelope = z.strictObject({ ...saveRevisionRequest.shape, scenario: z.unknown() });

export const revisionRoutes = (db: Database, scenarios: ScenarioService): TeamRoute[] => [
  {
    method: "get",
    path: "/scenarios/:id/revisions",
    action: "open-scenarios",
    handle: async ({ member, params, query }) => {
      const { row } = await scenarios.find(member, idFrom(params, "id"));
      return { body: await listRevisions(db, row.id, validated(revisionListQuery, query)) };
    },
  },
  {
    method: "post",
    path: "/scenarios/:id/revisions",
    action: "edit-scenarios",
    body: "scenario",
    handle: async ({ member, params, body }) => {
      const { baseRevision, scenario, note } = validated(envelope, body);
      return { status: 201, body: await scenarios.saveRevision(member, idFrom(params, "id"), baseRevision, validatedScenario(scenario), note) };
    },
  },
  {
    method: "get",
    path: "/scenarios/:id/revisions/:number",
    action: "open-scenarios",
    handle: async ({ member, params }) => {
      const { row } = await scenarios.find(member, idFrom(params, "id"));
      const revision = await findRevision(db, row.id, numberFrom(params, "number"));
      if (!revision) throw notFound();
      return { body: revision };
    },
  },
];
