import { activityListQuery } from "#shared/api/teams.ts";
import type { Database } from "../../db/client.ts";
import type { TeamRoute } from "../../http/team-routes.ts";
import { validated } from "../../http/validation.ts";
import { listActivity } from "./repository.ts";

export const activityRoutes = (db: Database): TeamRoute[] => [
  {
    method: "get",
    path: "/activity",
    action: "read-activity",
    handle: async ({ member, query }) => ({ body: await listActivity(db, member.team.id, validated(activityListQuery, query)) }),
  },
];
