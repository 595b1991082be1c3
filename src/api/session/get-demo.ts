import { queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { demoResponse } from "#shared/api/session.ts";
import { request } from "../client.ts";

const demoOptions = () =>
  queryOptions({
    queryKey: ["demo"],
    queryFn: ({ signal }) => request(apiPaths.demo(), demoResponse, { signal, anonymous: true }),
    staleTime: Number.POSITIVE_INFINITY,
  });

export const useDemo = () => useQuery(demoOptions());
