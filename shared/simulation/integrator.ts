/**
 * Steps of the embedded pair of Cash and Karp (ACM TOMS 16(3), 1990) from the library ode45-cash-karp, with our own step
 * control (its own calls Math.pow, which differs between engines): steps are the largest step times a power of 1/2, halved
 * while the scaled error estimate is above 1 and doubled after an estimate below 1/64 (order 5: a doubled step would
 * have about half the permitted error).
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
  readonly #c2: Float64Array;
  readonly #c3: Float64Array;
  readonly #c4: Float64Array;
  #extended = false;
  #error = 0;
  #h: number;
  readonly #maxStep: number;

  /** maxStep: largest step, s. The state is scaled by absolute + relative * |y|. */
  constructor(n: number, derivative: Derivative, maxStep: number, absolute: number, relative: number) {
    this.#n = n;
    this.#derivative = derivative;
    this.#maxStep = maxStep;
    this.#h = maxStep;
    this.y = new Float64Array(n);
    this.#before = new Float64Array(n);
    this.#k7 = new Float64Array(n);
    this.#c2 = new Float64Array(n);
    this.#c3 = new Float64Array(n);
    this.#c4 = new Float64Array(n);
    this.#stepper = ode(this.y, derivative, 0, maxStep, {
      tol: Number.POSITIVE_INFINITY,
      errorScaleFunction: (_i, _dt, y) => absolute + relative * Math.abs(y),
      errorPostFunction: (error) => {
        this.#error = error;
        return 0;
      },
      verbose: false,
    });
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
      for (;;) {
        steps++;
        stepper.t = at;
        stepper.dt = dt;
        stepper.step();
        if (this.#error <= 1) break;
        for (let i = 0; i < n; i++) y[i] = before[i];
        if (steps >= MAX_STEPS || at + dt / 2 === at) return "stiff";
        dt /= 2;
        this.#h = dt;
      }
      if (this.#error < DOUBLE_BELOW && this.#h < this.#maxStep) this.#h = Math.min(this.#maxStep, 2 * this.#h);
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
   * State at stepFrom + theta * stepLength, 0 <= theta <= 1, written to out. Continuous extension of order 4 with a
   * continuous derivative, from the stages of the step and the derivative at its end; its weights follow from the order
   * conditions with the weight of stage 5 set to zero (checked by a test in rational arithmetic).
   */
  interpolate(theta: number, out: Float64Array): void {
    this.#extend();
    const h = this.stepLength * theta;
    const before = this.#before;
    const k1 = this.#stepper._k1;
    const c2 = this.#c2;
    const c3 = this.#c3;
    const c4 = this.#c4;
    for (let i = 0; i < this.#n; i++) out[i] = before[i] + h * (k1[i] + theta * (c2[i] + theta * (c3[i] + theta * c4[i])));
  }

  /** Component i at the times t[from] to t[until - 1], all within the last step, written to the same places of out. */
  sample(i: number, t: Float64Array, from: number, until: number, out: Float64Array): void {
    this.#extend();
    const start = this.stepFrom;
    const h = this.stepLength;
    const y0 = this.#before[i];
    const c1 = this.#stepper._k1[i] * h;
    const c2 = this.#c2[i] * h;
    const c3 = this.#c3[i] * h;
    const c4 = this.#c4[i] * h;
    for (let k = from; k < until; k++) {
      const theta = (t[k] - start) / h;
      out[k] = y0 + theta * (c1 + theta * (c2 + theta * (c3 + theta * c4)));
    }
  }

  #extend(): void {
    if (this.#extended) return;
    const { _k1: k1, _k3: k3, _k4: k4, _k6: k6 } = this.#stepper;
    const k7 = this.#k7;
    const c2 = this.#c2;
    const c3 = this.#c3;
    const c4 = this.#c4;
    this.#derivative(k7, this.y, this.stepFrom + this.stepLength);
    for (let i = 0; i < this.#n; i++) {
      const d1 = k1[i];
      const d3 = k3[i];
      const d4 = k4[i];
      const d6 = k6[i];
      const d7 = k7[i];
      c2[i] = (-115 / 42) * d1 + (250 / 69) * d3 - (384 / 161) * d6 + 1.5 * d7;
      c3[i] = (542 / 189) * d1 - (3500 / 621) * d3 + (250 / 297) * d4 + (10496 / 1771) * d6 - 4 * d7;
      c4[i] = (-65 / 63) * d1 + (500 / 207) * d3 - (125 / 198) * d4 - (5760 / 1771) * d6 + 2.5 * d7;
    }
    this.#extended = true;
  }
}
