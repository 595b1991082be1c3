export const pictureKeys = {
  all: (teamId: string) => ["teams", teamId, "pictures"] as const,
};
