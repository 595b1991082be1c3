import { and, countDistinct, desc, eq } from "drizzle-orm";
import { may } from "#shared/api/permissions.ts";
import type { Picture, PictureListResponse } from "#shared/api/pictures.ts";
import type { Queries } from "../../db/client.ts";
import { floorPictures, revisionPictures, users } from "../../db/schema.ts";
import type { Member } from "../../http/team-routes.ts";

const columns = {
  id: floorPictures.id,
  name: floorPictures.name,
  type: floorPictures.type,
  widthPx: floorPictures.widthPx,
  heightPx: floorPictures.heightPx,
  bytes: floorPictures.size,
  author: { id: users.id, name: users.name },
  uploadedAt: floorPictures.uploadedAt,
  scenarios: countDistinct(revisionPictures.scenarioId),
};

const select = (db: Queries) =>
  db
    .select(columns)
    .from(floorPictures)
    .innerJoin(users, eq(users.id, floorPictures.authorId))
    .leftJoin(revisionPictures, eq(revisionPictures.pictureId, floorPictures.id))
    .groupBy(floorPictures.id, users.id)
    .$dynamic();

const asPicture = ({ uploadedAt, ...row }: Omit<Picture, "uploadedAt" | "mayEdit"> & { uploadedAt: Date }, { roles }: Member): Picture => ({
  ...row,
  uploadedAt: uploadedAt.toISOString(),
  mayEdit: may(roles, "edit-scenarios"),
});

export async function listPictures(
  db: Queries,
  member: Member,
  { page, pageSize }: { page: number; pageSize: number },
): Promise<PictureListResponse> {
  const ofTeam = eq(floorPictures.teamId, member.team.id);
  const rows = await select(db)
    .where(ofTeam)
    .orderBy(desc(floorPictures.uploadedAt), desc(floorPictures.id))
    .limit(pageSize)
    .offset((page - 1) * pageSize);
  return { items: rows.map((row) => asPicture(row, member)), total: await db.$count(floorPictures, ofTeam), page, pageSize };
}

export async function findPicture(db: Queries, member: Member, id: string): Promise<Picture | null> {
  const [row] = await select(db).where(and(eq(floorPictures.id, id), eq(floorPictures.teamId, member.team.id)));
  return row ? asPicture(row, member) : null;
}

export async function findPictureId(db: Queries, teamId: string, sha256: string): Promise<string | null> {
  const [row] = await db
    .select({ id: floorPictures.id })
    .from(floorPictures)
    .where(and(eq(floorPictures.teamId, teamId), eq(floorPictures.sha256, sha256)));
  return row?.id ?? null;
}

export async function findPictureBytes(db: Queries, teamId: string, id: string) {
  const [row] = await db
    .select({ name: floorPictures.name, type: floorPictures.type, bytes: floorPictures.bytes })
    .from(floorPictures)
    .where(and(eq(floorPictures.id, id), eq(floorPictures.teamId, teamId)));
  return row ?? null;
}

/** null when the team has the same file already. */
export async function insertPicture(db: Queries, row: typeof floorPictures.$inferInsert): Promise<string | null> {
  const [inserted] = await db.insert(floorPictures).values(row).onConflictDoNothing().returning({ id: floorPictures.id });
  return inserted?.id ?? null;
}

/** Whoever wants to name it waits until the transaction ends. */
export async function lockPicture(transaction: Queries, teamId: string, id: string) {
  const [row] = await transaction
    .select({ id: floorPictures.id, name: floorPictures.name })
    .from(floorPictures)
    .where(and(eq(floorPictures.id, id), eq(floorPictures.teamId, teamId)))
    .for("update");
  return row ?? null;
}

export async function deletePicture(db: Queries, id: string): Promise<void> {
  await db.delete(floorPictures).where(eq(floorPictures.id, id));
}
