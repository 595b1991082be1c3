import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { autocorrelation, countTrace, lostStreaks, piece, rollingLoss } from "#shared/reception/trace.ts";

/** Run lengths: the first may be 0, the others not. */
const anyRuns = fc
  .tuple(fc.nat(6), fc.array(fc.integer({ min: 1, max: 6 }), { maxLength: 40 }))
  .map(([first, rest]) => [first, ...rest])
  .filter((runs) => runs.length > 1 || runs[0] > 0);
const bitsOf = (runs: readonly number[]): number[] => runs.flatMap((length, i) => Array<number>(length).fill(i % 2));

describe("what is read off run lengths is what the packets say", () => {
  it("counts packets, pairs and streaks", () => {
    fc.assert(
      fc.property(anyRuns, (runs) => {
        const bits = bitsOf(runs);
        const pairs = (a: number, b: number): number => bits.filter((bit, k) => k > 0 && bits[k - 1] === a && bit === b).length;
        expect(countTrace(runs)).toMatchObject({
          packets: bits.length,
          lost: bits.filter((bit) => bit === 1).length,
          n00: pairs(0, 0),
          n01: pairs(0, 1),
          n10: pairs(1, 0),
          n11: pairs(1, 1),
          runs: 1 + pairs(0, 1) + pairs(1, 0),
        });
        expect(lostStreaks(runs).reduce((sum, { length, count }) => sum + length * count, 0)).toBe(countTrace(runs).lost);
      }),
      { seed: 1 },
    );
  });

  it("correlates as the definition does", () => {
    fc.assert(
      fc.property(anyRuns, fc.integer({ min: 1, max: 12 }), (runs, lags) => {
        const bits = bitsOf(runs);
        const n = bits.length;
        const mean = bits.reduce((sum, bit) => sum + bit, 0) / n;
        const energy = bits.reduce((sum, bit) => sum + (bit - mean) ** 2, 0);
        const { values } = autocorrelation(runs, lags);
        expect(values).toHaveLength(mean === 0 || mean === 1 ? 0 : Math.min(lags, n - 1));
        values.forEach((rho, k) => {
          const wanted = bits.slice(k + 1).reduce((sum, bit, i) => sum + (bit - mean) * (bits[i] - mean), 0) / energy;
          expect(rho).toBeCloseTo(wanted, 10);
        });
      }),
      { seed: 2, numRuns: 300 },
    );
  });

  it("cuts pieces and takes every n-th packet", () => {
    fc.assert(
      fc.property(anyRuns, fc.nat(60), fc.integer({ min: 1, max: 60 }), fc.integer({ min: 1, max: 5 }), (runs, from, count, every) => {
        const wanted = bitsOf(runs)
          .slice(from)
          .filter((_, k) => k % every === 0)
          .slice(0, count);
        const cut = piece(runs, from, count, every);
        expect(bitsOf(cut)).toEqual(wanted);
        expect(cut.slice(1).every((length) => length > 0)).toBe(true);
      }),
      { seed: 3, numRuns: 300 },
    );
  });

  it("moves its window over the whole log, with as many points as asked for at most", () => {
    fc.assert(
      fc.property(anyRuns, fc.integer({ min: 1, max: 30 }), fc.integer({ min: 1, max: 50 }), (runs, points, window) => {
        const bits = bitsOf(runs);
        const rolling = rollingLoss({ runs, packets: bits.length, intervalS: 0.1 }, { points, window });
        expect(rolling.points.length).toBeLessThanOrEqual(points);
        expect(rolling.window).toBe(Math.min(window, bits.length));
        for (const { packet, timeS, loss } of rolling.points) {
          const start = packet - rolling.window / 2;
          const inside = bits.slice(start, start + rolling.window);
          expect(loss).toBeCloseTo(inside.reduce((sum, bit) => sum + bit, 0) / rolling.window, 12);
          expect(timeS).toBeCloseTo(0.1 * packet, 12);
        }
      }),
      { seed: 4 },
    );
  });
});

it("a log of ten million packets costs no more than its bursts", () => {
  const runs = Array.from({ length: 2001 }, (_, i) => (i % 2 === 0 ? 9995 : 5));
  const { values } = autocorrelation(runs, 40);
  // Bursts of 5 in 10 000: of the lost ones 4/5 are followed by a lost one.
  expect(values[0]).toBeCloseTo(0.8, 3);
  expect(values[9]).toBeCloseTo(0, 2);
  expect(rollingLoss({ runs, packets: 1001 * 9995 + 5000, intervalS: null }).points).toHaveLength(400);
});
