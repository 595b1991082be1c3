import { queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { scenarioResponse } from "#shared/api/scenarios.ts";
import { request } from "../client.ts";
import { scenarioKeys } from "./keys.ts";

export const scenarioOptions = (teamId: string, id: string) =>
  queryOptions({
    queryKey: scenarioKeys.one(teamId, id),
    queryFn: ({ signal }) => request(apiPaths.scenario(teamId, id), scenarioResponse, { signal }),
  });

export const useScenario = (teamId: string, id: string) => useQuery(scenarioOptions(teamId, id));
