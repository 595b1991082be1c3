import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { type CreateScenarioRequest, scenarioResponse } from "#shared/api/scenarios.ts";
import { request } from "../client.ts";
import { scenarioKeys } from "./keys.ts";

const createScenario = (teamId: string, body: CreateScenarioRequest) =>
  request(apiPaths.scenarios(teamId), scenarioResponse, { method: "POST", body });

export function useCreateScenario(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: CreateScenarioRequest) => createScenario(teamId, body),
    onSuccess: (created) => {
      client.setQueryData(scenarioKeys.one(teamId, created.id), created);
      void client.invalidateQueries({ queryKey: scenarioKeys.lists(teamId) });
    },
  });
}
