import { queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { sessionResponse } from "#shared/api/session.ts";
import { request } from "../client.ts";

export const sessionOptions = () =>
  queryOptions({
    queryKey: ["session"],
    queryFn: ({ signal }) => request(apiPaths.session(), sessionResponse, { signal, anonymous: true }),
    staleTime: 60_000,
  });

export const useSessionQuery = () => useQuery(sessionOptions());
