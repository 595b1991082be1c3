/**
 * Steps of the embedded pair of Cash and Karp (ACM TOMS 16(3), 1990): stages and update of the library ode45-cash-karp, with
 * our own error estimate and step control. The library's own control calls Math.pow, which differs between engines, and
 * evaluates the first stage anew where it is known. Steps are the largest step times a power of 1/2, halved while the scaled
 * error is above 1 and doubled after an error below 1/64 (order 5: a doubled step would have about half the permitted error).
 */
import ode, { type Integrator as Stepper } from "ode45-cash-karp";

export type Derivative = (dy: Float64Array, y: Float64Array, t: number) => void;

const DOUBLE_BELOW = 1 / 64;
const MAX_STEPS = 10_000;

export class Integrator {
  /** The state, changed in place. */
  readonly y: Float64Array;
  /** Start of the last accepted step and its length, s. */
  stepFrom = 0;
  stepLength = 0;
  readonly #n: number;
  readonly #derivative: Derivative;
  readonly #stepper: Stepper;
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
    this.y = new Float64Array(n);
    this.#before = new Float64Array(n);
    this.#k7 = new Float64Array(n);
    this.#absolute = absolute;
    this.#relative = relative;
    this.#stepper = ode(this.y, derivative, 0, maxStep, { verbose: false });
  }

  /**
   * Integrates from `from` to `to` (s), calling onStep after every accepted step; onStep returns false to stop there.
   * Returns "done", "stopped", or "stiff" when 10 000 steps did not suffice or a value is not finite; then y holds the
   * last accepted state.
   */
  advance(from: number, to: number, onStep: () => boolean): "done" | "stopped" | "stiff" {
    const { y } = this;
    const stepper = this.#stepper;
    const before = this.#before;
    const n = this.#n;
    let at = from;
    for (let steps = 0; steps < MAX_STEPS; ) {
      const rest = to - at;
      if (rest <= 0) return "done";
      // Two steps of equal length rather than a long and a tiny one.
      let dt = rest <= this.#h ? rest : rest < 2 * this.#h ? rest / 2 : this.#h;
      for (let i = 0; i < n; i++) before[i] = y[i];
      stepper.t = at;
      // Within a segment the derivative at the end of a step is the first stage of the next one.
      if (at > from && this.#extended) for (let i = 0; i < n; i++) stepper._k1[i] = this.#k7[i];
      else stepper._calculateK1();
      let error: number;
      for (;;) {
        steps++;
        stepper._calculateKs(dt);
        error = this.#error(dt);
        if (error <= 1) break;
        if (steps >= MAX_STEPS || at + dt / 2 === at) return "stiff";
        dt /= 2;
        this.#h = dt;
      }
      stepper._update(dt);
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

  /** Largest error of the embedded fourth-order result over its scale. */
  #error(dt: number): number {
    const { y } = this;
    const { _k1: k1, _k3: k3, _k4: k4, _k5: k5, _k6: k6 } = this.#stepper;
    let most = 0;
    for (let i = 0; i < this.#n; i++) {
      const e =
        (2825 / 27648 - 37 / 378) * k1[i] +
        (18575 / 48384 - 250 / 621) * k3[i] +
        (13525 / 55296 - 125 / 594) * k4[i] +
        (277 / 14336) * k5[i] +
        (1 / 4 - 512 / 1771) * k6[i];
      most = Math.max(most, Math.abs(dt * e) / (this.#absolute + this.#relative * Math.abs(y[i])));
    }
    return most;
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
    for (let k = 0; k < points; k++) theta[k] = (t[first + k] - from) / h;
    this.#evaluateEnd();
    const before = this.#before;
    const k7 = this.#k7;
    const { _k1: k1, _k3: k3, _k4: k4, _k6: k6 } = this.#stepper;
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
