/**
 * /api/teams/:teamId/pictures: pictures that lie under a floor. A picture never changes.
 *
 * POST ?name=hall-2.png with the file itself as body, Content-Type image/png, image/jpeg or application/octet-stream
 * -> 201 uploadPictureResponse, or 200 when the team has this very file already (`existed`).
 * What the file is, is read from its first bytes, whatever name and type say. Refused: 413 "too-large" with `size`,
 * 415 "type-not-taken", 422 "picture-invalid" with a sentence, 429 "too-many-attempts".
 * GET .../pictures/:id -> the bytes. DELETE -> deletePictureResponse, or 409 "in-use" with `uses`.
 */
import { z } from "zod";
import { pageOf, pageQuery, personSchema } from "./common.ts";

export const MAX_PICTURE_BYTES = 10_000_000;
/** Across and down. */
export const MAX_PICTURE_PIXELS = 10_000;
export const PICTURE_TYPES = ["image/png", "image/jpeg"] as const;
export type PictureType = (typeof PICTURE_TYPES)[number];

const pictureSchema = z.strictObject({
  id: z.uuid(),
  name: z.string(),
  type: z.enum(PICTURE_TYPES),
  /** As a browser shows it: a photo that was taken upright is upright. */
  widthPx: z.int().positive(),
  heightPx: z.int().positive(),
  bytes: z.int().positive(),
  author: personSchema,
  uploadedAt: z.iso.datetime(),
  /** Scenarios with a revision that shows it; 0: it can be deleted. */
  scenarios: z.int().nonnegative(),
  /** Whoever asks may delete it, once it is unused. */
  mayEdit: z.boolean(),
});
export type Picture = z.infer<typeof pictureSchema>;

/** Newest first. */
export const pictureListQuery = z.strictObject(pageQuery);
export const pictureListResponse = z.strictObject(pageOf(pictureSchema));
export type PictureListResponse = z.infer<typeof pictureListResponse>;

export const uploadPictureQuery = z.strictObject({ name: z.string().trim().min(1).max(120) });

export const uploadPictureResponse = z.strictObject({
  picture: pictureSchema,
  /** The same file was there already and is given back as it is. */
  existed: z.boolean(),
});
export type UploadPictureResponse = z.infer<typeof uploadPictureResponse>;

export const deletePictureResponse = z.strictObject({ deleted: z.literal(true) });
