import { keepPreviousData, queryOptions, useQuery } from "@tanstack/react-query";
import { type LogListQuery, logListResponse } from "#shared/api/logs.ts";
import { apiPaths } from "#shared/api/paths.ts";
import { queryText, request } from "../client.ts";
import { logKeys } from "./keys.ts";

const logListOptions = (teamId: string, query: LogListQuery) =>
  queryOptions({
    queryKey: [...logKeys.lists(teamId), query],
    queryFn: ({ signal }) => request(apiPaths.logs(teamId) + queryText(query), logListResponse, { signal }),
    // While the search or a page changes, the rows before stay; another team's never do.
    placeholderData: (previous, before) => (before?.queryKey[1] === teamId ? keepPreviousData(previous) : undefined),
  });

export const useLogList = (teamId: string, query: LogListQuery) => useQuery(logListOptions(teamId, query));
