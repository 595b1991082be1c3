/**
 * Fits and tests of reception logs against outside figures: NIST/SEMATECH e-Handbook (LEW.DAT), NIST SP 800-22, checks.md 5,
 * and SciPy 1.17 (scripts/fixtures/make_statistics.py); and the example logs against the processes they were drawn from.
 */
import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { normalTwoSided } from "#shared/math/statistics.ts";
import { fitGilbertElliott, fitLink } from "#shared/reception/fit.ts";
import { previewLog } from "#shared/reception/guess.ts";
import { chiSquareOf, ljungBox, ljungBoxOf, runsTest, testIndependence, transitionTest } from "#shared/reception/independence.ts";
import { logReader } from "#shared/reception/log-reader.ts";
import { autocorrelation, countTrace } from "#shared/reception/trace.ts";
import { type LogContent, TROUBLE_KINDS } from "#shared/reception/types.ts";
import logs from "../fixtures/example-logs.json" with { type: "json" };
import fixture from "../fixtures/statistics.json" with { type: "json" };
import { LEW } from "./lew.ts";

/** Run lengths of a series of 0 (delivered) and 1 (lost). */
function runsOf(bits: readonly number[]): number[] {
  const runs = [0];
  for (const bit of bits) {
    if ((runs.length % 2 === 0) === (bit === 1)) runs[runs.length - 1]++;
    else runs.push(1);
  }
  return runs;
}
const bitsOf = (text: string): number[] => [...text].map(Number);
const relative = (actual: number, wanted: number, tolerance = 1e-9): void =>
  expect(Math.abs(actual - wanted), `${actual} against ${wanted}`).toBeLessThanOrEqual(tolerance * Math.max(Math.abs(wanted), 1e-300));

describe("NIST's beam deflections (LEW.DAT), above or below the median of -162", () => {
  const runs = runsOf(LEW.map((value) => (value > -162 ? 1 : 0)));

  it("have 120 runs and Z = 2.6938 (e-Handbook 1.3.5.13)", () => {
    const test = runsTest(runs);
    expect(test.observed).toBe(120);
    expect(countTrace(runs)).toMatchObject({ packets: 200, lost: 100 });
    expect(test.expected).toBeCloseTo(101, 12);
    expect(test.standardDeviation).toBeCloseTo(7.05327893384, 10);
    expect(test.z).toBeCloseTo(2.69378259079, 10);
    expect(test.p).toBeCloseTo(0.00706462295496, 10);
    expect(test.method).toBe("normal");
  });
  it("have the printed table of successive outcomes", () => {
    const test = transitionTest(runs);
    expect(test.table).toEqual([
      [40, 60],
      [59, 40],
    ]);
    expect(test.chiSquare).toBeCloseTo(7.64163248648, 9);
    expect(test.p).toBeCloseTo(0.00570362746684, 10);
  });
  it("have more runs than chance brings, so the losses would keep apart", () => expect(testIndependence({ runs }).verdict).toBe("apart"));

  it("give Ljung-Box as SciPy does, from the deflections themselves", () => {
    // Autocorrelation with the mean and divisor of the whole series; lag 1 is printed as -0.31 in 1.3.5.12.
    const mean = LEW.reduce((sum, value) => sum + value, 0) / LEW.length;
    const off = LEW.map((value) => value - mean);
    const energy = off.reduce((sum, value) => sum + value * value, 0);
    const rho = Array.from({ length: 10 }, (_, k) => off.slice(k + 1).reduce((sum, value, i) => sum + value * off[i], 0) / energy);
    expect(rho[0]).toBeCloseTo(-0.307304800606, 10);
    expect(rho[9]).toBeCloseTo(0.824513135713, 10);
    relative(ljungBoxOf(rho, 200).q, 815.539442312);
    relative(ljungBoxOf(rho, 200).p, 9.40978051489e-169);
    relative(ljungBoxOf(rho.slice(0, 1), 200).q, 19.1719804784);
    relative(ljungBoxOf(rho.slice(0, 1), 200).p, 1.19453986161e-5);
  });
});

