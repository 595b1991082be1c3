import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { deletePictureResponse } from "#shared/api/pictures.ts";
import { request } from "../client.ts";
import { pictureKeys } from "./keys.ts";

export function useDeletePicture(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => request(apiPaths.picture(teamId, id), deletePictureResponse, { method: "DELETE" }),
    onSettled: () => void client.invalidateQueries({ queryKey: pictureKeys.all(teamId) }),
  });
}
