/** Small dense kernels on row-major Float64Arrays. Sizes are passed, shapes stand in the comments. */

export function fromRows(rows: readonly (readonly number[])[]): Float64Array {
  return Float64Array.from(rows.flat());
}

export function identity(n: number): Float64Array {
  const a = new Float64Array(n * n);
  for (let i = 0; i < n; i++) a[i * n + i] = 1;
  return a;
}

export function diagonal(values: ArrayLike<number>): Float64Array {
  const n = values.length;
  const a = new Float64Array(n * n);
  for (let i = 0; i < n; i++) a[i * n + i] = values[i];
  return a;
}

/** a: n x m, b: m x p; a b: n x p. */
export function multiply(a: Float64Array, b: Float64Array, n: number, m: number, p: number): Float64Array {
  const c = new Float64Array(n * p);
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < m; k++) {
      const factor = a[i * m + k];
      if (factor === 0) continue;
      for (let j = 0; j < p; j++) c[i * p + j] += factor * b[k * p + j];
    }
  }
  return c;
}

/** a: n x m; its transpose: m x n. */
export function transpose(a: Float64Array, n: number, m: number): Float64Array {
  const t = new Float64Array(a.length);
  for (let i = 0; i < n; i++) for (let j = 0; j < m; j++) t[j * n + i] = a[i * m + j];
  return t;
}

export function add(a: Float64Array, b: Float64Array, factor = 1): Float64Array {
  return a.map((value, i) => value + factor * b[i]);
}

/** NaN when an entry is NaN. */
export function maxAbs(a: Float64Array): number {
  let most = 0;
  for (let i = 0; i < a.length; i++) most = Math.max(most, Math.abs(a[i]));
  return most;
}

/** Largest row sum of moduli; NaN when an entry is NaN. */
export function infinityNorm(a: Float64Array, columns: number): number {
  let most = 0;
  for (let i = 0; i < a.length; i += columns) {
    let sum = 0;
    for (let j = 0; j < columns; j++) sum += Math.abs(a[i + j]);
    most = Math.max(most, sum);
  }
  return most;
}

/**
 * Solves A X = B by Gaussian elimination with partial pivoting. a: n x n, b: n x p; X: n x p.
 * Returns null when A is singular to working precision.
 */
export function solve(a: Float64Array, b: Float64Array, n: number, p: number): Float64Array | null {
  const lu = a.slice();
  const x = b.slice();
  for (let k = 0; k < n; k++) {
    let pivot = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(lu[i * n + k]) > Math.abs(lu[pivot * n + k])) pivot = i;
    const head = lu[pivot * n + k];
    if (!(Math.abs(head) > 0)) return null;
    if (pivot !== k) {
      for (let j = 0; j < n; j++) [lu[k * n + j], lu[pivot * n + j]] = [lu[pivot * n + j], lu[k * n + j]];
      for (let j = 0; j < p; j++) [x[k * p + j], x[pivot * p + j]] = [x[pivot * p + j], x[k * p + j]];
    }
    for (let i = k + 1; i < n; i++) {
      const factor = lu[i * n + k] / head;
      if (factor === 0) continue;
      for (let j = k + 1; j < n; j++) lu[i * n + j] -= factor * lu[k * n + j];
      for (let j = 0; j < p; j++) x[i * p + j] -= factor * x[k * p + j];
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let j = 0; j < p; j++) {
      let sum = x[i * p + j];
      for (let k = i + 1; k < n; k++) sum -= lu[i * n + k] * x[k * p + j];
      x[i * p + j] = sum / lu[i * n + i];
    }
  }
  return x;
}

// For hot loops: these allocate nothing, and copy by hand because set, fill and copyWithin are slow on a few numbers.

/** y += A x, a: n x m, x from xOffset on. */
export function addProduct(y: Float64Array, a: Float64Array, x: Float64Array, xOffset: number, n: number, m: number): void {
  for (let i = 0, at = 0; i < n; i++) {
    let sum = y[i];
    for (let j = 0; j < m; j++) sum += a[at++] * x[xOffset + j];
    y[i] = sum;
  }
}

/** y = A x, a: n x m. */
export function setProduct(y: Float64Array, a: Float64Array, x: Float64Array, n: number, m: number): void {
  for (let i = 0, at = 0; i < n; i++) {
    let sum = 0;
    for (let j = 0; j < m; j++) sum += a[at++] * x[j];
    y[i] = sum;
  }
}

/** The first n numbers of from (from its offset on) to the start of to. */
export function copy(to: Float64Array, from: Float64Array, n: number, offset = 0): void {
  for (let i = 0; i < n; i++) to[i] = from[offset + i];
}

/** Rows of `width` numbers move one back; the first row becomes from[offset ..]. */
export function shiftIn(rows: Float64Array, from: Float64Array, offset: number, width: number): void {
  for (let i = rows.length - 1; i >= width; i--) rows[i] = rows[i - width];
  for (let j = 0; j < width; j++) rows[j] = from[offset + j];
}
