/**
 * What a picture is and how large, from its own bytes, without decoding it. PNG: W3C recommendation "Portable Network
 * Graphics", 5.2, 5.3, 11.2.1. JPEG: ITU-T T.81, Annex B; orientation: Exif 2.32 (CIPA DC-008), tag 0x0112.
 */
import { MAX_PICTURE_PIXELS, type PictureType } from "#shared/api/pictures.ts";

export interface Image {
  type: PictureType;
  /** As a browser shows it. */
  widthPx: number;
  heightPx: number;
}
/** Or a sentence about what is wrong with it. */
export type ReadImage = { ok: true; image: Image } | { ok: false; message: string };

const PNG_SIGNATURE = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
const JPEG_SIGNATURE = Buffer.from([0xff, 0xd8, 0xff]);

const refused = (message: string): ReadImage => ({ ok: false, message });
const NOT_WHOLE = "The picture is not whole: its file ends too early. Save or copy it again.";

function ofSize(type: PictureType, widthPx: number, heightPx: number): ReadImage {
  if (widthPx === 0 || heightPx === 0) return refused(`The picture says it is ${widthPx} by ${heightPx} pixels; both have to be at least 1.`);
  if (widthPx > MAX_PICTURE_PIXELS || heightPx > MAX_PICTURE_PIXELS)
    return refused(`The picture is ${widthPx} by ${heightPx} pixels; permitted up to ${MAX_PICTURE_PIXELS} across and down.`);
  return { ok: true, image: { type, widthPx, heightPx } };
}

function readPng(bytes: Buffer): ReadImage {
  if (bytes.length < 33) return refused(NOT_WHOLE);
  if (bytes.readUInt32BE(8) !== 13 || bytes.toString("latin1", 12, 16) !== "IHDR") return refused("The PNG does not begin with its header.");
  // Chunk after chunk: length, name, data, checksum.
  for (let at = 8; ; ) {
    if (at + 12 > bytes.length) return refused(NOT_WHOLE);
    if (bytes.toString("latin1", at + 4, at + 8) === "IEND") break;
    at += 12 + bytes.readUInt32BE(at);
  }
  return ofSize("image/png", bytes.readUInt32BE(16), bytes.readUInt32BE(20));
}

/** 5 to 8 in an Exif block: shown turned by a quarter. */
function isTurned(exif: Buffer): boolean {
  if (exif.length < 14 || exif.toString("latin1", 0, 6) !== "Exif\0\0") return false;
  const tiff = exif.subarray(6);
  const little = tiff.toString("latin1", 0, 2) === "II";
  const u16 = (at: number) => (at + 2 > tiff.length ? 0 : little ? tiff.readUInt16LE(at) : tiff.readUInt16BE(at));
  const u32 = (at: number) => (at + 4 > tiff.length ? 0 : little ? tiff.readUInt32LE(at) : tiff.readUInt32BE(at));
  const directory = u32(4);
  for (let i = 0; i < u16(directory); i++) {
    const entry = directory + 2 + 12 * i;
    if (u16(entry) === 0x0112) return u16(entry + 8) >= 5 && u16(entry + 8) <= 8;
  }
  return false;
}

/** Baseline, extended sequential and progressive: what browsers show. */
const SHOWN_FRAMES = new Set([0xc0, 0xc1, 0xc2]);
const isFrame = (marker: number) => marker >= 0xc0 && marker <= 0xcf && ![0xc4, 0xc8, 0xcc].includes(marker);
const hasNoLength = (marker: number) => marker === 0x01 || (marker >= 0xd0 && marker <= 0xd8);

function readJpeg(bytes: Buffer): ReadImage {
  let turned = false;
  for (let at = 2; at + 4 <= bytes.length; ) {
    if (bytes[at] !== 0xff) return refused("The JPEG is damaged: a marker is missing before its size.");
    const marker = bytes[at + 1];
    if (marker === 0xff) at += 1;
    else if (hasNoLength(marker)) at += 2;
    else {
      const length = bytes.readUInt16BE(at + 2);
      const segment = bytes.subarray(at + 4, at + 2 + length);
      if (length < 2 || at + 2 + length > bytes.length) return refused(NOT_WHOLE);
      if (marker === 0xe1) turned ||= isTurned(segment);
      if (isFrame(marker)) {
        if (!SHOWN_FRAMES.has(marker) || segment.length < 6)
          return refused("The JPEG is of a kind that browsers do not show. Save it as a usual JPEG or PNG.");
        if (bytes.lastIndexOf(Buffer.from([0xff, 0xd9])) < at) return refused(NOT_WHOLE);
        const [height, width] = [segment.readUInt16BE(1), segment.readUInt16BE(3)];
        return turned ? ofSize("image/jpeg", height, width) : ofSize("image/jpeg", width, height);
      }
      if (marker === 0xda || marker === 0xd9) break;
      at += 2 + length;
    }
  }
  return refused("The JPEG does not say its size.");
}

/** What a file is that is neither, for people who wonder why. */
function otherKind(bytes: Buffer): string {
  const start = bytes
    .toString("latin1", 0, 512)
    .replace(/^\xef\xbb\xbf/, "")
    .trimStart()
    .toLowerCase();
  if (start.startsWith("gif8")) return "a GIF";
  if (start.startsWith("%pdf")) return "a PDF";
  if (start.startsWith("bm")) return "a BMP";
  if (start.startsWith("riff") && start.slice(8, 12) === "webp") return "a WebP";
  if (start.startsWith("ii*\0") || start.startsWith("mm\0*")) return "a TIFF";
  if (start.includes("<svg")) return "an SVG";
  if (/ftyp(heic|heix|mif1|avif)/.test(start.slice(4, 12))) return start.includes("avif") ? "an AVIF" : "a HEIC";
  return "neither";
}

export function readImage(bytes: Buffer): ReadImage {
  if (bytes.length === 0) return refused("The file is empty.");
  if (bytes.subarray(0, 8).equals(PNG_SIGNATURE)) return readPng(bytes);
  if (bytes.subarray(0, 3).equals(JPEG_SIGNATURE)) return readJpeg(bytes);
  const kind = otherKind(bytes);
  return refused(`The picture has to be a PNG or a JPEG; this file is ${kind === "neither" ? "neither" : `${kind}. Save it as a PNG`}.`);
}
