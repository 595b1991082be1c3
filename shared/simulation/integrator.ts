/**
 * Adaptive steps of the embedded pair of Cash and Karp (ACM TOMS 16(3), 1990) with our own error estimate and step control:
 * the usual control calls pow, which differs between engines. Steps are the largest step times a power of 1/2, halved while
 * the scaled error is above 1 and doubled after an error below 1/64 (order 5: a doubled step would have about half the
 * permitted error).
 */
import { type Derivative, type Stages, stagesOf } from "./stages.ts";

const DOUBLE_BELOW = 1 / 64;
const MAX_STEPS = 10_000;
const SLACK = 1 + 1e-9;

export class Integrator {
  /** The state, changed in place. */
  readonly y: Float64Array;
  /** Start of the last accepted step and its length, s. */
  stepFrom = 0;
  stepLength = 0;
  readonly #n: number;
  readonly #derivative: Derivative;
  readonly #stages: Stages;
  readonly #before: Float64Array;
  readonly #k7: Float64Array;
  /** k7, the derivative at the end of the last step, is known. */
  #extended = false;
  #theta = new Float64Array(16);
  #h: number;
  readonly #maxStep: number;
  readonly #absolute: number;
  readonly #relative: number;

  /** maxStep: largest step, s. The state is scaled by absolute + relative * |y|. */
  constructor(n: number, derivative: Derivative, maxStep: number, absolute: number, relative: number) {
    this.#n = n;
    this.#derivative = derivative;
    this.#maxStep = maxStep;
    this.#h = maxStep;
    this.#stages = stagesOf(n, derivative);
    this.y = this.#stages.y;
    this.#before = new Float64Array(n);
    this.#k7 = new Float64Array(n);
    this.#absolute = absolute;
    this.#relative = relative;
  }

  /**
   * Integrates from `from` to `to` (s), calling onStep after every accepted step; onStep returns false to stop there.
   * Returns "done", "stopped", or "stiff" when 10 000 steps did not suffice or a value is not finite; then y holds the
   * last accepted state.
   */
  advance(from: number, to: number, onStep: () => boolean): "done" | "stopped" | "stiff" {
    const { y } = this;
    const stages = this.#stages;
    const before = this.#before;
    const n = this.#n;
    let at = from;
    for (let steps = 0; steps < MAX_STEPS; ) {
      const rest = to - at;
      if (rest <= 0) return "done";
      // Two steps of equal length rather than a long and a tiny one; times in seconds are rounded, hence the slack.
      const most = this.#h * SLACK;
      let dt = rest <= most ? rest : rest <= 2 * most ? rest / 2 : this.#h;
      for (let i = 0; i < n; i++) before[i] = y[i];
      // Within a segment the derivative at the end of a step is the first stage of the next one.
      if (at > from && this.#extended) for (let i = 0; i < n; i++) stages.k1[i] = this.#k7[i];
      else stages.first(at);
      let error: number;
      for (;;) {
        steps++;
        stages.rest(at, dt);
        error = stages.error(dt, this.#absolute, this.#relative);
        if (error <= 1) break;
        if (steps >= MAX_STEPS || at + dt / 2 === at) return "stiff";
        dt /= 2;
        this.#h = dt;
      }
      stages.update(dt);
      if (error < DOUBLE_BELOW && this.#h < this.#maxStep) this.#h = Math.min(this.#maxStep, 2 * this.#h);
      this.stepFrom = at;
      this.stepLength = dt;
      this.#extended = false;
      at = dt === rest ? to : at + dt;
      if (!onStep()) return "stopped";
      if (dt === rest) return "done";
    }
    return "stiff";
  }

  /**
   * Writes the state at the times t[first] to t[end - 1], all within the last step, to columns (one per component).
   * Continuous extension of order 4 with a continuous derivative, from the stages of the step and the derivative at its
   * end; its weights follow from the order conditions with the weight of stage 5 set to zero (checked by a test).
   */
  record(t: Float64Array, first: number, end: number, columns: readonly Float64Array[]): void {
    const points = end - first;
    if (points > this.#theta.length) this.#theta = new Float64Array(points);
    const theta = this.#theta;
    const from = this.stepFrom;
    const h = this.stepLength;
    const perSecond = 1 / h;
    for (let k = 0; k < points; k++) theta[k] = (t[first + k] - from) * perSecond;
    this.#evaluateEnd();
    const before = this.#before;
    const k7 = this.#k7;
    const { k1, k3, k4, k6 } = this.#stages;
    for (let i = 0; i < this.#n; i++) {
      const y0 = before[i];
      const d1 = k1[i];
      const d3 = k3[i];
      const d4 = k4[i];
      const d6 = k6[i];
      const d7 = k7[i];
      const c1 = h * d1;
      const c2 = h * ((-115 / 42) * d1 + (250 / 69) * d3 - (384 / 161) * d6 + 1.5 * d7);
      const c3 = h * ((542 / 189) * d1 - (3500 / 621) * d3 + (250 / 297) * d4 + (10496 / 1771) * d6 - 4 * d7);
      const c4 = h * ((-65 / 63) * d1 + (500 / 207) * d3 - (125 / 198) * d4 - (5760 / 1771) * d6 + 2.5 * d7);
      const column = columns[i];
      for (let k = 0; k < points; k++) {
        const s = theta[k];
        column[first + k] = y0 + s * (c1 + s * (c2 + s * (c3 + s * c4)));
      }
    }
  }

  /** State at stepFrom + theta * stepLength, 0 <= theta <= 1, written to out. */
  interpolate(theta: number, out: Float64Array): void {
    const t = Float64Array.of(this.stepFrom + theta * this.stepLength);
    const columns = Array.from({ length: this.#n }, () => new Float64Array(1));
    this.record(t, 0, 1, columns);
    for (let i = 0; i < this.#n; i++) out[i] = columns[i][0];
  }

  #evaluateEnd(): void {
    if (this.#extended) return;
    this.#derivative(this.#k7, this.y, this.stepFrom + this.stepLength);
    this.#extended = true;
  }
}
