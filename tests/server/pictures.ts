/** Pictures made byte by byte, so that each part of a file can be wrong by itself. */
import { crc32, deflateSync } from "node:zlib";

function chunk(name: string, data: Buffer): Buffer {
  const body = Buffer.concat([Buffer.from(name, "latin1"), data]);
  const length = Buffer.alloc(4);
  length.writeUInt32BE(data.length);
  const sum = Buffer.alloc(4);
  sum.writeUInt32BE(crc32(body));
  return Buffer.concat([length, body, sum]);
}

const SIGNATURE = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);

/** A grey PNG of one bit a pixel; `padding` makes the file larger without changing the picture. */
export function png(width: number, height: number, { padding = 0 } = {}): Buffer {
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  header[8] = 1;
  const rows = deflateSync(Buffer.alloc(Math.min(height, 200) * (1 + Math.ceil(width / 8)), 0xaa));
  const text = padding > 0 ? [chunk("tEXt", Buffer.alloc(padding, 0x20))] : [];
  return Buffer.concat([SIGNATURE, chunk("IHDR", header), ...text, chunk("IDAT", rows), chunk("IEND", Buffer.alloc(0))]);
}

function segment(marker: number, data: Buffer): Buffer {
  const head = Buffer.from([0xff, marker, 0, 0]);
  head.writeUInt16BE(data.length + 2, 2);
  return Buffer.concat([head, data]);
}

function exif(orientation: number, little: boolean): Buffer {
  const tiff = Buffer.alloc(26);
  tiff.write(little ? "II" : "MM", 0, "latin1");
  const u16 = (value: number, at: number) => (little ? tiff.writeUInt16LE(value, at) : tiff.writeUInt16BE(value, at));
  const u32 = (value: number, at: number) => (little ? tiff.writeUInt32LE(value, at) : tiff.writeUInt32BE(value, at));
  u16(42, 2);
  u32(8, 4);
  u16(1, 8);
  u16(0x0112, 10);
  u16(3, 12);
  u32(1, 14);
  u16(orientation, 18);
  return Buffer.concat([Buffer.from("Exif\0\0", "latin1"), tiff]);
}

interface JpegParts {
  frame?: number;
  orientation?: number;
  little?: boolean;
}
/** What comes before the pixels of a JPEG, and its end: enough for whoever does not decode it. */
export function jpeg(width: number, height: number, { frame = 0xc0, orientation, little = false }: JpegParts = {}): Buffer {
  const size = Buffer.from([8, 0, 0, 0, 0, 1, 1, 0x11, 0]);
  size.writeUInt16BE(height, 1);
  size.writeUInt16BE(width, 3);
  return Buffer.concat([
    Buffer.from([0xff, 0xd8]),
    segment(0xe0, Buffer.from("JFIF\0\x01\x01\0\0\x01\0\x01\0\0", "latin1")),
    ...(orientation === undefined ? [] : [segment(0xe1, exif(orientation, little))]),
    segment(frame, size),
    segment(0xda, Buffer.from([1, 1, 0, 0, 63, 0])),
    Buffer.from([0x55, 0x55, 0xff, 0xd9]),
  ]);
}
