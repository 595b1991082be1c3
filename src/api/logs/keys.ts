/** Beginnings of the query keys; what begins with one is made stale together. */
export const logKeys = {
  all: (teamId: string) => ["teams", teamId, "logs"] as const,
  lists: (teamId: string) => ["teams", teamId, "logs", "list"] as const,
  one: (teamId: string, id: string) => ["teams", teamId, "logs", "one", id] as const,
};
