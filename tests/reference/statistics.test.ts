/** Distribution functions, intervals and claims against SciPy 1.17 (scripts/fixtures/make_statistics.py) and printed figures. */
import { describe, expect, it } from "vitest";
import {
  betaQuantile,
  binomialAtMost,
  chiSquareTail,
  clopperPearson,
  normalQuantile,
  normalTwoSided,
  packetsForClaim,
  runsProbability,
  wilson,
  wilsonLower,
  wilsonUpper,
} from "#shared/math/statistics.ts";
import fixture from "../fixtures/statistics.json" with { type: "json" };

/** Relative, for figures that span many powers of ten. */
function near(actual: number, wanted: number, tolerance = 1e-9): void {
  expect(Math.abs(actual - wanted), `${actual} against ${wanted}`).toBeLessThanOrEqual(tolerance * Math.max(Math.abs(wanted), 1e-300));
}

describe("distribution functions agree with SciPy", () => {
  it("has normal quantiles and tails", () => {
    for (const [p, z] of fixture.normalQuantile) near(normalQuantile(p), z);
    for (const [z, p] of fixture.normalTwoSided) near(normalTwoSided(z), p);
  });
  it("has chi-square tails, far out, too", () => {
    for (const [x, freedom, p] of fixture.chiSquareTail) near(chiSquareTail(x, freedom), p);
  });
  it("has beta quantiles and binomial sums", () => {
    for (const [p, a, b, x] of fixture.betaQuantile) near(betaQuantile(p, a, b), x);
    for (const [k, n, p, sum] of fixture.binomialAtMost) near(binomialAtMost(k, n, p), sum);
  });
  it("counts runs of a billion losses as quickly as of a thousand", () => {
    // So few runs of so many are impossible by chance, so many are sure; the middle is the mean of a normal distribution.
    const { atMost, atLeast } = runsProbability(2, 1e9, 1e9);
    expect(atMost).toBe(0);
    expect(atLeast).toBeCloseTo(1, 10);
    expect(runsProbability(1e9 + 1, 1e9, 1e9).atMost).toBeCloseTo(0.5, 4);
  });
  it("counts runs exactly (whole-number counting)", () => {
    for (const [runs, lost, delivered, atMost, atLeast] of fixture.runsProbability) {
      const found = runsProbability(runs, lost, delivered);
      near(found.atMost, atMost);
      near(found.atLeast, atLeast);
    }
  });
});

