import { queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { revisionDetailSchema } from "#shared/api/revisions.ts";
import { request } from "../client.ts";
import { scenarioKeys } from "../scenarios/keys.ts";

export const revisionOptions = (teamId: string, scenarioId: string, number: number) =>
  queryOptions({
    queryKey: [...scenarioKeys.one(teamId, scenarioId), "revision", number],
    queryFn: ({ signal }) => request(apiPaths.revision(teamId, scenarioId, number), revisionDetailSchema, { signal }),
    // A revision never changes; the verdict of its latest run does.
    staleTime: 30_000,
  });

export const useRevision = (teamId: string, scenarioId: string, number: number) => useQuery(revisionOptions(teamId, scenarioId, number));
