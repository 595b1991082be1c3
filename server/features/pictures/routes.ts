import { pictureListQuery, uploadPictureQuery } from "#shared/api/pictures.ts";
import type { Database } from "../../db/client.ts";
import { contentDisposition } from "../../http/disposition.ts";
import { limitPerPerson } from "../../http/rate.ts";
import { idFrom, type TeamRoute } from "../../http/team-routes.ts";
import { validated } from "../../http/validation.ts";
import { listPictures } from "./repository.ts";
import type { PictureService } from "./service.ts";

const UPLOADS = 60;

export const pictureRoutes = (db: Database, pictures: PictureService): TeamRoute[] => [
  {
    method: "get",
    path: "/pictures",
    action: "open-scenarios",
    handle: async ({ member, query }) => ({ body: await listPictures(db, member, validated(pictureListQuery, query)) }),
  },
  {
    method: "post",
    path: "/pictures",
    action: "edit-scenarios",
    body: "file",
    before: limitPerPerson("pictures", UPLOADS),
    handle: async ({ member, query, file }) => {
      const { name } = validated(uploadPictureQuery, query);
      const body = await pictures.upload(member, name, file);
      return { status: body.existed ? 200 : 201, body };
    },
  },
  {
    method: "get",
    path: "/pictures/:id",
    action: "open-scenarios",
    handle: async ({ member, params }) => {
      const { name, type, bytes } = await pictures.bytes(member, idFrom(params, "id"));
      // A picture never changes; only the viewer's browser may keep it. Opened by itself it can do nothing.
      const headers = {
        "Content-Type": type,
        "X-Content-Type-Options": "nosniff",
        "Cache-Control": "private, max-age=31536000, immutable",
        "Content-Disposition": contentDisposition("inline", name),
        "Content-Security-Policy": "default-src 'none'; sandbox",
      };
      return { bytes, headers };
    },
  },
  {
    method: "delete",
    path: "/pictures/:id",
    action: "edit-scenarios",
    handle: async ({ member, params }) => {
      await pictures.remove(member, idFrom(params, "id"));
      return { body: { deleted: true } };
    },
  },
];
