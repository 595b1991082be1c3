import { queryOptions, useQuery } from "@tanstack/react-query";
import { logDetailSchema } from "#shared/api/logs.ts";
import { apiPaths } from "#shared/api/paths.ts";
import { request } from "../client.ts";
import { logKeys } from "./keys.ts";

/** With all run lengths; dropped from memory a minute after the last view of it is gone. */
export const logOptions = (teamId: string, id: string) =>
  queryOptions({
    queryKey: logKeys.one(teamId, id),
    queryFn: ({ signal }) => request(apiPaths.log(teamId, id), logDetailSchema, { signal }),
    gcTime: 60_000,
    structuralSharing: false,
  });

export const useLog = (teamId: string, id: string) => useQuery(logOptions(teamId, id));

/** Only while there is one to ask for. */
export const useChosenLog = (teamId: string, id: string | null) => useQuery({ ...logOptions(teamId, id ?? ""), enabled: id !== null });
