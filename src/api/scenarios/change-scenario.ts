import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { scenarioResponse } from "#shared/api/scenarios.ts";
import { request } from "../client.ts";
import { scenarioKeys } from "./keys.ts";

const setArchived = (teamId: string, id: string, archived: boolean) =>
  request(apiPaths.scenario(teamId, id), scenarioResponse, { method: "PATCH", body: { archived } });

export function useSetArchived(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ id, archived }: { id: string; archived: boolean }) => setArchived(teamId, id, archived),
    onSuccess: (changed) => {
      client.setQueryData(scenarioKeys.one(teamId, changed.id), changed);
      return client.invalidateQueries({ queryKey: scenarioKeys.lists(teamId) });
    },
  });
}
