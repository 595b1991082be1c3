import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { lossRecord, lossTicks, lostInView, tapePieces } from "#src/components/plots/tape-pieces.ts";

const delivered = Uint8Array.of(1, 0, 0, 0, 0, 1, 0, 1);
const whole = (count: number, width: number) => ({ periodS: 1, count, fromS: 0, untilS: count, left: 0, right: width, pixel: 1 });

describe("the loss tape", () => {
  it("cuts deeper with each further loss in a row, and all the way from the third on", () => {
    const pieces = tapePieces(lossRecord(delivered), whole(8, 800));
    expect(pieces.map(({ depth }) => depth)).toEqual([0, 0.45, 0.72, 1, 1, 0, 0.45, 0]);
    expect(pieces[1]).toMatchObject({ x: 100, untilX: 200 });
  });
  it("knows a row of losses that began before the view", () => {
    const pieces = tapePieces(lossRecord(delivered), { ...whole(8, 800), fromS: 3, untilS: 5 });
    expect(pieces[0]?.depth).toBe(1);
  });
  it("counts the losses of the rounds in view", () => {
    const record = lossRecord(delivered);
    expect(lostInView(record, 1, 0, 8)).toBe(5);
    expect(lostInView(record, 1, 2, 5)).toBe(3);
    expect(lostInView(record, 1, 8, 9)).toBe(0);
  });
  it("never hides a lost message, however many rounds share a pixel", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 100_000 }), fc.integer({ min: 50, max: 2000 }), fc.nat(), (count, width, which) => {
        const all = new Uint8Array(count).fill(1);
        const lost = which % count;
        all[lost] = 0;
        const pieces = tapePieces(lossRecord(all), whole(count, width));
        const cut = pieces.filter(({ depth }) => depth > 0);
        const x = (lost / count) * width;
        return cut.length === 1 && (cut[0]?.x ?? 0) <= x + 1.5 && (cut[0]?.untilX ?? 0) >= x - 1.5 && lossTicks(pieces, 1.5).length === 1;
      }),
      { numRuns: 60 },
    );
  });
  it("covers every pixel once, from the first round in view to the last", () => {
    fc.assert(
      fc.property(fc.array(fc.boolean(), { minLength: 1, maxLength: 3000 }), (flags) => {
        const pieces = tapePieces(lossRecord(Uint8Array.from(flags, Number)), whole(flags.length, 500));
        const joined = pieces.every((piece, i) => i === 0 || Math.abs(piece.x - (pieces[i - 1]?.untilX ?? 0)) < 1e-6);
        return joined && pieces[0]?.x === 0 && Math.abs((pieces.at(-1)?.untilX ?? 0) - 500) < 1e-6;
      }),
    );
  });
});
