/** Right-hand sides, linear models and impulses of the plants against Lagrange's equations (scripts/fixtures/make_plants.py). */
import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { createPlant } from "#shared/plants/registry.ts";
import { plantSchema } from "#shared/plants/schema.ts";

interface Case {
  plant: unknown;
  x: number[];
  u: number[];
  d: number[];
  dx: number[];
  impulse: { channel: number; size: number; jump: number[] }[];
}
const cases = JSON.parse(readFileSync(new URL("../fixtures/plant-derivatives.json", import.meta.url), "utf8")) as Case[];

const derivative = (plant: ReturnType<typeof createPlant>, x: number[], u: number[], d: number[]) => {
  const dx = new Float64Array(x.length);
  plant.derivative(dx, Float64Array.from(x), Float64Array.from(u), Float64Array.from(d));
  return dx;
};

describe("pendulum on cart", () => {
  it("accelerates as Lagrange's equations say, upright and hanging, at 40 random states", () => {
    expect(cases).toHaveLength(40);
    for (const row of cases) {
      const found = derivative(createPlant(plantSchema.parse(row.plant)), row.x, row.u, row.d);
      const scale = Math.max(...row.dx.map(Math.abs));
      row.dx.forEach((value, i) => {
        expect(Math.abs(found[i] - value) / scale).toBeLessThan(1e-9);
      });
    }
  });

  it("jumps under an impulse as the mass matrix at its present angle says", () => {
    for (const row of cases) {
      const plant = createPlant(plantSchema.parse(row.plant));
      for (const { channel, size, jump } of row.impulse) {
        const x = Float64Array.from(row.x);
        plant.impulse(x, channel, size);
        expect([x[0], x[1]]).toEqual([row.x[0], row.x[1]]);
        const scale = Math.max(...jump.map(Math.abs));
        expect(Math.abs(x[2] - row.x[2] - jump[0]) / scale).toBeLessThan(1e-9);
        expect(Math.abs(x[3] - row.x[3] - jump[1]) / scale).toBeLessThan(1e-9);
      }
    }
  });

  it.each(["upright", "hanging"] as const)("has the linear model of its own equations at rest, %s, without Coulomb friction", (rest) => {
    const row = cases.find((c) => (c.plant as { rest: string }).rest === rest) as Case;
    const plant = createPlant(plantSchema.parse({ ...(row.plant as object), coulombFrictionN: 0 }));
    const { a, b } = createPlant(plantSchema.parse(row.plant)).linear();
    const h = 1e-5;
    const unit = (i: number, sign: number) => [0, 1, 2, 3].map((j) => (i === j ? sign * h : 0));
    for (let j = 0; j < 5; j++) {
      const up = j < 4 ? derivative(plant, unit(j, 1), [0], [0, 0]) : derivative(plant, [0, 0, 0, 0], [h], [0, 0]);
      const down = j < 4 ? derivative(plant, unit(j, -1), [0], [0, 0]) : derivative(plant, [0, 0, 0, 0], [-h], [0, 0]);
      for (let i = 0; i < 4; i++) {
        const slope = (up[i] - down[i]) / (2 * h);
        expect(Math.abs((j < 4 ? a[i * 4 + j] : b[i]) - slope)).toBeLessThan(1e-7);
      }
    }
  });

  // loop-tables.md, row 19: the published pendulum of checks.md 7.1, 1 N s on the cart, upright, in our signs.
  it("takes 1 N s on the cart as the published figures say", () => {
    const plant = createPlant(
      plantSchema.parse({ type: "pendulum-on-cart", cartMassKg: 0.5, rodMassKg: 0.2, rodLengthM: 0.3, rodInertiaKgM2: 0.006, gravityMps2: 9.8 }),
    );
    const x = new Float64Array(4);
    plant.impulse(
      x,
      plant.channels.findIndex(({ name }) => name === "cart"),
      1,
    );
    expect(x[2]).toBeCloseTo(1.8181818, 7);
    expect(x[3]).toBeCloseTo(-4.5454545, 7);
  });
});
