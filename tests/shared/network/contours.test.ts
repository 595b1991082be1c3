/** The wave over the plan, where its shape is known. */
import { describe, expect, it } from "vitest";
import { floodContours } from "#shared/network/contours.ts";
import { gridX, gridY, type Isoline, isolines } from "#shared/network/isolines.ts";
import { meanLinks } from "#shared/network/link-table.ts";
import { roundTiming } from "#shared/network/round.ts";
import type { Scenario, ScenarioInput } from "#shared/scenario/schema.ts";
import { flooded, hall, line } from "../../helpers/floors.ts";

const GRID = { columns: 41, rows: 31, widthM: 40, depthM: 30 };
const valuesOf = (f: (x: number, y: number) => number): Float64Array =>
  Float64Array.from({ length: GRID.columns * GRID.rows }, (_, p) => f(gridX(GRID, p % GRID.columns), gridY(GRID, Math.floor(p / GRID.columns))));
const areaOf = (ring: readonly number[]): number => {
  let twice = 0;
  for (let i = 0; i < ring.length; i += 2) {
    const j = (i + 2) % ring.length;
    twice += ring[i] * ring[j + 1] - ring[j] * ring[i + 1];
  }
  return twice / 2;
};

describe("isolines", () => {
  it("close a hill that lies inside in one ring and one shore", () => {
    const { rings, shores } = isolines(
      GRID,
      valuesOf((x, y) => 100 - (x - 20) ** 2 - (y - 15) ** 2),
      0,
    );
    expect(rings).toHaveLength(1);
    expect(Math.abs(areaOf(rings[0])) / (Math.PI * 100)).toBeCloseTo(1, 1);
    expect(shores).toHaveLength(1);
    expect(shores[0].slice(0, 2)).toEqual(shores[0].slice(-2));
  });

  it("go along the border where the hill is cut, and leave that out of the shore", () => {
    const { rings, shores } = isolines(
      GRID,
      valuesOf((x, y) => 100 - x * x - (y - 15) ** 2),
      0,
    );
    expect(Math.abs(areaOf(rings[0])) / (Math.PI * 50)).toBeCloseTo(1, 1);
    expect(shores).toHaveLength(1);
    // Both ends lie on the left border.
    expect([shores[0][0], shores[0].at(-2)]).toEqual([0, 0]);
    expect(Math.abs(shores[0][1] - (shores[0].at(-1) ?? 0))).toBeCloseTo(20, 6);
  });

  it("wind the other way around a hole", () => {
    const { rings } = isolines(
      GRID,
      valuesOf((x, y) => (x - 20) ** 2 + (y - 15) ** 2 - 25),
      0,
    );
    const areas = rings.map(areaOf).sort((a, b) => Math.abs(a) - Math.abs(b));
    expect(areas).toHaveLength(2);
    expect(areas[0] * areas[1]).toBeLessThan(0);
    expect(Math.abs(areas[1])).toBeCloseTo(1200, 6);
  });

  it("surround the whole plan, and no more, when everything is above the level, and nothing when nothing is", () => {
    const all = isolines(
      GRID,
      valuesOf(() => 1),
      0.5,
    );
    expect(Math.abs(areaOf(all.rings[0]))).toBeCloseTo(1200, 9);
    expect(all.shores).toEqual([]);
    expect(
      isolines(
        GRID,
        valuesOf(() => 0),
        0.5,
      ),
    ).toEqual({ rings: [], shores: [] });
  });
});

/** Sensor 1 and controller 2 with nothing between them; IEEE 802.15.4 on channel 26. */
const plain = (change?: (scenario: ScenarioInput) => void): Scenario =>
  flooded((input) => {
    input.radio = { phy: "ieee802154", txPowerDbm: -20 };
    input.floor = {
      widthM: 80,
      depthM: 60,
      nodes: [
        { id: 1, xM: 30, yM: 30 },
        { id: 2, xM: 42, yM: 30 },
      ],
      links: { type: "budget", pathLoss: { type: "log-distance", exponent: 3.5 } },
    };
    input.loops[0].nodes = { sensor: 1, controller: 2, actuator: 1 };
    change?.(input);
  });
const contours = (scenario: Scenario, slot = "main/measurement") => {
  const found = floodContours(scenario, roundTiming(scenario), slot, { seed: 1 });
  if (!found) throw new Error("no contours");
  return found;
};
const stepAt = ({ grid, step }: ReturnType<typeof contours>, x: number, y: number): number =>
  step[Math.round((y / grid.depthM) * (grid.rows - 1)) * grid.columns + Math.round((x / grid.widthM) * (grid.columns - 1))];
const holds = ({ rings }: Isoline, x: number, y: number): boolean => {
  let inside = false;
  for (const ring of rings)
    for (let i = 0, j = ring.length - 2; i < ring.length; j = i, i += 2) {
      const [xi, yi, xj, yj] = [ring[i], ring[i + 1], ring[j], ring[j + 1]];
      if (yi > y !== yj > y && x < ((xj - xi) * (y - yi)) / (yj - yi) + xi) inside = !inside;
    }
  return inside;
};