describe("short sequences with printed or hand-counted figures", () => {
  it("twenty coin tosses have 9 runs, 11 heads and 9 tails (e-Handbook 1.3.5.13)", () => {
    const runs = runsOf([..."HHTTHTHHHHTHHTTTTTHH"].map((side) => (side === "H" ? 1 : 0)));
    expect(countTrace(runs)).toMatchObject({ packets: 20, lost: 11 });
    expect(runsTest(runs).observed).toBe(9);
    expect(runsTest(runs).method).toBe("exact");
  });
  it("1001101011 has V = 7 and p = 0.147232 (NIST SP 800-22, 2.3.8)", () => {
    const bits = bitsOf("1001101011");
    const { observed } = runsTest(runsOf(bits));
    const share = bits.filter((bit) => bit === 1).length / bits.length;
    const spread = share * (1 - share);
    expect(observed).toBe(7);
    // erfc(|V - 2 n s| / (2 sqrt(2n) s)) is the two-sided tail at sqrt(2) times that argument.
    expect(normalTwoSided((observed - 2 * bits.length * spread) / (2 * Math.sqrt(bits.length) * spread))).toBeCloseTo(0.147232255364, 9);
  });
  it("checks.md's trace of 48 packets is fitted as computed there", () => {
    const runs = runsOf(bitsOf("000100000110000000011100000000100000011000000000"));
    const fit = fitGilbertElliott(countTrace(runs));
    expect(countTrace(runs)).toMatchObject({ packets: 48, lost: 9, n00: 33, n01: 5, n10: 5, n11: 4 });
    expect(fit?.goodToBad).toBeCloseTo(0.131578947368, 9);
    expect(fit?.badToGood).toBeCloseTo(0.555555555556, 9);
    expect(fit?.logLikelihood).toBeCloseTo(-20.9789891684, 9);
    expect(fit?.logLikelihoodIndependent).toBeCloseTo(-22.9536420147, 9);
    expect(fit?.likelihoodRatio).toBeCloseTo(3.94930569266, 9);
    expect(fit?.pValue).toBeCloseTo(0.0468907109064, 9);
    const test = runsTest(runs);
    expect(test).toMatchObject({ observed: 11, expected: 15.625 });
    expect(test.standardDeviation).toBeCloseTo(2.05905175965, 9);
    expect(test.z).toBeCloseTo(-2.24617957189, 9);
    expect(test.pNormal).toBeCloseTo(0.0246925081639, 9);
    expect(
      chiSquareOf([
        [33, 5],
        [5, 4],
      ]).chiSquare,
    ).toBeCloseTo(4.60058650525, 9);
    expect(transitionTest(runs).p).toBeCloseTo(0.0319610204364, 9);
  });
});

describe("closed forms of the Gilbert-Elliott channel (checks.md 5.1)", () => {
  const CASES = [
    { p: 0.01, r: 0.25, loss: 0.0384615384615, burst: 4, gap: 100, rho1: 0.74, rho5: 0.2219006624 },
    { p: 0.05, r: 0.5, loss: 0.0909090909091, burst: 2, gap: 20, rho1: 0.45, rho5: 0.0184528125 },
    { p: 0.1, r: 0.3, loss: 0.25, burst: 3.33333333333, gap: 10, rho1: 0.6, rho5: 0.07776 },
  ];
  it.each(CASES)("p = $p, r = $r", ({ p, r, loss, burst, gap, rho1, rho5 }) => {
    // A trace with just these shares of moves.
    const n01 = 1e5 * p * 10;
    const fit = fitGilbertElliott({ ...countTrace([1]), n00: 1e6 - n01, n01, n10: n01, n11: n01 / r - n01 });
    expect(fit?.goodToBad).toBeCloseTo(p, 12);
    expect(fit?.badToGood).toBeCloseTo(r, 12);
    expect(fit?.meanBurst).toBeCloseTo(burst, 9);
    expect(fit?.meanGap).toBeCloseTo(gap, 9);
    expect(fit?.memory).toBeCloseTo(rho1, 12);
    expect((fit?.memory ?? 0) ** 5).toBeCloseTo(rho5, 9);
    expect(n01 / r / (1e6 + n01 / r)).toBeCloseTo(loss, 9);
  });
});

