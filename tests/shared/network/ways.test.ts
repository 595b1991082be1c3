/** Likeliest chains of links, against trying them all. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { Ways } from "#shared/network/ways.ts";

const N = 5;
const IDS = Array.from({ length: N }, (_, i) => 10 * (i + 1));
const ratios = fc.array(fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: N, maxLength: N }), { minLength: N, maxLength: N });
const linksOf = (prr: number[][]) =>
  IDS.flatMap((from, i) => IDS.flatMap((to, j) => (i === j ? [] : [{ from, to, distanceM: 1, obstacles: 0, budget: null, prr: prr[i][j] }])));

/** Largest product over all chains of at most so many links that do not touch one place. */
function tried(prr: number[][], from: number, to: number, hops: number, without: number): number {
  if (from === to) return 1;
  if (hops === 0) return 0;
  let most = 0;
  for (let next = 0; next < N; next++)
    if (next !== from && next !== without) most = Math.max(most, prr[from][next] * tried(prr, next, to, hops - 1, without));
  return most;
}

describe("ways around a node", () => {
  it("are found exactly when some chain of links within the hop bound is likely enough", () => {
    let yes = 0;
    let no = 0;
    fc.assert(
      fc.property(ratios, fc.integer({ min: 1, max: 4 }), fc.double({ min: 0.2, max: 0.9, noNaN: true }), (prr, hops, likely) => {
        const ways = new Ways(linksOf(prr), IDS, hops);
        for (let without = 1; without < N - 1; without++) {
          const there = tried(prr, 0, N - 1, hops, without) >= likely;
          expect(ways.roundabout(0, N - 1, without, likely)).toBe(there);
          if (there) yes++;
          else no++;
        }
      }),
      { numRuns: 200, seed: 11 },
    );
    expect(Math.min(yes, no)).toBeGreaterThan(50);
  });
});
