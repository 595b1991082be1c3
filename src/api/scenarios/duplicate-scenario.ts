import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { type DuplicateScenarioRequest, scenarioResponse } from "#shared/api/scenarios.ts";
import { request } from "../client.ts";
import { scenarioKeys } from "./keys.ts";

const duplicateScenario = (teamId: string, id: string, body: DuplicateScenarioRequest) =>
  request(apiPaths.duplicate(teamId, id), scenarioResponse, { method: "POST", body });

export function useDuplicateScenario(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ id, ...body }: { id: string } & DuplicateScenarioRequest) => duplicateScenario(teamId, id, body),
    onSuccess: (created) => {
      client.setQueryData(scenarioKeys.one(teamId, created.id), created);
      return client.invalidateQueries({ queryKey: scenarioKeys.lists(teamId) });
    },
  });
}