describe.each(Object.entries(fixture.traces))("SciPy's figures of the trace %s", (_, wanted) => {
  const { runs } = wanted;

  it("has the same table, autocorrelation and Ljung-Box", () => {
    const { n00, n01, n10, n11 } = countTrace(runs);
    expect([
      [n00, n01],
      [n10, n11],
    ]).toEqual(wanted.table);
    autocorrelation(runs, 12).values.forEach((rho, k) => {
      expect(rho).toBeCloseTo(wanted.autocorrelation[k], 10);
    });
    relative(ljungBox(runs, 10)?.q ?? 0, wanted.ljungBox[0], 1e-8);
    relative(ljungBox(runs, 10)?.p ?? 0, wanted.ljungBox[1], 1e-6);
  });
  it("has the same runs test, exact and normal", () => {
    const test = runsTest(runs);
    expect(test.observed).toBe(wanted.runsTest.observed);
    relative(test.expected, wanted.runsTest.expected);
    relative(test.z, wanted.runsTest.z, 1e-8);
    relative(test.pNormal, wanted.runsTest.normal, 1e-6);
    const [atMost, atLeast] = wanted.runsTest.exact;
    relative(test.pExact, Math.min(1, 2 * Math.min(atMost, atLeast)), 1e-8);
  });
  it("has the same chi-square and the same likelihoods", () => {
    relative(transitionTest(runs).chiSquare, wanted.chiSquare[0], 1e-8);
    relative(transitionTest(runs).p, wanted.chiSquare[1], 1e-6);
    const fit = fitGilbertElliott(countTrace(runs));
    relative(fit?.goodToBad ?? 0, wanted.markov.p);
    relative(fit?.badToGood ?? 0, wanted.markov.r);
    relative(fit?.logLikelihood ?? 0, wanted.markov.logLikelihood);
    relative(fit?.logLikelihoodIndependent ?? 0, wanted.markov.logLikelihoodIid);
    relative(fit?.likelihoodRatio ?? 0, wanted.markov.ratio, 1e-7);
    relative(fit?.pValue ?? 0, wanted.markov.pValue, 1e-5);
  });
});

describe.each(Object.entries(logs))("example log %s", (name, truth) => {
  const text = readFileSync(new URL(`../../examples/logs/${name}`, import.meta.url), "utf8");
  const { mapping } = previewLog(text.slice(0, 65_536)).guess;
  const content = (): LogContent => {
    if (!mapping) throw new Error("no mapping was guessed");
    const reader = logReader(mapping);
    // in pieces that cut rows anywhere
    for (let at = 0; at < text.length; at += 4093) reader.push(text.slice(at, at + 4093));
    const outcome = reader.finish();
    if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues));
    return outcome.value;
  };

  it("gives the packets that its generator lost, link by link", () => {
    const found = content().links.map(({ source, receiver, runs }) => ({ source, receiver, runs }));
    expect(found).toEqual(truth.links.map(({ source, receiver, runs }) => ({ source, receiver, runs })));
  });
  it("has just the troubles that its generator put in", () => {
    const { troubles } = content().report;
    const counts = Object.fromEntries(TROUBLE_KINDS.map((kind) => [kind, troubles[kind].count]));
    expect(counts).toEqual({ ...Object.fromEntries(TROUBLE_KINDS.map((kind) => [kind, 0])), ...truth.troubles });
  });
  it("has the known parameters inside its intervals", () => {
    for (const [k, trace] of content().links.entries()) {
      const fit = fitLink(trace);
      const link = truth.links[k];
      if ("loss" in link) {
        expect(fit.clopperPearson[0]).toBeLessThan(link.loss);
        expect(fit.clopperPearson[1]).toBeGreaterThan(link.loss);
      }
      if ("goodToBad" in link && fit.gilbertElliott) {
        expect(fit.gilbertElliott.goodToBadInterval[0]).toBeLessThan(link.goodToBad);
        expect(fit.gilbertElliott.goodToBadInterval[1]).toBeGreaterThan(link.goodToBad);
        expect(fit.gilbertElliott.badToGoodInterval[0]).toBeLessThan(link.badToGood);
        expect(fit.gilbertElliott.badToGoodInterval[1]).toBeGreaterThan(link.badToGood);
        const stationary = link.goodToBad / (link.goodToBad + link.badToGood);
        expect(fit.allowingForBursts?.wilson[0]).toBeLessThan(stationary);
        expect(fit.allowingForBursts?.wilson[1]).toBeGreaterThan(stationary);
      }
      if (truth.verdict) expect(testIndependence(trace).verdict).toBe(truth.verdict);
      expect(trace.intervalS).toBeCloseTo(0.02, 4);
    }
  });
});
