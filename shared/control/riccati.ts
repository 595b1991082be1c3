import { add, maxAbs, multiply, solve, transpose } from "#shared/math/matrix.ts";

const MAX_DOUBLINGS = 60;

/**
 * Stabilising solution X of X = A'XA - A'XB (R + B'XB)^-1 B'XA + Q by structure-preserving doubling (Chu, Fan, Lin and
 * Wang, Int. J. Control 77(8), 2004). a: n x n, b: n x m, q: n x n symmetric positive semidefinite, r: m x m positive
 * definite. Null when the doubling does not converge: (A, B) not stabilisable, or not detectable through Q.
 */
export function dare(a: Float64Array, b: Float64Array, q: Float64Array, r: Float64Array, n: number, m: number): Float64Array | null {
  const bt = transpose(b, n, m);
  const rb = solve(r, bt, m, n);
  if (!rb) return null;
  let ak = a;
  let gk = multiply(b, rb, n, m, n);
  let hk = q;
  for (let i = 0; i < MAX_DOUBLINGS; i++) {
    const w = multiply(gk, hk, n, n, n);
    for (let d = 0; d < n; d++) w[d * n + d] += 1;
    const wa = solve(w, ak, n, n);
    const wg = solve(w, gk, n, n);
    if (!wa || !wg) return null;
    const at = transpose(ak, n, n);
    const step = multiply(multiply(at, hk, n, n, n), wa, n, n, n);
    const next = symmetric(add(hk, step), n);
    const change = maxAbs(step);
    const size = maxAbs(next);
    if (!Number.isFinite(size)) return null;
    gk = symmetric(add(gk, multiply(multiply(ak, wg, n, n, n), at, n, n, n)), n);
    ak = multiply(ak, wa, n, n, n);
    hk = next;
    if (change <= 1e-15 * size) return residual(hk, a, b, q, r, n, m) <= 1e-8 * Math.max(size, maxAbs(q)) ? hk : null;
  }
  return null;
}

function symmetric(a: Float64Array, n: number): Float64Array {
  return a.map((value, index) => (value + a[(index % n) * n + Math.floor(index / n)]) / 2);
}

/** Gain K = (R + B'XB)^-1 B'XA, m x n, of the feedback u = -K x. */
export function dareGain(x: Float64Array, a: Float64Array, b: Float64Array, r: Float64Array, n: number, m: number): Float64Array | null {
  const btx = multiply(transpose(b, n, m), x, m, n, n);
  return solve(add(multiply(btx, b, m, n, m), r), multiply(btx, a, m, n, n), m, n);
}

function residual(x: Float64Array, a: Float64Array, b: Float64Array, q: Float64Array, r: Float64Array, n: number, m: number): number {
  const k = dareGain(x, a, b, r, n, m);
  if (!k) return Number.POSITIVE_INFINITY;
  const at = transpose(a, n, n);
  const closed = add(a, multiply(b, k, n, m, n), -1);
  return maxAbs(add(add(multiply(multiply(at, x, n, n, n), closed, n, n, n), q), x, -1));
}

/** Discrete LQR gain K (m x n) for the sum of x'Qx + u'Ru, no cross term; null when there is no solution. */
export function lqr(a: Float64Array, b: Float64Array, q: Float64Array, r: Float64Array, n: number, m: number): Float64Array | null {
  const x = dare(a, b, q, r, n, m);
  return x && dareGain(x, a, b, r, n, m);
}

/**
 * Filter gain L = P C'(C P C' + R)^-1, n x p, from a prior covariance P; null when C P C' + R is singular.
 * p: n x n, c: p x n, r: p x p.
 */
export function filterGain(prior: Float64Array, c: Float64Array, r: Float64Array, n: number, p: number): Float64Array | null {
  const cp = multiply(c, prior, p, n, n);
  const s = add(multiply(cp, transpose(c, p, n), p, n, p), r);
  const lt = solve(s, cp, p, n);
  return lt && transpose(lt, p, n);
}

/** Prior covariance of the stationary Kalman filter, n x n: the dual Riccati equation. Null when there is none. */
export function stationaryCovariance(
  phi: Float64Array,
  c: Float64Array,
  q: Float64Array,
  r: Float64Array,
  n: number,
  p: number,
): Float64Array | null {
  return dare(transpose(phi, n, n), transpose(c, p, n), q, r, n, p);
}
