import { keepPreviousData, queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { activityListResponse } from "#shared/api/teams.ts";
import { queryText, request } from "../client.ts";

const activityOptions = (teamId: string, page: number, pageSize: number) =>
  queryOptions({
    queryKey: ["teams", teamId, "activity", page, pageSize],
    queryFn: ({ signal }) => request(apiPaths.activity(teamId) + queryText({ page, pageSize }), activityListResponse, { signal }),
    placeholderData: keepPreviousData,
    staleTime: 0,
  });

export const useActivity = (teamId: string, page: number, pageSize: number) => useQuery(activityOptions(teamId, page, pageSize));
