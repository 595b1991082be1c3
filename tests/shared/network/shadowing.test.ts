import { describe, expect, it } from "vitest";
import { Shadowing } from "#shared/network/shadowing.ts";

const SIGMA = 6;
const shadowing = new Shadowing({ sigmaDb: SIGMA, correlationM: 10, seed: 5 });
const fresh = () => ({ point: Number.NaN, here: 0, next: 0 });
const loss = (a: number, b: number, coveredM = 0, from = shadowing) => from.lossDb(a, b, coveredM, fresh());

const PAIRS = 20_000;
const pairs = Array.from({ length: PAIRS }, (_, i) => [1 + Math.floor(i / 150), 200 + (i % 150)] as const);
const mean = (values: number[]) => values.reduce((sum, v) => sum + v, 0) / values.length;
const correlation = (a: number[], b: number[]) => mean(a.map((v, i) => v * (b[i] ?? 0))) / SIGMA ** 2;
/** Gudmundson 1991: exp(-d / D) over pairs that have moved by d; standard error of a correlation r: (1 - r^2)/sqrt(n). */
const along = (d: number, start = 0) =>
  correlation(
    pairs.map(([a, b]) => loss(a, b, start)),
    pairs.map(([a, b]) => loss(a, b, start + d)),
  );

describe("shadowing", () => {
  it("is normal in dB with the given deviation", () => {
    const values = pairs.map(([a, b]) => loss(a, b));
    expect(Math.abs(mean(values))).toBeLessThan((4 * SIGMA) / Math.sqrt(PAIRS));
    expect(Math.abs(mean(values.map((v) => v * v)) / SIGMA ** 2 - 1)).toBeLessThan(4 * Math.sqrt(2 / PAIRS));
    expect(Math.abs(mean(values.map((v) => v ** 4)) / SIGMA ** 4 - 3)).toBeLessThan(4 * Math.sqrt(96 / PAIRS));
    const inside = values.filter((v) => Math.abs(v) < SIGMA).length / PAIRS;
    expect(Math.abs(inside - 0.6826894921)).toBeLessThan(4 * Math.sqrt(0.22 / PAIRS));
  });

  it("keeps its deviation between the points from which it is interpolated", () => {
    const values = pairs.map(([a, b]) => loss(a, b, 3.1));
    expect(Math.abs(mean(values.map((v) => v * v)) / SIGMA ** 2 - 1)).toBeLessThan(4 * Math.sqrt(2 / PAIRS));
  });

  it.each([2.5, 10, 20, 40])("is correlated over %d m of way as exp(-d / 10 m)", (d) => {
    const wanted = Math.exp(-d / 10);
    expect(Math.abs(along(d) - wanted)).toBeLessThan((4 * (1 + wanted ** 2)) / Math.sqrt(PAIRS));
    expect(Math.abs(along(d, 7.3) - wanted)).toBeLessThan(0.012 + (4 * (1 + wanted ** 2)) / Math.sqrt(PAIRS));
  });

  it("changes without a jump", () => {
    for (let d = 0; d < 30; d += 0.37) expect(Math.abs(loss(3, 9, d + 0.001) - loss(3, 9, d))).toBeLessThan(0.05);
  });

  it("is the same both ways, of unlike pairs unrelated, and another hall with another seed", () => {
    expect(loss(3, 9)).toBe(loss(9, 3));
    expect(
      Math.abs(
        correlation(
          pairs.map(([a, b]) => loss(a, b)),
          pairs.map(([a, b]) => loss(a, b + 300)),
        ),
      ),
    ).toBeLessThan(4 / Math.sqrt(PAIRS));
    expect(loss(3, 9, 0, new Shadowing({ sigmaDb: SIGMA, correlationM: 10, seed: 6 }))).not.toBe(loss(3, 9));
  });

  it("does not depend on where it was asked for before", () => {
    const last = fresh();
    for (const d of [0, 1, 4, 4.1, 30]) shadowing.lossDb(3, 9, d, last);
    expect(shadowing.lossDb(3, 9, 31.7, last)).toBe(loss(3, 9, 31.7));
  });

  it("is nothing with a deviation of 0", () => {
    expect(loss(3, 9, 5, new Shadowing({ sigmaDb: 0, correlationM: 10, seed: 5 }))).toBe(0);
  });
});
