import { keepPreviousData, queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { revisionListResponse } from "#shared/api/revisions.ts";
import { queryText, request } from "../client.ts";
import { scenarioKeys } from "../scenarios/keys.ts";

export interface PageOfRevisions {
  page: number;
  pageSize: number;
}

const revisionListOptions = (teamId: string, scenarioId: string, { page, pageSize }: PageOfRevisions) =>
  queryOptions({
    queryKey: [...scenarioKeys.one(teamId, scenarioId), "revisions", page, pageSize],
    queryFn: ({ signal }) => request(apiPaths.revisions(teamId, scenarioId) + queryText({ page, pageSize }), revisionListResponse, { signal }),
    placeholderData: keepPreviousData,
  });

export const useRevisionList = (teamId: string, scenarioId: string, page: PageOfRevisions) => useQuery(revisionListOptions(teamId, scenarioId, page));
