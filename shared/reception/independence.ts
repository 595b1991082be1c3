/**
 * Are the losses independent of each other? Three tests that see different things: the number of runs (bursts, or losses that
 * keep apart), the autocorrelation over ten packets (rhythms), the table of successive outcomes (memory of one packet).
 */
import { chiSquareTail, normalTwoSided, runsProbability } from "#shared/math/statistics.ts";
import { autocorrelation, countTrace, type Runs } from "./trace.ts";
import type { LinkTrace } from "./types.ts";

export interface RunsTest {
  observed: number;
  expected: number;
  standardDeviation: number;
  z: number;
  /** Two-sided, from the normal distribution. */
  pNormal: number;
  /** Two-sided, from the exact distribution: twice the smaller tail. */
  pExact: number;
  /** The one that counts: exact below 20 losses, and where losses are so rare that the normal distribution says too much. */
  p: number;
  method: "exact" | "normal";
}

export interface LjungBoxTest {
  lags: number;
  q: number;
  p: number;
}

export interface TransitionTest {
  /** [[delivered after delivered, lost after delivered], [delivered after lost, lost after lost]] */
  table: [[number, number], [number, number]];
  chiSquare: number;
  p: number;
  /** Below 5 the chi-square distribution is no good approximation. */
  smallestExpected: number;
}

export const INDEPENDENCE_VERDICTS = ["nothing-lost", "all-lost", "too-few", "independent", "bursts", "apart", "rhythm"] as const;
export type IndependenceVerdict = (typeof INDEPENDENCE_VERDICTS)[number];

export interface IndependenceTest {
  packets: number;
  lost: number;
  verdict: IndependenceVerdict;
  /** Chance of a false alarm with which the verdict is given, over all tests together. */
  significance: number;
  runs: RunsTest | null;
  ljungBox: LjungBoxTest | null;
  transitions: TransitionTest | null;
  /**
   * With fewer than ten losses (or deliveries): had they come in bursts of this length or longer, the runs test would have said so.
   * null: no burst would have shown.
   */
  burstThatWouldShow: number | null;
}

export const TOO_FEW_LOSSES = 10;
const EXACT_BELOW = 20;
export const LJUNG_BOX_LAGS = 10;

export function testIndependence(trace: Pick<LinkTrace, "runs">, significance = 0.05): IndependenceTest {
  const { packets, lost } = countTrace(trace.runs);
  const base = { packets, lost, significance, runs: null, ljungBox: null, transitions: null, burstThatWouldShow: null };
  if (lost === 0) return { ...base, verdict: "nothing-lost" };
  if (lost === packets) return { ...base, verdict: "all-lost" };
  const tests = { runs: runsTest(trace.runs), ljungBox: ljungBox(trace.runs), transitions: transitionTest(trace.runs) };
  // Few delivered packets tell as little as few lost ones.
  if (Math.min(lost, packets - lost) < TOO_FEW_LOSSES) {
    return {
      ...base,
      ...tests,
      verdict: "too-few",
      burstThatWouldShow: burstThatWouldShow(Math.min(lost, packets - lost), Math.max(lost, packets - lost), significance),
    };
  }
  return { ...base, ...tests, verdict: verdictOf(tests, significance) };
}

/** Three looks at the same losses: each has to be three times as sure (Bonferroni). A memory of one packet outranks a rhythm. */
function verdictOf(
  { runs, ljungBox: box, transitions }: { runs: RunsTest; ljungBox: LjungBoxTest | null; transitions: TransitionTest },
  significance: number,
): IndependenceVerdict {
  const each = significance / 3;
  const oneStep = runs.p < each || (transitions.smallestExpected >= 5 && transitions.p < each);
  if (oneStep) return runs.observed < runs.expected ? "bursts" : "apart";
  return transitions.smallestExpected >= 5 && box && box.p < each ? "rhythm" : "independent";
}

/** Wald and Wolfowitz, 1940; mean and variance as in NIST/SEMATECH e-Handbook 1.3.5.13. */
export function runsTest(runs: Runs): RunsTest {
  const { packets: n, lost, runs: observed } = countTrace(runs);
  const delivered = n - lost;
  const twice = 2 * lost * delivered;
  const expected = twice / n + 1;
  const standardDeviation = Math.sqrt((twice / n) * ((twice - n) / n / (n - 1)));
  const z = standardDeviation > 0 ? (observed - expected) / standardDeviation : 0;
  const { atMost, atLeast } = runsProbability(observed, lost, delivered);
  const pExact = Math.min(1, 2 * Math.min(atMost, atLeast));
  const pNormal = normalTwoSided(z);
  // Expected number of losses that follow a loss: when it is small, the number of runs is far from normal.
  const rare = Math.min(lost, delivered);
  const method = rare < EXACT_BELOW || (rare * rare) / n < 10 ? "exact" : "normal";
  return { observed, expected, standardDeviation, z, pNormal, pExact, p: method === "exact" ? pExact : pNormal, method };
}

/** Q = n (n + 2) sum of rho_k^2/(n - k), chi-square with as many degrees of freedom as lags (Ljung and Box, 1978). */
export function ljungBox(runs: Runs, lags = LJUNG_BOX_LAGS): LjungBoxTest | null {
  const { packets: n } = countTrace(runs);
  const { values } = autocorrelation(runs, lags);
  if (values.length < lags || n <= 2 * lags) return null;
  return ljungBoxOf(values, n);
}

/** From autocorrelations at lags 1, 2, ... of a series of n values. */
export function ljungBoxOf(values: readonly number[], n: number): LjungBoxTest {
  let sum = 0;
  values.forEach((rho, k) => {
    sum += (rho * rho) / (n - k - 1);
  });
  const q = n * (n + 2) * sum;
  return { lags: values.length, q, p: chiSquareTail(q, values.length) };
}

/** Pearson's chi-square on successive outcomes, one degree of freedom, without correction. */
export function transitionTest(runs: Runs): TransitionTest {
  const { n00, n01, n10, n11 } = countTrace(runs);
  return chiSquareOf([
    [n00, n01],
    [n10, n11],
  ]);
}

export function chiSquareOf(table: [[number, number], [number, number]]): TransitionTest {
  const [[a, b], [c, d]] = table;
  const total = a + b + c + d;
  const rows = [a + b, c + d];
  const columns = [a + c, b + d];
  const smallestExpected = total > 0 ? (Math.min(...rows) * Math.min(...columns)) / total : 0;
  const product = rows[0] * rows[1] * (columns[0] * columns[1]);
  const off = a * d - b * c;
  const chiSquare = product > 0 ? (off * off * total) / product : 0;
  return { table, chiSquare, p: chiSquareTail(chiSquare, 1), smallestExpected };
}

/** The shortest length b such that losses in bursts of b (the last may be shorter) have too few runs to be independent. */
export function burstThatWouldShow(lost: number, delivered: number, significance: number): number | null {
  for (let length = 2; length <= lost; length++) {
    const bursts = Math.ceil(lost / length);
    if (bursts - 1 > delivered) continue;
    // With packets delivered before, between and after there are most runs: the hardest case to see.
    const most = 2 * bursts + 1;
    if (2 * runsProbability(most, lost, delivered).atMost < significance) return length;
  }
  return null;
}
