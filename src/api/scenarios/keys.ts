/** Beginnings of the query keys; what begins with one is made stale together. */
export const scenarioKeys = {
  all: (teamId: string) => ["teams", teamId, "scenarios"] as const,
  lists: (teamId: string) => ["teams", teamId, "scenarios", "list"] as const,
  one: (teamId: string, id: string) => ["teams", teamId, "scenarios", "one", id] as const,
};
