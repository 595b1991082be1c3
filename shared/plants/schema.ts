/** What a scenario says of its machine, one schema per plant. */
import { z } from "zod";
import { quantity } from "#shared/scenario/quantity.ts";

/** Cart with a rod on a free pivot; angle from upright, or from hanging when it rests hanging (overhead crane). */
export const pendulumSchema = z.strictObject({
  type: z.literal("pendulum-on-cart"),
  rest: z.enum(["upright", "hanging"]).default("upright"),
  cartMassKg: quantity("cart mass", "kg", 0.01, 100_000),
  rodMassKg: quantity("rod mass", "kg", 0.001, 100_000),
  /** Pivot to centre of mass. */
  rodLengthM: quantity("pivot to mass centre", "m", 0.005, 100),
  /** About the centre of mass. */
  rodInertiaKgM2: quantity("inertia about the mass centre", "kg m²", 0, 1e6).default(0),
  cartFrictionNsPerM: quantity("friction at the cart", "N s/m", 0, 1e5).default(0),
  pivotFrictionNmsPerRad: quantity("friction at the pivot", "N m s/rad", 0, 1e5).default(0),
  coulombFrictionN: quantity("Coulomb friction at the cart", "N", 0, 1e5).default(0),
  /** Coulomb friction is smoothed as tanh(speed / this). */
  coulombSpeedMps: quantity("smoothing speed of the friction", "m/s", 0.001, 1).default(0.01),
  gravityMps2: quantity("gravity", "m/s²", 0, 30).default(9.81),
  /** Cart travel to either side, from the operating point; null: endless. The run ends at the track's end. */
  halfTrackM: quantity("half track", "m", 0.01, 1000).nullable().default(null),
});

const MATRIX_ENTRY = quantity("matrix entry", "", -1e9, 1e9);
const matrix = (rows: number, columns: number) => z.array(z.array(MATRIX_ENTRY).min(1).max(columns)).min(1).max(rows);
const names = (most: number) =>
  z
    .array(
      z.strictObject({
        name: z.string().regex(/^[A-Za-z][A-Za-z0-9_]{0,39}$/, "a letter, then letters, digits or _"),
        unit: z.string().max(20).default(""),
      }),
    )
    .min(1)
    .max(most)
    .nullable()
    .default(null);

/** dx/dt = A x + B u, y = C x + D u, all in deviations from the operating point. */
export const stateSpaceSchema = z.strictObject({
  type: z.literal("state-space"),
  a: matrix(12, 12),
  b: matrix(12, 6),
  /** Outputs; null: none beside the states. */
  c: matrix(12, 12).nullable().default(null),
  d: matrix(12, 6).nullable().default(null),
  /** null: x1, x2, ... */
  states: names(12),
  /** null: u1, u2, ... */
  inputs: names(6),
  /** null: y1, y2, ... */
  outputs: names(12),
});

export const plantSchema = z.discriminatedUnion("type", [pendulumSchema, stateSpaceSchema]);
export type PlantSpec = z.infer<typeof plantSchema>;
export type PendulumSpec = z.infer<typeof pendulumSchema>;
export type StateSpaceSpec = z.infer<typeof stateSpaceSchema>;
