import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { PendulumSpec } from "#shared/plants/schema.ts";
import { bodyOf, fromPivot, machinePicture, poseAt, railShift, specAt, trailStepS } from "#src/components/drawings/machine-geometry.ts";
import { madeRun } from "../../helpers/made-run.ts";

const { scenario, result } = madeRun();
const plant = scenario.loops[0].plant as PendulumSpec;

describe("the body of a pendulum", () => {
  it("is a rod twice as long as its mass centre is far when its inertia is that of a uniform rod", () => {
    const { fromM, toM } = bodyOf({ ...plant, rodMassKg: 0.21, rodLengthM: 0.3, rodInertiaKgM2: 0.0063 });
    expect(fromM).toBeCloseTo(0, 9);
    expect(toM).toBeCloseTo(0.6, 9);
  });
  it("is a point at the mass centre without inertia", () => {
    expect(bodyOf({ ...plant, rodInertiaKgM2: 0 })).toMatchObject({ fromM: 0.3, toM: 0.3 });
  });
  it("changes in mid-run with the machine", () => {
    const changes = [{ atS: 3, parameter: "rodLengthM", value: 0.4 }];
    expect(specAt(plant, changes, 2.9).rodLengthM).toBe(0.3);
    expect(specAt(plant, changes, 3).rodLengthM).toBe(0.4);
  });
});

describe("the drawn machine", () => {
  it("is to scale: track and rod share one number of pixels per metre", () => {
    const picture = machinePicture(plant, scenario, result, 272);
    expect(picture.pixelsPerM).toBeCloseTo(240 / 0.8, 9);
    expect(picture.reach).toBeCloseTo(0.6 * picture.pixelsPerM, 9);
    expect(picture.follows).toBe(false);
    expect(railShift(picture, 0.3)).toBe(136);
  });
  it("has rock only where the track ends", () => {
    expect(machinePicture(plant, scenario, result, 272).ends).toBe(true);
    expect(machinePicture({ ...plant, halfTrackM: null }, scenario, result, 272).ends).toBe(false);
  });
  it("follows the cart along a track that is far longer than the rod, and always keeps it in sight", () => {
    const picture = machinePicture({ ...plant, halfTrackM: 20 }, scenario, result, 272);
    expect(picture.follows).toBe(true);
    fc.assert(
      fc.property(fc.double({ min: -20, max: 20, noNaN: true }), (cartM) => {
        const x = railShift(picture, cartM) + cartM * picture.pixelsPerM;
        return x >= 15 && x <= 272 - 15;
      }),
    );
  });
  it("has room for a rod that has fallen, below its cart and beside the track", () => {
    for (const angle of [2.2, 3.6, 9]) {
      const fallen = madeRun({ angle }).result;
      const picture = machinePicture(plant, scenario, fallen, 272);
      for (let at = 0; at < 10; at += 0.05) {
        const pose = poseAt(fallen, false, at);
        if (!pose) throw new Error("nothing was recorded");
        const [x, y] = fromPivot(136 + pose.x * picture.pixelsPerM, picture.pivotY, pose.theta, picture.reach);
        expect(x).toBeGreaterThanOrEqual(0);
        expect(x).toBeLessThanOrEqual(272);
        expect(y).toBeLessThanOrEqual(picture.height);
      }
    }
  });
  it("leaves no trail longer than a swing, for a short rod and a long rope alike", () => {
    expect(trailStepS(plant)).toBeCloseTo(0.05, 9);
    expect(trailStepS({ ...plant, rodLengthM: 2.5 })).toBeCloseTo(0.2, 9);
    expect(trailStepS({ ...plant, gravityMps2: 0 })).toBeLessThan(1);
  });
});

describe("the pose at an instant", () => {
  it("has the mass centre at x + l sin(theta), theta counted from upright", () => {
    const pose = poseAt(result, false, 4.2);
    const [position, angle] = [result.series.values[0]?.[1680] ?? Number.NaN, result.series.values[1]?.[1680] ?? Number.NaN];
    expect(pose?.x).toBeCloseTo(position, 6);
    expect(pose?.theta).toBeCloseTo(angle, 6);
    expect(fromPivot(100, 200, pose?.theta ?? 0, 50)[0]).toBeCloseTo(100 + 50 * Math.sin(angle), 6);
    expect(poseAt(result, true, 4.2)?.theta).toBeCloseTo(angle + Math.PI, 6);
  });
  it("stays where the run ended, and is nowhere before it began", () => {
    const ended = madeRun({ endedAtS: 4.3, ended: "diverged" }).result;
    expect(poseAt(ended, false, 9)).toEqual(poseAt(ended, false, 4.3));
    expect(poseAt(ended, false, -0.01)).toBeNull();
  });
});
