import { createHash } from "node:crypto";
import { MAX_PICTURE_BYTES, PICTURE_TYPES, type UploadPictureResponse } from "#shared/api/pictures.ts";
import type { Database, Queries } from "../../db/client.ts";
import { HttpError, notFound } from "../../http/errors.ts";
import type { SentFile } from "../../http/file.ts";
import type { Member } from "../../http/team-routes.ts";
import { record } from "../activity/repository.ts";
import { inUse, usesOf } from "../uses/repository.ts";
import { readImage } from "./image.ts";
import { deletePicture, findPicture, findPictureBytes, findPictureId, insertPicture, lockPicture } from "./repository.ts";

const TYPES = new Set<string>([...PICTURE_TYPES, "application/octet-stream"]);

/** Stores a picture unless the team has the same file already. */
export async function storePicture(transaction: Queries, member: Pick<Member, "user" | "team">, name: string, bytes: Buffer, at = new Date()) {
  const read = readImage(bytes);
  if (!read.ok) throw new HttpError("picture-invalid", read.message);
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const row = { ...read.image, teamId: member.team.id, authorId: member.user.id, name, size: bytes.length, sha256, bytes, uploadedAt: at };
  const id = await insertPicture(transaction, row);
  if (id === null) return { id: (await findPictureId(transaction, member.team.id, sha256)) as string, existed: true };
  await record(transaction, member, { what: "picture-uploaded", subject: { id, name }, at });
  return { id, existed: false };
}

export function createPictureService(db: Database) {
  return {
    async upload(member: Member, name: string, file: SentFile): Promise<UploadPictureResponse> {
      if (!TYPES.has(file.type)) {
        const sent = file.type === "" ? "none was sent" : `${file.type} was sent`;
        throw new HttpError("type-not-taken", `A picture is sent with Content-Type ${PICTURE_TYPES.join(" or ")}; ${sent}.`);
      }
      const chunks: Buffer[] = [];
      for await (const chunk of file.chunks(MAX_PICTURE_BYTES)) chunks.push(chunk);
      const { id, existed } = await db.transaction((transaction) => storePicture(transaction, member, name, Buffer.concat(chunks)));
      const picture = await findPicture(db, member, id);
      if (!picture) throw notFound();
      return { picture, existed };
    },

    async bytes({ team }: Member, id: string) {
      const found = await findPictureBytes(db, team.id, id);
      if (!found) throw notFound();
      return found;
    },

    async remove(member: Member, id: string): Promise<void> {
      const kept = await db.transaction(async (transaction) => {
        const picture = await lockPicture(transaction, member.team.id, id);
        if (!picture) throw notFound();
        const uses = await usesOf(transaction, "picture", id);
        const subject = { id, name: picture.name };
        await record(transaction, member, { what: uses.length > 0 ? "picture-deletion-refused" : "picture-deleted", subject });
        if (uses.length === 0) await deletePicture(transaction, id);
        return { uses, name: picture.name };
      });
      if (kept.uses.length > 0) throw inUse(`The picture “${kept.name}”`, kept.uses);
    },
  };
}
export type PictureService = ReturnType<typeof createPictureService>;
