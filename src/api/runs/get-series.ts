import { queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { decodeSeries } from "#shared/api/series.ts";
import { ApiError, requestRaw } from "../client.ts";
import { runKey } from "./get-run.ts";

async function getSeries(teamId: string, runId: string, signal: AbortSignal) {
  const response = await requestRaw(apiPaths.series(teamId, runId), { signal });
  const bytes = new Uint8Array(await response.arrayBuffer());
  try {
    return decodeSeries(bytes);
  } catch {
    throw new ApiError("not-understood", "The record of this run was not understood: this page is probably older than the server.", response.status);
  }
}

/** Large: dropped from memory a minute after the last view of it is gone. */
const seriesOptions = (teamId: string, runId: string) =>
  queryOptions({
    queryKey: [...runKey(teamId, runId), "series"],
    queryFn: ({ signal }) => getSeries(teamId, runId, signal),
    staleTime: Number.POSITIVE_INFINITY,
    gcTime: 60_000,
    structuralSharing: false,
  });

export const useSeries = (teamId: string, runId: string) => useQuery(seriesOptions(teamId, runId));
