import { describe, expect, it } from "vitest";
import { crosses, obstacleLossDb, placeAt, speedAt, wayOf } from "#shared/network/geometry.ts";
import { floorNodeSchema, type Obstacle } from "#shared/scenario/floor-schema.ts";

const wall = (fromXM: number, fromYM: number, toXM: number, toYM: number): Obstacle => ({
  type: "wall",
  name: "",
  fromXM,
  fromYM,
  toXM,
  toYM,
  lossDb: 7,
});
const block: Obstacle = { type: "block", name: "", xM: 10, yM: 10, widthM: 4, depthM: 2, lossDb: 12 };

describe("a node on its way", () => {
  const way = wayOf(
    floorNodeSchema.parse({
      id: 1,
      xM: 0,
      yM: 0,
      wayPoints: [
        { atS: 2, xM: 6, yM: 8 },
        { atS: 3, xM: 6, yM: 8 },
        { atS: 5, xM: 6, yM: 4 },
      ],
    }),
  );
  const place = (atS: number) => {
    const out = new Float64Array(3);
    placeAt(way, atS, out);
    return [...out];
  };

  it("moves straight and at constant speed between way-points, and stays at the last", () => {
    expect(place(0)).toEqual([0, 0, 0]);
    expect(place(1)).toEqual([3, 4, 5]);
    expect(place(2.5)).toEqual([6, 8, 10]);
    expect(place(4)).toEqual([6, 6, 12]);
    expect(place(99)).toEqual([6, 4, 14]);
  });

  it("has the speed of the piece it is on", () => {
    expect([0, 1.9, 2, 3, 4.9, 5, 50].map((atS) => speedAt(way, atS))).toEqual([5, 5, 0, 2, 2, 0, 0]);
  });

  it("does not move without way-points", () => {
    expect(wayOf(floorNodeSchema.parse({ id: 1, xM: 3, yM: 4 })).moves).toBe(false);
  });
});

describe("a wall", () => {
  it("is crossed by a line through it, from either side", () => {
    expect(crosses(wall(5, 0, 5, 10), 0, 5, 10, 5)).toBe(true);
    expect(crosses(wall(5, 0, 5, 10), 10, 5, 0, 5)).toBe(true);
    expect(crosses(wall(5, 0, 5, 10), 0, 5, 4, 5)).toBe(false);
    expect(crosses(wall(5, 0, 5, 10), 0, 11, 10, 12)).toBe(false);
  });

  it("is crossed by a line that touches one of its ends, or ends on it", () => {
    expect(crosses(wall(5, 0, 5, 10), 0, 10, 10, 10)).toBe(true);
    expect(crosses(wall(5, 0, 5, 10), 0, 5, 5, 5)).toBe(true);
  });

  it("is not crossed by a parallel line beside it, and once by one that runs along it", () => {
    expect(crosses(wall(0, 0, 10, 10), 1, 0, 11, 10)).toBe(false);
    expect(crosses(wall(0, 0, 10, 10), 2, 2, 20, 20)).toBe(true);
    expect(crosses(wall(0, 0, 10, 10), 11, 11, 20, 20)).toBe(false);
  });

  it("without length is not there", () => {
    expect(crosses(wall(5, 5, 5, 5), 0, 5, 10, 5)).toBe(false);
  });

  it("is crossed by nodes at the same place only when they stand on it", () => {
    expect(crosses(wall(0, 0, 10, 10), 4, 4, 4, 4)).toBe(true);
    expect(crosses(wall(0, 0, 10, 10), 4, 5, 4, 5)).toBe(false);
  });
});

describe("a block", () => {
  it("is crossed by a line through, into or inside it", () => {
    expect(crosses(block, 0, 11, 20, 11)).toBe(true);
    expect(crosses(block, 0, 11, 12, 11)).toBe(true);
    expect(crosses(block, 11, 11, 13, 11.5)).toBe(true);
    expect(crosses(block, 12, 0, 12, 30)).toBe(true);
  });

  it("is not crossed by a line that passes a corner, and is by one that touches it", () => {
    expect(crosses(block, 8, 11, 11, 8)).toBe(false);
    expect(crosses(block, 9, 11, 11, 9)).toBe(true);
    expect(crosses(block, 0, 9.9, 20, 9.9)).toBe(false);
  });
});

it("losses of all that a line crosses add up", () => {
  expect(obstacleLossDb([wall(5, 0, 5, 30), block, wall(50, 0, 50, 30)], 0, 11, 20, 11)).toBe(19);
});