describe("the contours of a flood", () => {
  it("lie, for step 1 of a lone sender, at the distance where half of the packets arrive", () => {
    const found = contours(plain());
    const shore = found.steps[0];
    expect(shore.step).toBe(1);
    const radii = Array.from({ length: shore.shores[0].length / 2 }, (_, i) => {
      const [dx, dy] = [shore.shores[0][2 * i] - 30, shore.shores[0][2 * i + 1] - 30];
      return Math.sqrt(dx * dx + dy * dy);
    });
    const [least, most] = [Math.min(...radii), Math.max(...radii)];
    // A node at that distance would receive half.
    const payload = roundTiming(plain()).slots.find(({ id }) => id === "main/measurement")?.payloadBytes ?? 0;
    const prrAt = (metres: number) =>
      meanLinks(
        plain((input) => void Object.assign(input.floor?.nodes?.[1] ?? {}, { xM: 30 + metres })),
        0,
        payload,
      )[0].prr;
    expect(most - least).toBeLessThan(1.5);
    expect(prrAt(least - 1)).toBeGreaterThan(0.5);
    expect(prrAt(most + 1)).toBeLessThan(0.5);
  });

  it("go outwards with the steps, and every point belongs to the water that its step says", () => {
    const found = contours(hall(), "balancer/measurement");
    expect(found.steps.length).toBeGreaterThan(2);
    expect(found.steps.map(({ step }) => step)).toEqual([...found.steps.map(({ step }) => step)].sort((a, b) => a - b));
    const { grid, step, steps } = found;
    let checked = 0;
    for (let row = 1; row < grid.rows - 1; row++)
      for (let column = 1; column < grid.columns - 1; column++) {
        const at = step[row * grid.columns + column];
        for (const water of steps) {
          if (at === 0) expect(holds(water, gridX(grid, column), gridY(grid, row) + 1e-9)).toBe(false);
          if (at !== water.step) continue;
          expect(holds(water, gridX(grid, column), gridY(grid, row) + 1e-9)).toBe(true);
          checked++;
        }
      }
    expect(checked).toBeGreaterThan(500);
  });

  it("fall back behind a wall", () => {
    const wall = contours(
      plain(
        (input) => void Object.assign(input.floor ?? {}, { obstacles: [{ type: "wall", fromXM: 25, fromYM: 0, toXM: 25, toYM: 60, lossDb: 12 }] }),
      ),
    );
    const free = contours(plain());
    expect(stepAt(free, 18, 30)).toBe(1);
    expect(stepAt(wall, 18, 30)).not.toBe(1);
    expect(stepAt(wall, 42, 30)).toBe(1);
  });

  it("follow a node that has moved", () => {
    const moved = plain((input) => void Object.assign(input.floor?.nodes?.[0] ?? {}, { wayPoints: [{ atS: 1, xM: 70, yM: 50 }] }));
    const timing = roundTiming(moved);
    const before = floodContours(moved, timing, "main/measurement", { seed: 1 });
    const after = floodContours(moved, timing, "main/measurement", { seed: 1, atS: 2 });
    if (!before || !after) throw new Error("no contours");
    expect(stepAt(before, 30, 30)).toBe(1);
    expect(stepAt(after, 70, 50)).toBe(1);
    expect(stepAt(after, 20, 30)).not.toBe(1);
  });

  it("show foul ground around an interferer on a channel in use, and none for one beside it", () => {
    const disturbed = (centreMHz: number) =>
      contours(
        plain(
          (input) =>
            void Object.assign(input.floor ?? {}, { interferers: [{ name: "Dryer", xM: 60, yM: 30, powerDbm: -20, centreMHz, bandwidthMHz: 10 }] }),
        ),
      ).fouled;
    const foul = disturbed(2480);
    if (!foul) throw new Error("no foul ground");
    expect(holds(foul, 60, 30)).toBe(true);
    expect(holds(foul, 31, 30)).toBe(false);
    expect(disturbed(2440)).toBeNull();
    expect(contours(plain()).fouled).toBeNull();
  });

  it("are the same for the same seed and cannot be had from measured ratios or for a slot that is not there", () => {
    expect(contours(hall(), "balancer/measurement")).toEqual(contours(hall(), "balancer/measurement"));
    const measured = line(3, 1);
    expect(floodContours(measured, roundTiming(measured), "main/measurement", { seed: 1 })).toBeNull();
    expect(floodContours(hall(), roundTiming(hall()), "nothing", { seed: 1 })).toBeNull();
  });

  it("count the floods of a slot that does not come in every round", () => {
    const seldom = plain((input) => void Object.assign(input.loops[0], { timing: { everyRounds: 3, firstRound: 2 } }));
    expect(stepAt(contours(seldom), 42, 30)).toBe(1);
  });
});
