import { useMutation, useQueryClient } from "@tanstack/react-query";
import { apiPaths } from "#shared/api/paths.ts";
import { uploadPictureResponse } from "#shared/api/pictures.ts";
import { queryText, request } from "../client.ts";
import { pictureKeys } from "./keys.ts";

const LONGEST_NAME = 120;

const uploadPicture = (teamId: string, file: File) =>
  request(apiPaths.pictures(teamId) + queryText({ name: file.name.slice(-LONGEST_NAME) || "picture" }), uploadPictureResponse, {
    method: "POST",
    upload: { file, type: file.type === "image/png" || file.type === "image/jpeg" ? file.type : "application/octet-stream" },
  });

export function useUploadPicture(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (file: File) => uploadPicture(teamId, file),
    onSuccess: () => void client.invalidateQueries({ queryKey: pictureKeys.all(teamId) }),
  });
}
