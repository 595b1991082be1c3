/**
 * Distribution functions, intervals for a proportion and the number of packets that a claim needs. The special functions
 * are plain arithmetic (@stdlib); everything is checked against SciPy in tests/reference/statistics.test.ts.
 */
import betainc from "@stdlib/math-base-special-betainc";
import erfc from "@stdlib/math-base-special-erfc";
import expm1 from "@stdlib/math-base-special-expm1";
import gammainc from "@stdlib/math-base-special-gammainc";
import log1p from "@stdlib/math-base-special-log1p";
import betaQuantileOf from "@stdlib/stats-base-dists-beta-quantile";
import normalQuantileOf from "@stdlib/stats-base-dists-normal-quantile";
import { ln } from "./elementary.ts";

export type Interval = readonly [lo: number, hi: number];

const SQRT2 = Math.sqrt(2);

/** z with P(Z <= z) = p for a standard normal Z. */
export const normalQuantile = (p: number): number => normalQuantileOf(p, 0, 1);
/** P(|Z| >= |z|). */
export const normalTwoSided = (z: number): number => erfc(Math.abs(z) / SQRT2);
/** P(X >= x) of a chi-square distribution. Stays accurate far out in the tail. */
export const chiSquareTail = (x: number, freedom: number): number => (x <= 0 ? 1 : gammainc(x / 2, freedom / 2, true, true));
export const betaQuantile = (p: number, a: number, b: number): number => betaQuantileOf(p, a, b);
/** P(X <= k) of n trials that succeed with probability p. */
export const binomialAtMost = (k: number, n: number, p: number): number =>
  k < 0 ? 0 : k >= n || p <= 0 ? 1 : p >= 1 ? 0 : betainc(p, k + 1, n - k, true, true);

/** Equal-tailed exact interval for a proportion (Clopper and Pearson, 1934), from beta quantiles. */
export function clopperPearson(successes: number, trials: number, confidence = 0.95): Interval {
  if (trials <= 0) return [0, 1];
  const tail = (1 - confidence) / 2;
  const lo = successes <= 0 ? 0 : successes >= trials ? root(tail, trials) : betaQuantile(tail, successes, trials - successes + 1);
  const hi = successes >= trials ? 1 : successes <= 0 ? oneMinusRoot(tail, trials) : betaQuantile(1 - tail, successes + 1, trials - successes);
  return [lo, hi];
}

/** tail^(1/n) and 1 - tail^(1/n): the limits where all or none succeeded. */
const root = (tail: number, n: number): number => 1 - oneMinusRoot(tail, n);
const oneMinusRoot = (tail: number, n: number): number => -expm1(ln(tail) / n);

/** Score interval for a proportion (Wilson, 1927). `trials` may be an effective number that is not whole. */
export function wilson(successes: number, trials: number, confidence = 0.95): Interval {
  if (trials <= 0) return [0, 1];
  return wilsonOf(successes / trials, trials, normalQuantile(1 - (1 - confidence) / 2));
}

/** One-sided score limits at the given confidence: the proportion is at least / at most this. */
export const wilsonLower = (proportion: number, trials: number, confidence: number): number =>
  wilsonOf(proportion, trials, normalQuantile(confidence))[0];
export const wilsonUpper = (proportion: number, trials: number, confidence: number): number =>
  wilsonOf(proportion, trials, normalQuantile(confidence))[1];

function wilsonOf(p: number, n: number, z: number): Interval {
  const z2 = z * z;
  const centre = p + z2 / (2 * n);
  const half = z * Math.sqrt((p * (1 - p)) / n + z2 / (4 * n * n));
  const scale = 1 + z2 / n;
  // At 0 and 1 one limit is exact; rounding would leave it a hair inside or outside.
  return [p <= 0 ? 0 : Math.max(0, (centre - half) / scale), p >= 1 ? 1 : Math.min(1, (centre + half) / scale)];
}

/**
 * Packets needed to show that at least `reliability` of them arrive, at this confidence, when `allowedLosses` of them may be
 * lost: the smallest n with P(at most allowedLosses of n lost | reliability) <= 1 - confidence. Without a loss allowed this
 * is ceil(ln(1 - confidence) / ln(reliability)) (success run).
 */
export function packetsForClaim(reliability: number, confidence: number, allowedLosses = 0): number {
  const misses = 1 - confidence;
  const exact = log1p(-confidence) / ln(reliability);
  // A quotient that is whole but for rounding must not become one more packet.
  const run = Math.ceil(exact - 1e-9 * exact);
  if (allowedLosses <= 0) return Math.max(1, run);
  const lossRatio = 1 - reliability;
  let enough = Math.max(run, allowedLosses + 1);
  let tooFew = allowedLosses;
  while (binomialAtMost(allowedLosses, enough, lossRatio) > misses) {
    tooFew = enough;
    enough *= 2;
  }
  while (enough - tooFew > 1) {
    const middle = Math.floor((tooFew + enough) / 2);
    if (binomialAtMost(allowedLosses, middle, lossRatio) > misses) tooFew = middle;
    else enough = middle;
  }
  return enough;
}

/** The two-sided question that the runs test answers, from the exact distribution. */
export interface RunsProbability {
  /** P(at most this many runs): small when losses come in bursts. */
  atMost: number;
  /** P(at least this many runs): small when losses keep apart. */
  atLeast: number;
}

/** Beside the largest term. Rounding keeps the smallest numbers of all from ever shrinking to 0. */
const NOTHING = 1e-300;

/**
 * Exact distribution of the number of runs in a random order of `lost` and `delivered` (Wald and Wolfowitz, 1940):
 * P(2k) ~ 2 c_k and P(2k + 1) ~ c_k (n - 2k)/k with c_k = C(lost-1, k-1) C(delivered-1, k-1). c is carried from its largest
 * value outwards by c_(k+1) = c_k (lost - k)(delivered - k)/k^2 and the sum is made 1, so that nothing overflows.
 */
export function runsProbability(runs: number, lost: number, delivered: number): RunsProbability {
  const n = lost + delivered;
  const last = Math.min(lost, delivered);
  if (last < 1) return { atMost: 1, atLeast: 1 };
  const peak = Math.max(1, Math.min(last, Math.round((lost * delivered) / n)));
  let total = 0;
  let below = 0;
  let above = 0;
  const add = (k: number, c: number): void => {
    const even = 2 * c;
    const odd = (c * (n - 2 * k)) / k;
    total += even + odd;
    if (2 * k <= runs) below += even;
    if (2 * k >= runs) above += even;
    if (2 * k + 1 <= runs) below += odd;
    if (2 * k + 1 >= runs) above += odd;
  };
  for (let k = peak, c = 1; k <= last && c > NOTHING; c *= ((lost - k) / k) * ((delivered - k) / k), k++) add(k, c);
  for (let k = peak - 1, c = 1; k >= 1; k--) {
    c *= (k / (lost - k)) * (k / (delivered - k));
    if (c <= NOTHING) break;
    add(k, c);
  }
  return { atMost: Math.min(1, below / total), atLeast: Math.min(1, above / total) };
}
