import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { request } from "../client.ts";
import { scenarioKeys } from "./keys.ts";

const deleteScenario = (teamId: string, id: string) => request(apiPaths.scenario(teamId, id), null, { method: "DELETE" });

export function useDeleteScenario(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => deleteScenario(teamId, id),
    onSuccess: (_, id) => {
      client.removeQueries({ queryKey: scenarioKeys.one(teamId, id) });
      return client.invalidateQueries({ queryKey: scenarioKeys.lists(teamId) });
    },
  });
}
