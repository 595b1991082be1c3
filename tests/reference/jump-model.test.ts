/**
 * The loop logic, probed as a linear map (model 5), against second-moment radii computed outside the product (loop-tables.md).
 * One stage in the wrong order, one acknowledgement too early, and none of these figures comes out.
 */
import { describe, expect, it } from "vitest";
import type { ScenarioInput } from "#shared/scenario/schema.ts";
import { independent, type Joint, jumpModel, secondMomentRadius } from "../helpers/jump-model.ts";
import { type Acknowledgement, ALL_STATES, type OnLoss, PLANT_F } from "./plant-f.ts";

const HOLD: OnLoss = { policy: "hold" };

function plantF(periodS: number, onLoss: OnLoss = HOLD, acknowledgement: Acknowledgement = "none", d: 0 | 1 = 0): ScenarioInput {
  return {
    format: "holdfast-scenario",
    version: 1,
    name: "Plant F",
    run: { durationS: 1 },
    loops: [
      {
        name: "F",
        plant: PLANT_F,
        timing: { commandTravels: d === 0 ? "same-round" : "next-round" },
        sensor: { signals: ALL_STATES },
        controller: { law: { type: "gain", gain: [[-5, -45, -7, -9]] }, acknowledgement },
        // tight, so that a limit that the linear form forgot to leave out would show
        actuator: { inputs: [{ lo: -0.1, hi: 0.1, ratePerS: 0.1, encoding: { bits: 4, lo: -0.1, hi: 0.1 } }], onLoss },
      },
    ],
    radio: { phy: "le-2m" },
    round: { periodS },
    losses: { process: { type: "none" } },
  };
}
const radius = (model: ReturnType<typeof jumpModel>, p: number) => secondMomentRadius(model, independent(p, p));

describe("second moments of plant F at 20 ms", () => {
  it.each([
    [0, HOLD, 0.937499723],
    [0.1, HOLD, 0.936837908],
    [0.1, { policy: "zero" } as OnLoss, 0.947314536],
  ] as const)("with a loss of %d and %o shrink by the published factor", (p, onLoss, wanted) => {
    expect(Math.abs(radius(jumpModel(plantF(0.02, onLoss)), p) - wanted)).toBeLessThan(2e-9);
  });

  // Likely mistake 4: how much loss each acknowledgement bears.
  it.each([
    ["none", 0.645741],
    ["reported", 0.655864],
    ["at-once", 0.701123],
  ] as const)("stop shrinking where the table says, acknowledged %s", (acknowledgement, critical) => {
    const model = jumpModel(plantF(0.02, HOLD, acknowledgement));
    expect(radius(model, critical - 2e-6)).toBeLessThan(1);
    expect(radius(model, critical + 2e-6)).toBeGreaterThan(1);
  });
});

describe("second moments of plant F at 40 ms, hold", () => {
  // Likely mistake 6.
  it("tell the loss of measurements from that of commands", () => {
    const model = jumpModel(plantF(0.04));
    expect(secondMomentRadius(model, independent(0.05, 0.55))).toBeCloseTo(1.080552, 6);
    expect(secondMomentRadius(model, independent(0.55, 0.05))).toBeCloseTo(0.870983, 6);
  });

  // Likely mistake 5. The table pairs the command that acts at a boundary with the measurement sampled there.
  it.each([
    ["independent of each other", independent(0.4, 0.4), 0.98777],
    ["always lost together", (m: boolean, c: boolean) => (m !== c ? 0 : m ? 0.6 : 0.4), 1.030979],
    ["never lost together", (m: boolean, c: boolean) => (m && c ? 0.2 : m || c ? 0.4 : 0), 0.960223],
  ] as [string, Joint, number][])("with the two messages of an instant %s", (_, joint, wanted) => {
    expect(secondMomentRadius(jumpModel(plantF(0.04), "acting"), joint)).toBeCloseTo(wanted, 6);
  });
});

describe("the linear form of the loop logic", () => {
  const kinds: [string, ScenarioInput][] = [
    ["hold", plantF(0.02)],
    ["plan of 3", plantF(0.02, { policy: "plan", length: 3, end: "hold" })],
    ["reported, two rounds", plantF(0.02, HOLD, "reported", 1)],
    ["at once, plan, two rounds", plantF(0.02, { policy: "plan", length: 2, end: "zero" }, "at-once", 1)],
  ];
  it.each(kinds)("gives zero for zero, and sums for sums: %s", (_, scenario) => {
    const model = jumpModel(scenario);
    const wave = (seed: number) => Float64Array.from({ length: model.size }, (_, i) => Math.sin(seed + 1.7 * i));
    for (const measurement of [true, false]) {
      for (const command of [true, false]) {
        expect(Array.from(model.step(new Float64Array(model.size), measurement, command)).every((value) => value === 0)).toBe(true);
        const [p, q] = [wave(1), wave(2)];
        const sum = model.step(
          p.map((value, i) => 2 * value - 3 * q[i]),
          measurement,
          command,
        );
        const [a, b] = [model.step(p, measurement, command), model.step(q, measurement, command)];
        const scale = Math.max(...sum.map(Math.abs));
        sum.forEach((value, i) => {
          expect(Math.abs(value - (2 * a[i] - 3 * b[i])) / scale).toBeLessThan(1e-12);
        });
      }
    }
  });
});
