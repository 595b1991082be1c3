import { queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { runDetailSchema } from "#shared/api/runs.ts";
import { request } from "../client.ts";

export const runKey = (teamId: string, runId: string) => ["teams", teamId, "runs", runId] as const;

/** A kept run never changes. */
const runOptions = (teamId: string, runId: string) =>
  queryOptions({
    queryKey: runKey(teamId, runId),
    queryFn: ({ signal }) => request(apiPaths.run(teamId, runId), runDetailSchema, { signal }),
    staleTime: Number.POSITIVE_INFINITY,
  });

export const useRun = (teamId: string, runId: string) => useQuery(runOptions(teamId, runId));
