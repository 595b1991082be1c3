import { keepPreviousData, queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { type RunListQuery, runListResponse } from "#shared/api/runs.ts";
import { queryText, request } from "../client.ts";
import { scenarioKeys } from "../scenarios/keys.ts";

const runListOptions = (teamId: string, scenarioId: string, query: RunListQuery) =>
  queryOptions({
    queryKey: [...scenarioKeys.one(teamId, scenarioId), "runs", query],
    queryFn: ({ signal }) => request(apiPaths.runs(teamId, scenarioId) + queryText(query), runListResponse, { signal }),
    placeholderData: keepPreviousData,
  });

export const useRunList = (teamId: string, scenarioId: string, query: RunListQuery) => useQuery(runListOptions(teamId, scenarioId, query));
