import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { type CreateRunRequest, createRunResponse } from "#shared/api/runs.ts";
import { request } from "../client.ts";
import { scenarioKeys } from "../scenarios/keys.ts";
import { runKey } from "./get-run.ts";

const createRun = (teamId: string, scenarioId: string, body: CreateRunRequest) =>
  request(apiPaths.runs(teamId, scenarioId), createRunResponse, { method: "POST", body });

/** The server computes the run itself, so that nobody can hand in a result. */
export function useCreateRun(teamId: string, scenarioId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: CreateRunRequest) => createRun(teamId, scenarioId, body),
    onSuccess: ({ run }) => {
      client.setQueryData(runKey(teamId, run.id), run);
      void client.invalidateQueries({ queryKey: scenarioKeys.one(teamId, scenarioId) });
      void client.invalidateQueries({ queryKey: scenarioKeys.lists(teamId) });
    },
  });
}
