import { keepPreviousData, queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { type ScenarioListQuery, scenarioListResponse } from "#shared/api/scenarios.ts";
import { queryText, request } from "../client.ts";
import { scenarioKeys } from "./keys.ts";

const scenarioListOptions = (teamId: string, query: ScenarioListQuery) =>
  queryOptions({
    queryKey: [...scenarioKeys.lists(teamId), query],
    queryFn: ({ signal }) => request(apiPaths.scenarios(teamId) + queryText(query), scenarioListResponse, { signal }),
    // While a filter or a page changes, the rows before stay; another team's never do.
    placeholderData: (previous, before) => (before?.queryKey[1] === teamId ? keepPreviousData(previous) : undefined),
  });

export const useScenarioList = (teamId: string, query: ScenarioListQuery) => useQuery(scenarioListOptions(teamId, query));
