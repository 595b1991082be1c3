import { describe, expect, it } from "vitest";
import { blockS, clarke, dopplerHz, Fading, type FadingSettings, roundCorrelation } from "#shared/network/fading.ts";

const ids = Array.from({ length: 60 }, (_, i) => i + 1);
const settings = (kDb: number): FadingSettings => ({ kDb, coherence: { type: "time", coherenceS: 0.1 } });
const pairs = ids.flatMap((_, a) => ids.slice(0, a).map((_, b) => [a, b] as const));
const mean = (values: number[]) => values.reduce((sum, v) => sum + v, 0) / values.length;

/** Power gains of all pairs in the rounds asked for. */
function gains(kDb: number, rho: number, rounds: number[], { block = 0, channel = 26, seed = 1 } = {}): number[][] {
  const fading = new Fading(settings(kDb), seed, ids, () => rho);
  const plane = fading.plane(block, channel);
  return rounds.map((round) => pairs.map(([a, b]) => fading.gain(plane, a, b, round)));
}
const flat = (rows: number[][]) => rows.flat();
const every = (step: number, count: number) => Array.from({ length: count }, (_, i) => i * step);

describe("fading", () => {
  // Rice: E g = 1, Var g = (1 + 2K)/(1 + K)^2 with K linear (Simon and Alouini, Digital Communication over Fading Channels, table 2.2).
  it.each([-40, 0, 6, 12])("of K = %d dB has unit mean power and the variance of Rice's law", (kDb) => {
    const k = 10 ** (kDb / 10);
    const g = flat(gains(kDb, 0, every(1, 60)));
    const variance = (1 + 2 * k) / (1 + k) ** 2;
    expect(Math.abs(mean(g) - 1)).toBeLessThan(4 * Math.sqrt(variance / g.length));
    expect(Math.abs(mean(g.map((v) => (v - 1) ** 2)) / variance - 1)).toBeLessThan(4 * Math.sqrt(9 / g.length));
  });

  // Without a direct path power is exponential: P(g < x) = 1 - exp(-x).
  it("without a direct path has exponential power", () => {
    const g = flat(gains(-40, 0, every(1, 60)));
    for (const x of [0.01, 0.1, 1, 3]) {
      const p = 1 - Math.exp(-x);
      expect(Math.abs(g.filter((v) => v < x).length / g.length - p)).toBeLessThan(4 * Math.sqrt((p * (1 - p)) / g.length));
    }
  });

  // Power of a Gauss-Markov process without direct path is correlated by rho^2 per round.
  it.each([0.3, 0.9, -0.35])("with rho = %d is correlated from round to round as a Gauss-Markov process", (rho) => {
    const rows = gains(-40, rho, every(1, 80));
    const lag = (n: number) => mean(rows.slice(n).map((row, i) => mean(row.map((v, j) => (v - 1) * ((rows[i]?.[j] ?? 0) - 1)))));
    const tolerance = 6 * Math.sqrt((1 + rho ** 2) / (1 - rho ** 2) / (80 * pairs.length)) * 2;
    expect(Math.abs(lag(1) - rho ** 2)).toBeLessThan(tolerance);
    expect(Math.abs(lag(2) - rho ** 4)).toBeLessThan(tolerance);
  });

  it("is the same both ways, and its own for every pair, channel, block and seed", () => {
    const fading = new Fading(settings(0), 1, ids, () => 0.5);
    const plane = fading.plane(0, 26);
    expect(fading.gain(plane, 3, 9, 0)).toBe(fading.gain(plane, 9, 3, 0));
    const base = gains(-40, 0.5, [0])[0] ?? [];
    for (const other of [{ channel: 25 }, { block: 1 }, { seed: 2 }]) {
      const row = gains(-40, 0.5, [0], other)[0] ?? [];
      expect(Math.abs(mean(row.map((v, i) => (v - 1) * ((base[i] ?? 0) - 1))))).toBeLessThan(4 / Math.sqrt(pairs.length));
    }
  });

  it("in a round does not depend on the rounds in which it was used before", () => {
    for (const rho of [0, 0.6, 0.97]) {
      const used = gains(3, rho, every(1, 40))[39] ?? [];
      const unused = gains(3, rho, [39])[0] ?? [];
      expect(Math.max(...used.map((v, i) => Math.abs(v - (unused[i] ?? 0))))).toBeLessThan(1e-8);
    }
  });

  it("does not depend on other nodes", () => {
    const few = new Fading(settings(0), 1, [1, 7, 9], () => 0.5);
    const many = new Fading(settings(0), 1, [1, 4, 7, 8, 9], () => 0.5);
    expect(few.gain(few.plane(0, 26), 1, 2, 3)).toBe(many.gain(many.plane(0, 26), 2, 4, 3));
  });
});

describe("correlation in time", () => {
  // Abramowitz and Stegun, table 9.1: J0(1) = 0.7651976866, first zero 2.4048255577.
  it("by speed is Clarke's J0(2 pi f_d t)", () => {
    const second = 1 / (2 * Math.PI);
    expect(clarke(1, second)).toBeCloseTo(0.7651976866, 10);
    expect(clarke(2.4048255577, second)).toBeCloseTo(0, 9);
    const rho = roundCorrelation({ kDb: 0, coherence: { type: "speed", leastMPerS: 0.5 } }, 2440, 0.02);
    expect(rho(2)).toBe(clarke(dopplerHz(2, 2440), 0.02));
    expect(rho(0.1)).toBe(clarke(dopplerHz(0.5, 2440), 0.02));
  });

  it("by coherence time is exponential, at any speed", () => {
    const rho = roundCorrelation(settings(0), 2440, 0.02);
    expect(rho(0)).toBeCloseTo(Math.exp(-0.2), 15);
    expect(rho(30)).toBe(rho(0));
  });

  it("keeps a round's fading for one coherence time", () => {
    expect(blockS(settings(0), 2440)).toBe(0.1);
    expect(blockS({ kDb: 0, coherence: { type: "speed", leastMPerS: 1 } }, 2440)).toBeCloseTo(0.423 / 8.1389, 5);
    expect(blockS({ kDb: 0, coherence: { type: "speed", leastMPerS: 0 } }, 2440)).toBe(Number.POSITIVE_INFINITY);
  });
});
