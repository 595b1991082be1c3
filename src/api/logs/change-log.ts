import { useMutation, useQueryClient } from "@tanstack/react-query";
import { type ChangeLogRequest, logDetailSchema } from "#shared/api/logs.ts";
import { apiPaths } from "#shared/api/paths.ts";
import { request } from "../client.ts";
import { logKeys } from "./keys.ts";

const changeLog = (teamId: string, id: string, body: ChangeLogRequest) =>
  request(apiPaths.log(teamId, id), logDetailSchema, { method: "PATCH", body });

export function useChangeLog(teamId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ id, ...body }: { id: string } & ChangeLogRequest) => changeLog(teamId, id, body),
    onSuccess: (changed) => {
      client.setQueryData(logKeys.one(teamId, changed.id), changed);
      return client.invalidateQueries({ queryKey: logKeys.lists(teamId) });
    },
  });
}