describe("intervals for a proportion", () => {
  it.each(fixture.proportions)("agree with SciPy for $of", ({ of: [k, n, confidence], ...wanted }) => {
    clopperPearson(k, n, confidence).forEach((limit, side) => {
      near(limit, wanted.clopperPearson[side]);
    });
    wilson(k, n, confidence).forEach((limit, side) => {
      expect(Math.abs(limit - wanted.wilson[side])).toBeLessThanOrEqual(1e-9 * Math.max(wanted.wilson[side], 1e-6));
    });
  });

  // checks.md 9: R 3.6.2 binom.test and prop.test, by way of SciPy's own tests
  const CASES = [
    [3, 10, 0.95, 0.107791267406, 0.603221852539, 0.0667395111777, 0.65245285006],
    [0, 10, 0.95, 0, 0.277532799863, 0, 0.308497107819],
    [10, 10, 0.95, 0.722467200137, 1, 0.691502892181, 1],
    [20, 100, 0.95, 0.133366933331, 0.288829165593, 0.126655552102, 0.291842689089],
    [0, 1000, 0.95, 0, 0.00382675848556, 0, 0.00368208389687],
    [1, 1000, 0.95, 0.000176546370626, 0.00564255859796, 2.53174874913e-5, 0.00555892427983],
    [5, 1000, 0.99, 0.00167204411098, 0.0148532091434, 0.0010795066098, 0.0140851481753],
    [4, 20, 0.9, 0.0931180165812, 0.378376685835, 0.0713538843086, 0.401028117332],
  ];
  it.each(CASES)("%i of %i at %d as R gives them", (k, n, confidence, wilsonLo, wilsonHi, exactLo, exactHi) => {
    const score = wilson(k, n, confidence);
    expect(score[0]).toBeCloseTo(wilsonLo, 9);
    expect(score[1]).toBeCloseTo(wilsonHi, 9);
    const exact = clopperPearson(k, n, confidence);
    expect(exact[0]).toBeCloseTo(exactLo, 9);
    expect(exact[1]).toBeCloseTo(exactHi, 9);
  });

  it("give NIST's one-sided limit and exact interval (e-Handbook 7.2.4.1)", () => {
    expect(wilsonLower(0.13, 200, 0.95)).toBeCloseTo(0.09577, 5);
    const [lo, hi] = clopperPearson(4, 20, 0.9);
    expect(Math.abs(lo - 0.071354)).toBeLessThan(2e-6);
    expect(Math.abs(hi - 0.401029)).toBeLessThan(2e-6);
  });
  it("mirror each other when losses become deliveries", () => {
    for (const [k, n] of [
      [0, 7],
      [3, 50],
      [499, 500],
    ]) {
      for (const interval of [clopperPearson, wilson]) {
        const [lo, hi] = interval(k, n);
        const [mirroredLo, mirroredHi] = interval(n - k, n);
        expect(lo).toBeCloseTo(1 - mirroredHi, 12);
        expect(hi).toBeCloseTo(1 - mirroredLo, 12);
      }
    }
    expect(wilsonUpper(0.2, 40, 0.9)).toBeCloseTo(1 - wilsonLower(0.8, 40, 0.9), 12);
  });
  it("bound an unseen event as 1 - 0.05^(1/n), nearly 3/n (rule of three)", () => {
    // A one-sided limit at 95 % is the upper end of the two-sided interval at 90 %.
    for (const [n, exact] of [
      [30, 0.0950338528553],
      [100, 0.029513049607],
      [1000, 0.0029912495451],
    ]) {
      expect(clopperPearson(0, n, 0.9)[1]).toBeCloseTo(exact, 12);
      expect(Math.abs(exact * n - 3)).toBeLessThan(0.15);
    }
  });
  it("say nothing about a log without packets", () => {
    expect(clopperPearson(0, 0)).toEqual([0, 1]);
    expect(wilson(0, 0)).toEqual([0, 1]);
  });
});

describe("packets that a claim needs", () => {
  it("agree with SciPy's binomial sums, with losses allowed, too", () => {
    for (const [reliability, confidence, allowed, packets] of fixture.packets) {
      expect(packetsForClaim(reliability, confidence, allowed), `${reliability} ${confidence} ${allowed}`).toBe(packets);
    }
  });
  it("are ceil(ln(1 - C)/ln R) without a loss (success run, checks.md 9.3)", () => {
    const CASES = [
      [0.95, 0.99, 299],
      [0.95, 0.95, 59],
      [0.95, 0.9, 29],
      [0.9, 0.9, 22],
      [0.9, 0.99, 230],
      [0.95, 0.999, 2995],
      [0.99, 0.99, 459],
    ];
    for (const [confidence, reliability, packets] of CASES) expect(packetsForClaim(reliability, confidence)).toBe(packets);
  });
  it("are enough, and one less is not", () => {
    for (const [reliability, confidence, allowed] of [
      [0.999, 0.95, 0],
      [0.995, 0.9, 4],
      [0.8, 0.99, 25],
    ]) {
      const packets = packetsForClaim(reliability, confidence, allowed);
      expect(binomialAtMost(allowed, packets, 1 - reliability)).toBeLessThanOrEqual(1 - confidence);
      expect(binomialAtMost(allowed, packets - 1, 1 - reliability)).toBeGreaterThan(1 - confidence);
    }
  });
});
