import { useMutation, useQueryClient } from "@tanstack/react-query";
import { uploadLogParameters, uploadLogResponse } from "#shared/api/logs.ts";
import { apiPaths } from "#shared/api/paths.ts";
import type { ColumnMapping } from "#shared/reception/types.ts";
import { queryText, request } from "../client.ts";
import { logKeys } from "./keys.ts";

export interface LogUpload {
  name: string;
  fileName: string;
  mapping: ColumnMapping;
  /** The file, packed by gzip. */
  packed: Blob;
  signal?: AbortSignal;
  onProgress?: (sent: number, total: number) => void;
}

const uploadLog = (teamId: string, { packed, signal, onProgress, ...about }: LogUpload) =>
  request(apiPaths.logs(teamId) + queryText(uploadLogParameters(about)), uploadLogResponse, {
    method: "POST",
    upload: { file: packed, type: "application/gzip", onProgress },
    signal,
  });

export function useUploadLog(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (upload: LogUpload) => uploadLog(teamId, upload),
    onSuccess: ({ log }) => {
      client.setQueryData(logKeys.one(teamId, log.id), log);
      void client.invalidateQueries({ queryKey: logKeys.lists(teamId) });
    },
  });
}
