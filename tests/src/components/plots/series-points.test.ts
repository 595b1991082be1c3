import { describe, expect, it } from "vitest";
import { extremes, indexAt, nearestIndex, thin, valueAt } from "#src/components/plots/series-points.ts";

const t = Float64Array.of(0, 1, 2, 4);
const v = Float64Array.of(0, 10, 20, -20);

describe("reading a series at an instant", () => {
  it("goes straight between two points and holds a stair", () => {
    expect(valueAt(t, v, 1.5)).toBe(15);
    expect(valueAt(t, v, 3)).toBe(0);
    expect(valueAt(t, v, 3, true)).toBe(20);
    expect(valueAt(t, v, 4)).toBe(-20);
  });
  it("holds the last value for one step, since a run may end between two points", () => {
    expect(valueAt(t, v, 4.9)).toBe(-20);
  });
  it("tells nothing where nothing was recorded", () => {
    expect(valueAt(t, v, 5.1)).toBeNaN();
    expect(valueAt(new Float64Array(0), new Float64Array(0), 0)).toBeNaN();
  });
  it("finds the point before and the point nearest", () => {
    expect([-1, 0, 0.9, 3.9, 9].map((at) => indexAt(t, at))).toEqual([0, 0, 0, 2, 3]);
    expect([0.4, 0.6, 2.9, 3.1].map((at) => nearestIndex(t, at))).toEqual([0, 1, 2, 3]);
  });
  it("leaves out what is not finite when it looks for the lowest and highest value", () => {
    expect(extremes([1, Number.NaN, -3, Number.POSITIVE_INFINITY])).toEqual({ min: -3, max: 1 });
    expect(extremes([Number.NaN])).toBeNull();
  });
});

describe("thinning a million points for a picture", () => {
  const count = 1_000_000;
  const times = Float64Array.from({ length: count }, (_, i) => i / 1000);
  const wave = Float64Array.from({ length: count }, (_, i) => Math.sin(i / 5000));
  wave[123_457] = 9;
  wave[765_431] = -9;

  it("keeps every peak, in at most two points a pixel", () => {
    const [x, y] = thin(times, [wave], 0, 1000, 600);
    expect(x.length).toBe(1200);
    const finite = Array.from(y as ArrayLike<number>);
    expect(Math.max(...finite)).toBe(9);
    expect(Math.min(...finite)).toBe(-9);
    expect(x.every((at, i) => i === 0 || at >= (x[i - 1] as number))).toBe(true);
  });
  it("shows the points themselves once the view is narrow, one beyond on both sides", () => {
    const [x] = thin(times, [wave], 123.4, 123.5, 600);
    expect(x[0]).toBeLessThanOrEqual(123.4);
    expect(x[x.length - 1]).toBeGreaterThan(123.5);
    expect(x.length).toBeLessThan(110);
  });
  it("turns values that are not finite into gaps, thinned or not", () => {
    const broken = Float64Array.of(1, Number.NaN, 3);
    expect(thin(Float64Array.of(0, 1, 2), [broken], 0, 2, 100)[1]).toEqual([1, null, 3]);
    const long = Float64Array.from({ length: 1000 }, () => Number.NaN);
    const [, y] = thin(
      Float64Array.from({ length: 1000 }, (_, i) => i),
      [long],
      0,
      999,
      10,
    );
    expect(Array.from(y as ArrayLike<unknown>).every((value) => value === null)).toBe(true);
  });
});
