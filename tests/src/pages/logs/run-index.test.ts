import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { logTape, tapePaths } from "#src/pages/logs/model/log-tape.ts";
import { burstFrom, indexRuns, longestBurst, longestLossIn, lostBetween, runAt } from "#src/pages/logs/model/run-index.ts";

/** Delivered, lost, delivered, ...; only the first may be 0. */
const recorded = fc
  .tuple(fc.nat(5), fc.array(fc.integer({ min: 1, max: 6 }), { minLength: 1, maxLength: 12 }))
  .map(([first, others]) => [first, ...others]);
/** One entry a packet: true where it was lost. */
const written = (runs: readonly number[]) => runs.flatMap((length, i) => Array<boolean>(length).fill(i % 2 === 1));

describe("a record as run lengths", () => {
  it("counts the losses of every stretch as going through the packets does", () => {
    fc.assert(
      fc.property(recorded, fc.nat(40), fc.nat(40), (runs, a, b) => {
        const packets = written(runs);
        const [from, until] = [Math.min(a, b, packets.length), Math.min(Math.max(a, b), packets.length)];
        expect(lostBetween(indexRuns(runs), from, until)).toBe(packets.slice(from, until).filter(Boolean).length);
      }),
    );
  });
  it("finds the run that holds a packet", () => {
    const index = indexRuns([0, 2, 3, 1]);
    expect([0, 1, 2, 4, 5].map((packet) => runAt(index, packet))).toEqual([1, 1, 2, 2, 3]);
  });
  it("counts a row of losses from where it began, also before the stretch", () => {
    const index = indexRuns([2, 4, 10, 1]);
    expect(longestLossIn(index, 4, 5)).toBe(3);
    expect(longestLossIn(index, 6, 16)).toBe(0);
    expect(longestLossIn(index, 0, 17)).toBe(4);
  });
  it("goes from one row of losses to the next and back, and says where there is none", () => {
    const index = indexRuns([5, 2, 5, 1, 5]);
    expect(burstFrom(index, 0, 1)).toEqual({ from: 5, length: 2 });
    expect(burstFrom(index, 6, 1)).toEqual({ from: 12, length: 1 });
    expect(burstFrom(index, 13, 1)).toBeNull();
    expect(burstFrom(index, 13, -1)).toEqual({ from: 12, length: 1 });
    expect(burstFrom(index, 5, -1)).toBeNull();
    expect(longestBurst(index)).toEqual({ from: 5, length: 2 });
    expect(longestBurst(indexRuns([9]))).toBeNull();
  });
});

describe("the loss tape of a log", () => {
  const stretch = { fromPacket: 0, left: 0, right: 100, pixel: 1 };
  it("cuts deeper with each further loss in a row where packets are wide enough", () => {
    const pieces = logTape(indexRuns([2, 4, 4]), { ...stretch, untilPacket: 10 });
    expect(pieces.map(({ x, untilX, depth, lost }) => [x, untilX, depth, lost])).toEqual([
      [0, 20, 0, 0],
      [20, 30, 0.45, 1],
      [30, 40, 0.72, 1],
      [40, 50, 1, 1],
      [50, 60, 1, 1],
      [60, 100, 0, 0],
    ]);
  });
  it("shows a single lost packet of a hundred thousand", () => {
    const pieces = logTape(indexRuns([70_000, 1, 29_999]), { ...stretch, untilPacket: 100_000 });
    const lost = pieces.filter((piece) => piece.lost > 0);
    expect(lost).toHaveLength(1);
    expect(lost[0]).toMatchObject({ x: 70, untilX: 71, depth: 0.45, deliveredShare: 0.999 });
  });
  it("loses no packet between its pieces, whatever the stretch", () => {
    fc.assert(
      fc.property(recorded, fc.integer({ min: 1, max: 60 }), (runs, width) => {
        const index = indexRuns(runs);
        const pieces = logTape(index, { ...stretch, right: width, untilPacket: index.packets });
        expect(pieces.reduce((sum, piece) => sum + piece.lost, 0)).toBe(index.lost);
        expect(pieces[0]?.x).toBe(0);
        expect(pieces.at(-1)?.untilX).toBeCloseTo(width, 9);
      }),
    );
  });
  it("draws what is left of the tape, and tints what partly arrived", () => {
    const { whole, tints } = tapePaths(
      [
        { x: 0, untilX: 4, depth: 0, deliveredShare: 0, lost: 0 },
        { x: 4, untilX: 5, depth: 1, deliveredShare: 0.9, lost: 3 },
      ],
      10,
    );
    expect(whole).toBe("M0 0H4V10H0Z");
    expect(tints).toEqual(["", "", "M4 0H5V10H4Z"]);
  });
});
