import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { decodeSeries, encodeSeries } from "#shared/api/series.ts";
import type { RunResult } from "#shared/simulation/result.ts";

function record(points: number, rounds: number, draw: (i: number) => number = (i) => Math.sqrt(i)): Pick<RunResult, "series" | "rounds"> {
  const f64 = (length: number, shift: number) => Float64Array.from({ length }, (_, i) => draw(i + shift));
  return {
    series: {
      t: f64(points, 0),
      columns: [
        { name: "angle", label: "Angle", symbol: "φ", unit: "rad", kind: "state" },
        { name: "force", label: "Force", symbol: "F", unit: "N", kind: "input" },
      ],
      values: [f64(points, 1), f64(points, 2)],
    },
    rounds: {
      count: rounds,
      periodS: 0.02,
      sampleAtS: 0,
      latencyS: 0.02,
      commandDelay: 1,
      measured: [{ name: "angle", unit: "rad", symbol: "φ", label: "Angle" }],
      measurementDelivered: Uint8Array.from({ length: rounds }, (_, i) => i % 2),
      commandDelivered: Uint8Array.from({ length: rounds }, (_, i) => (i % 3 ? 1 : 0)),
      hasMeasurementSlot: true,
      hasCommandSlot: false,
      measurement: f64(rounds, 3),
      noise: f64(rounds, 4),
      estimate: f64(rounds * 4, 5),
      command: f64(rounds, 6),
    },
  };
}

describe("the stored series", () => {
  it("comes back bit for bit", () => {
    fc.assert(
      fc.property(fc.nat({ max: 40 }), fc.nat({ max: 40 }), fc.array(fc.double(), { minLength: 1 }), (points, rounds, values) => {
        const original = record(points, rounds, (i) => values[i % values.length]);
        const decoded = decodeSeries(encodeSeries(original).bytes);
        expect(decoded).toEqual({ ...original, points, keptEvery: 1, detailed: true });
        expect(decoded.series.values.every((column, i) => column.every((value, k) => Object.is(value, original.series.values[i][k])))).toBe(true);
      }),
    );
  });

  it("is read from the middle of a larger buffer too", () => {
    const { bytes } = encodeSeries(record(7, 3));
    const larger = new Uint8Array(bytes.length + 5);
    larger.set(bytes, 5);
    expect(decodeSeries(larger.subarray(5)).series.t).toEqual(record(7, 3).series.t);
  });

  it("keeps every n-th point of a series that is longer than permitted, and says so", () => {
    const { bytes, header } = encodeSeries(record(1001, 10), 400);
    const decoded = decodeSeries(bytes);
    expect(header).toMatchObject({ points: 1001, keptEvery: 3 });
    expect(decoded.series.t.length).toBe(334);
    expect(decoded.series.t[333]).toBe(Math.sqrt(999));
    expect(decoded.series.values[1][1]).toBe(Math.sqrt(5));
  });

  it("keeps only what was delivered when there are very many rounds, and says so", () => {
    const decoded = decodeSeries(encodeSeries(record(10, 200_001)).bytes);
    expect(decoded.detailed).toBe(false);
    expect(decoded.rounds.commandDelivered.length).toBe(200_001);
    expect(decoded.rounds.measurement.length).toBe(0);
  });

  it("is refused when it is something else", () => {
    expect(() => decodeSeries(new Uint8Array(64))).toThrow("not a series record");
    expect(() => decodeSeries(new Uint8Array(2))).toThrow("not a series record");
  });
});
