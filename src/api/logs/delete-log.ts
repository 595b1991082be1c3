import { useMutation, useQueryClient } from "@tanstack/react-query";
import { deleteLogResponse } from "#shared/api/logs.ts";
import { apiPaths } from "#shared/api/paths.ts";
import { request } from "../client.ts";
import { logKeys } from "./keys.ts";

const deleteLog = (teamId: string, id: string) => request(apiPaths.log(teamId, id), deleteLogResponse, { method: "DELETE" });

export function useDeleteLog(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => deleteLog(teamId, id),
    onSuccess: (_, id) => {
      client.removeQueries({ queryKey: logKeys.one(teamId, id) });
      return client.invalidateQueries({ queryKey: logKeys.lists(teamId) });
    },
  });
}
