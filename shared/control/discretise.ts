/** Exact discretisation of dx/dt = A x + B u with inputs constant between instants (Åström and Wittenmark 1997, ch. 2). */
import { expm } from "#shared/math/expm.ts";
import { transpose } from "#shared/math/matrix.ts";

export interface Hold {
  /** n x n */
  phi: Float64Array;
  /** n x m */
  gamma: Float64Array;
}

/** a: n x n, b: n x m; Phi = exp(A h), Gamma = integral of exp(A s) ds B over [0, h]. h = 0 gives I and 0. */
export function zeroOrderHold(a: Float64Array, b: Float64Array, n: number, m: number, h: number): Hold {
  const size = n + m;
  const block = new Float64Array(size * size);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) block[i * size + j] = a[i * n + j] * h;
    for (let j = 0; j < m; j++) block[i * size + n + j] = b[i * m + j] * h;
  }
  const e = expm(block, size);
  const phi = new Float64Array(n * n);
  const gamma = new Float64Array(n * m);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) phi[i * n + j] = e[i * size + j];
    for (let j = 0; j < m; j++) gamma[i * m + j] = e[i * size + n + j];
  }
  return { phi, gamma };
}

/**
 * Over one period h with the input changing at tau, 0 <= tau <= h: x(h) = Phi x + Gamma1 u_before + Gamma0 u_after.
 * Gamma0 acts over [tau, h), Gamma1 over [0, tau).
 */
export function delayedHold(a: Float64Array, b: Float64Array, n: number, m: number, h: number, tau: number) {
  const after = zeroOrderHold(a, b, n, m, h - tau);
  const before = zeroOrderHold(a, b, n, m, tau);
  const whole = zeroOrderHold(a, b, n, m, h);
  const gamma1 = new Float64Array(n * m);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < m; j++) {
      let sum = 0;
      for (let k = 0; k < n; k++) sum += after.phi[i * n + k] * before.gamma[k * m + j];
      gamma1[i * m + j] = sum;
    }
  }
  return { phi: whole.phi, gamma0: after.gamma, gamma1 };
}

/**
 * Covariance of white process noise of intensity q (n x n, symmetric) gathered over h (Van Loan, IEEE TAC 23(3), 1978):
 * integral of exp(A s) Q exp(A' s) ds over [0, h], n x n.
 */
export function processCovariance(a: Float64Array, q: Float64Array, n: number, h: number): Float64Array {
  const size = 2 * n;
  const block = new Float64Array(size * size);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      block[i * size + j] = -a[i * n + j] * h;
      block[i * size + n + j] = q[i * n + j] * h;
      block[(n + i) * size + n + j] = a[j * n + i] * h;
    }
  }
  const e = expm(block, size);
  const phiT = new Float64Array(n * n);
  const upper = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      phiT[i * n + j] = e[(n + i) * size + n + j];
      upper[i * n + j] = e[i * size + n + j];
    }
  }
  const phi = transpose(phiT, n, n);
  const w = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      let sum = 0;
      for (let k = 0; k < n; k++) sum += phi[i * n + k] * upper[k * n + j];
      w[i * n + j] = sum;
    }
  }
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < i; j++) {
      const mean = (w[i * n + j] + w[j * n + i]) / 2;
      w[i * n + j] = mean;
      w[j * n + i] = mean;
    }
  }
  return w;
}
