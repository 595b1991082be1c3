import { multiply } from "#shared/math/matrix.ts";
import type { KalmanDesign, LoopDesign } from "./design.ts";
import { filterGain } from "./riccati.ts";

/** Kalman filter whose covariance shrinks only when a measurement arrives (Sinopoli et al., IEEE TAC 49(9), 2004). */
export class TimeVaryingFilter {
  readonly #design: LoopDesign;
  readonly #kalman: KalmanDesign;
  /** n x n, starts at 0: the estimate at t = 0 is taken as exact. */
  #covariance: Float64Array;

  constructor(design: LoopDesign, kalman: KalmanDesign) {
    this.#design = design;
    this.#kalman = kalman;
    this.#covariance = new Float64Array(design.model.n * design.model.n);
  }

  step(k: number, delivered: boolean): Float64Array | null {
    const { model, c, p } = this.#design;
    const { n } = model;
    const phi = k === 0 ? model.start.phi : model.period.phi;
    const noise = k === 0 ? this.#kalman.processStart : this.#kalman.processPeriod;
    const carried = multiply(phi, this.#covariance, n, n, n);
    const prior = new Float64Array(n * n);
    for (let i = 0; i < n; i++) {
      for (let j = 0; j <= i; j++) {
        let sum = noise[i * n + j];
        for (let s = 0; s < n; s++) sum += carried[i * n + s] * phi[j * n + s];
        prior[i * n + j] = sum;
        prior[j * n + i] = sum;
      }
    }
    this.#covariance = prior;
    if (!delivered) return null;
    const gain = filterGain(prior, c, this.#kalman.sensor, n, p);
    if (!gain) return null;
    const shrink = multiply(multiply(gain, c, n, p, n), prior, n, n, n);
    this.#covariance = prior.map((value, i) => value - (shrink[i] + shrink[(i % n) * n + Math.floor(i / n)]) / 2);
    return gain;
  }
}
