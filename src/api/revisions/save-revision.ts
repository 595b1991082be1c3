import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import type { SaveRevisionRequest } from "#shared/api/revisions.ts";
import { scenarioResponse } from "#shared/api/scenarios.ts";
import { request } from "../client.ts";
import { scenarioKeys } from "../scenarios/keys.ts";

const saveRevision = (teamId: string, scenarioId: string, body: SaveRevisionRequest) =>
  request(apiPaths.revisions(teamId, scenarioId), scenarioResponse, { method: "POST", body });

/** Fails with code "revision-conflict" and `details.latest` when somebody saved in the meantime. */
export function useSaveRevision(teamId: string, scenarioId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: SaveRevisionRequest) => saveRevision(teamId, scenarioId, body),
    onSuccess: (saved) => {
      client.setQueryData(scenarioKeys.one(teamId, scenarioId), saved);
      void client.invalidateQueries({ queryKey: [...scenarioKeys.one(teamId, scenarioId), "revisions"] });
      void client.invalidateQueries({ queryKey: scenarioKeys.lists(teamId) });
    },
  });
}
