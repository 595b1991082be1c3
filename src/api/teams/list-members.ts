import { queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { memberListResponse } from "#shared/api/teams.ts";
import { request } from "../client.ts";

const membersOptions = (teamId: string) =>
  queryOptions({
    queryKey: ["teams", teamId, "members"],
    queryFn: ({ signal }) => request(apiPaths.members(teamId), memberListResponse, { signal }),
  });

export const useMembers = (teamId: string) => useQuery(membersOptions(teamId));
