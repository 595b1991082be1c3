import { z } from "zod";
import { noteSchema } from "#shared/api/common.ts";
import { changeScenarioRequest, type DeleteScenarioResponse, duplicateScenarioRequest, scenarioListQuery } from "#shared/api/scenarios.ts";
import type { Database } from "../../db/client.ts";
import { idFrom, type TeamRoute } from "../../http/team-routes.ts";
import { validated, validatedScenario } from "../../http/validation.ts";
import { listScenarios } from "./repository.ts";
import type { ScenarioService } from "./service.ts";

/** The envelope first, the scenario by itself: its issues then name the fields as the scenario's own file does. */
const envelope = z.strictObject({ scenario: z.unknown(), note: noteSchema });

export const scenarioRoutes = (db: Database, service: ScenarioService): TeamRoute[] => [
  {
    method: "get",
    path: "/scenarios",
    action: "open-scenarios",
    handle: async ({ member, query }) => ({ body: await listScenarios(db, member, validated(scenarioListQuery, query)) }),
  },
  {
    method: "post",
    path: "/scenarios",
    action: "edit-scenarios",
    body: "scenario",
    handle: async ({ member, body }) => {
      const { scenario, note } = validated(envelope, body);
      return { status: 201, body: await service.create(member, validatedScenario(scenario), note) };
    },
  },
  {
    method: "get",
    path: "/scenarios/:id",
    action: "open-scenarios",
    handle: async ({ member, params }) => ({ body: await service.get(member, idFrom(params, "id")) }),
  },
  {
    method: "patch",
    path: "/scenarios/:id",
    action: "edit-scenarios",
    handle: async ({ member, params, body }) => {
      const { archived } = validated(changeScenarioRequest, body);
      return { body: await service.setArchived(member, idFrom(params, "id"), archived) };
    },
  },
  {
    method: "delete",
    path: "/scenarios/:id",
    action: "edit-scenarios",
    handle: async ({ member, params }) => {
      await service.remove(member, idFrom(params, "id"));
      const body: DeleteScenarioResponse = { deleted: true };
      return { body };
    },
  },
  {
    method: "post",
    path: "/scenarios/:id/duplicate",
    action: "edit-scenarios",
    handle: async ({ member, params, body }) => {
      const wanted = validated(duplicateScenarioRequest, body ?? {});
      return { status: 201, body: await service.duplicate(member, idFrom(params, "id"), wanted) };
    },
  },
];
