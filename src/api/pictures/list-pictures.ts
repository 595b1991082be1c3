import { queryOptions, useQuery } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { pictureListResponse } from "#shared/api/pictures.ts";
import { queryText, request } from "../client.ts";
import { pictureKeys } from "./keys.ts";

const NEWEST = { page: 1, pageSize: 25 };

const pictureListOptions = (teamId: string) =>
  queryOptions({
    queryKey: pictureKeys.all(teamId),
    queryFn: ({ signal }) => request(apiPaths.pictures(teamId) + queryText(NEWEST), pictureListResponse, { signal }),
  });

/** The team's pictures, the newest first. */
export const usePictureList = (teamId: string, wanted: boolean) => useQuery({ ...pictureListOptions(teamId), enabled: wanted });
