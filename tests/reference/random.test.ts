/** The random numbers: moments and Kolmogorov-Smirnov distance of seeded samples, so the outcome is always the same. */
import { describe, expect, it } from "vitest";
import { normalStream, uniformStream } from "#shared/math/random.ts";

const N = 200_000;
/** A right generator passes a bound of 3.9 standard errors but once in ten thousand. */
const SE = 3.9;

/** Normal distribution function by its series (Marsaglia, J. Stat. Software 11(4) 2004); accurate to 1e-15 for |x| < 6. */
function phi(x: number): number {
  let [term, sum] = [x, x];
  for (let k = 3; Math.abs(term) > 1e-17; k += 2) {
    term *= (x * x) / k;
    sum += term;
  }
  return 0.5 + (sum * Math.exp((-x * x) / 2)) / Math.sqrt(2 * Math.PI);
}

/** Largest distance between the sample's distribution and `law`, times the square root of its size. */
function kolmogorovSmirnov(sample: Float64Array, law: (x: number) => number): number {
  const sorted = sample.slice().sort();
  let worst = 0;
  sorted.forEach((x, i) => {
    const p = law(x);
    worst = Math.max(worst, p - i / sorted.length, (i + 1) / sorted.length - p);
  });
  return worst * Math.sqrt(sorted.length);
}
/** Critical value at 0.1 % (Kolmogorov 1933, asymptotic). */
const KS_LIMIT = 1.9495;

const moment = (sample: Float64Array, power: number) => sample.reduce((sum, x) => sum + x ** power, 0) / sample.length;
const product = (a: Float64Array, b: Float64Array) => a.reduce((sum, x, i) => sum + x * b[i], 0) / a.length;

describe.each([1, 2024, 4_294_967_295])("seed %d", (seed) => {
  const next = normalStream(uniformStream(seed, "sensor"));
  const normal = Float64Array.from({ length: N }, next);
  const draw = uniformStream(seed, "measurement");
  const uniform = Float64Array.from({ length: N }, draw);

  it("draws normal values with the moments of the normal law", () => {
    expect(Math.abs(moment(normal, 1))).toBeLessThan(SE * Math.sqrt(1 / N));
    expect(Math.abs(moment(normal, 2) - 1)).toBeLessThan(SE * Math.sqrt(2 / N));
    expect(Math.abs(moment(normal, 3))).toBeLessThan(SE * Math.sqrt(15 / N));
    expect(Math.abs(moment(normal, 4) - 3)).toBeLessThan(SE * Math.sqrt(96 / N));
  });

  it("draws normal values within the Kolmogorov-Smirnov distance of the normal law, and neighbours that are unrelated", () => {
    expect(kolmogorovSmirnov(normal, phi)).toBeLessThan(KS_LIMIT);
    const [even, odd] = [0, 1].map((rest) => normal.filter((_, i) => i % 2 === rest));
    // both halves of each Box-Muller pair, and the pairs among each other
    expect(Math.abs(product(even, odd))).toBeLessThan(SE / Math.sqrt(N / 2));
    expect(Math.abs(product(even.slice(1), odd.slice(0, -1)))).toBeLessThan(SE / Math.sqrt(N / 2));
    expect(kolmogorovSmirnov(even, phi)).toBeLessThan(KS_LIMIT);
    expect(kolmogorovSmirnov(odd, phi)).toBeLessThan(KS_LIMIT);
  });

  it("draws uniform values in [0, 1)", () => {
    expect(kolmogorovSmirnov(uniform, (x) => x)).toBeLessThan(KS_LIMIT);
    expect(uniform.every((x) => x >= 0 && x < 1)).toBe(true);
  });

  it("keeps streams of different names and neighbouring seeds unrelated", () => {
    const centred = (name: string, s: number) => {
      const stream = uniformStream(s, name);
      return Float64Array.from({ length: N }, () => stream() - 0.5);
    };
    const first = centred("measurement", seed);
    for (const other of [centred("command", seed), centred("measurement", seed === 1 ? 2 : seed - 1)]) {
      expect(Math.abs(product(first, other))).toBeLessThan((SE / 12) * Math.sqrt(1 / N));
    }
  });
});

// loop-tables.md, row 21: log(0).
it("stays finite when the generator returns 0, or the largest value below 1", () => {
  for (const value of [0, 1 - 2 ** -53]) {
    const next = normalStream(() => value);
    for (let i = 0; i < 4; i++) expect(Number.isFinite(next())).toBe(true);
  }
});
