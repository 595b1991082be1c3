/**
 * The controller's half of the loop logic (model 4, steps 2 to 4): estimate, predict, command. All memory is in typed arrays
 * that are shifted, never indexed by the round, so that an analysis can read the same stage as a linear map.
 * Vectors are deviations from the operating point.
 */
import { addProduct, copy, setProduct, shiftIn } from "#shared/math/matrix.ts";
import type { LoopDesign } from "./design.ts";
import type { Encoder } from "./encoding.ts";
import { TimeVaryingFilter } from "./filter.ts";

export interface CommandLimits {
  lo: Float64Array;
  hi: Float64Array;
  /** Largest change from one command to the next; Infinity: none. */
  step: Float64Array;
}

/** Signals known ahead, filled in for an instant in whole nanoseconds: x_ref (n) and u_ff (m) at an acting instant, r (ni) of the integrated signals at a sampling instant. */
export interface KnownAhead {
  state(tNs: number, out: Float64Array): void;
  feedforward(tNs: number, out: Float64Array): void;
  integrated(tNs: number, out: Float64Array): void;
}

export interface ControllerSetup {
  design: LoopDesign;
  /** null for the analysis: no saturation, rate limit or anti-windup. */
  limits: CommandLimits | null;
  /** null for the analysis: values pass unchanged. */
  encoder: Encoder | null;
  /** null when every reference and feedforward is zero. */
  known: KnownAhead | null;
  acknowledgement: "none" | "reported" | "at-once";
  planLength: number;
}

/** What stays the same whatever the law: command k goes out as `plan` (planLength x m); entry 0 is u_k. */
export interface Controller {
  readonly plan: Float64Array;
  /** Estimate after the last update, n; empty for a PID. */
  readonly estimate: Float64Array;
  /** Largest |command - encoded command| is not counted; 1 where the last u_k was limited upwards, -1 downwards. */
  readonly limited: Int8Array;
  /**
   * Round k: y (p) is the measurement, used only when delivered; inForce (m) is the input in force at the actuator at the
   * sampling instant, used as far as the acknowledgement goes.
   */
  compute(k: number, y: Float64Array, delivered: boolean, inForce: Float64Array): void;
}

/** Clips and rate-limits v against the command before; sets limited[i]. */
export function limitCommand(limits: CommandLimits | null, i: number, v: number, before: number, limited: Int8Array): number {
  limited[i] = 0;
  if (!limits) return v;
  const step = limits.step[i];
  let u = Math.min(limits.hi[i], Math.max(limits.lo[i], v));
  u = Math.min(before + step, Math.max(before - step, u));
  if (v > u) limited[i] = 1;
  else if (v < u) limited[i] = -1;
  return u;
}

export class StateFeedback implements Controller {
  readonly plan: Float64Array;
  readonly estimate: Float64Array;
  readonly limited: Int8Array;
  readonly #setup: ControllerSetup;
  readonly #n: number;
  readonly #m: number;
  readonly #ni: number;
  /** Input that the controller believes: row i is the piece of the command computed i + 1 rounds before the present one. */
  readonly #believed: Float64Array;
  readonly #rows: number;
  /** Row of the piece in force at the sampling instant. */
  readonly #presentRow: number;
  readonly #integral: Float64Array;
  readonly #filter: TimeVaryingFilter | null;
  readonly #prior: Float64Array;
  readonly #ahead: Float64Array;
  readonly #spare: Float64Array;
  readonly #virtualX: Float64Array;
  readonly #virtualQ: Float64Array;
  readonly #virtualU: Float64Array;
  readonly #reference: Float64Array;
  readonly #innovation: Float64Array;
  /** Limits met by entry 0, while the further entries of a plan are computed. */
  readonly #limitedNow: Int8Array;

  constructor(setup: ControllerSetup, estimate: ArrayLike<number>) {
    const { design, planLength } = setup;
    const { n, m } = design.model;
    const whole = design.instants.wholePeriods;
    this.#setup = setup;
    this.#n = n;
    this.#m = m;
    this.#ni = design.feedback?.ni ?? 0;
    this.plan = new Float64Array(planLength * m);
    this.estimate = Float64Array.from(estimate);
    this.limited = new Int8Array(m);
    this.#rows = whole + 2;
    this.#presentRow = design.instants.restS > 0 ? whole : whole - 1;
    this.#believed = new Float64Array(this.#rows * m);
    this.#integral = new Float64Array(this.#ni);
    this.#filter = design.kalman && !design.kalman.gain ? new TimeVaryingFilter(design, design.kalman) : null;
    this.#prior = new Float64Array(n);
    this.#ahead = new Float64Array(n);
    this.#spare = new Float64Array(n);
    this.#virtualX = new Float64Array(n);
    this.#virtualQ = new Float64Array(this.#ni);
    this.#virtualU = new Float64Array(this.#rows * m);
    this.#reference = new Float64Array(Math.max(n, m, this.#ni));
    this.#innovation = new Float64Array(design.p);
    this.#limitedNow = new Int8Array(m);
  }

  /** Every number that is carried from round to round, for an analysis that reads the stage as a linear map. */
  get memory(): readonly Float64Array[] {
    return [this.estimate, this.#believed, this.#integral];
  }

  compute(k: number, y: Float64Array, delivered: boolean, inForce: Float64Array): void {
    const m = this.#m;
    const { acknowledgement } = this.#setup;
    if (acknowledgement === "at-once" || (acknowledgement === "reported" && delivered)) {
      for (let j = 0; j < m; j++) this.#believed[this.#presentRow * m + j] = inForce[j];
    }
    this.#update(k, y, delivered);
    this.#predict();
    this.#command(k);
    shiftIn(this.#believed, this.plan, 0, m);
  }

  /** x at one sampling instant to the next under the believed input (rows as seen from the later one). */
  #carry(x: Float64Array, believed: Float64Array, out: Float64Array, first: boolean): void {
    const { model, instants } = this.#setup.design;
    const n = this.#n;
    const m = this.#m;
    setProduct(out, first ? model.start.phi : model.period.phi, x, n, n);
    if (first) return;
    if (instants.restS > 0) addProduct(out, model.between.gamma1, believed, (instants.wholePeriods + 1) * m, n, m);
    addProduct(out, model.between.gamma0, believed, instants.wholePeriods * m, n, m);
  }

  #update(k: number, y: Float64Array, delivered: boolean): void {
    const { c, d, p, direct, selected, kalman } = this.#setup.design;
    const n = this.#n;
    const x = this.estimate;
    if (direct && delivered && selected) {
      for (let i = 0; i < p; i++) x[selected[i]] = y[i];
      return;
    }
    this.#carry(x, this.#believed, this.#prior, k === 0);
    copy(x, this.#prior, n);
    if (direct) return;
    const gain = this.#filter ? this.#filter.step(k, delivered) : kalman?.gain;
    if (!delivered || !gain) return;
    const innovation = this.#innovation;
    for (let i = 0; i < p; i++) {
      let seen = 0;
      for (let j = 0; j < n; j++) seen += c[i * n + j] * this.#prior[j];
      for (let j = 0; j < this.#m; j++) seen += d[i * this.#m + j] * this.#believed[this.#presentRow * this.#m + j];
      innovation[i] = y[i] - seen;
    }
    addProduct(x, gain, innovation, 0, n, p);
  }

  #predict(): void {
    const { model, instants } = this.#setup.design;
    const m = this.#m;
    const x = this.#ahead;
    copy(x, this.estimate, this.#n);
    if (instants.restS > 0) this.#step(x, model.rest.phi, model.rest.gamma, this.#believed, instants.wholePeriods * m);
    for (let row = instants.wholePeriods - 1; row >= 0; row--) this.#step(x, model.period.phi, model.period.gamma, this.#believed, row * m);
  }

  #step(x: Float64Array, phi: Float64Array, gamma: Float64Array, u: Float64Array, uOffset: number): void {
    const spare = this.#spare;
    setProduct(spare, phi, x, this.#n, this.#n);
    addProduct(spare, gamma, u, uOffset, this.#n, this.#m);
    copy(x, spare, this.#n);
  }

  /** Step 4 for entry 0 and, on the predicted state, for every further entry of the plan. */
  #command(k: number): void {
    const { design, planLength } = this.#setup;
    const m = this.#m;
    const { periodNs, sampleNs, latencyNs } = design.instants;
    const sampledAt = k * periodNs + sampleNs;
    const x = this.#ahead;
    this.#entry(0, x, this.#integral, this.#believed, 0, sampledAt + latencyNs);
    if (planLength > 1 && this.#ni > 0) {
      this.#virtualX.set(this.estimate);
      this.#virtualQ.set(this.#integral);
      this.#virtualU.set(this.#believed);
      this.#integrate(this.#virtualQ, this.#virtualX, sampledAt);
    }
    for (let j = 0; j < m; j++) this.#limitedNow[j] = this.limited[j];
    for (let i = 1; i < planLength; i++) {
      this.#step(x, design.model.period.phi, design.model.period.gamma, this.plan, (i - 1) * m);
      if (this.#ni > 0) {
        shiftIn(this.#virtualU, this.plan, (i - 1) * m, m);
        this.#carry(this.#virtualX, this.#virtualU, this.#prior, false);
        this.#virtualX.set(this.#prior);
      }
      this.#entry(i, x, this.#virtualQ, this.plan, (i - 1) * m, sampledAt + i * periodNs + latencyNs);
      if (this.#ni > 0) this.#integrate(this.#virtualQ, this.#virtualX, sampledAt + i * periodNs);
    }
    for (let j = 0; j < m; j++) this.limited[j] = this.#limitedNow[j];
    this.#integrate(this.#integral, this.estimate, sampledAt);
  }

  /** Entry i of the plan from the state predicted at its acting instant; `before` holds the command in force until then. */
  #entry(i: number, x: Float64Array, q: Float64Array, before: Float64Array, beforeOffset: number, actsAtNs: number): void {
    const { design, limits, encoder, known } = this.#setup;
    const { feedback } = design;
    if (!feedback) return;
    const n = this.#n;
    const m = this.#m;
    const ni = this.#ni;
    const reference = this.#reference;
    if (known) known.state(actsAtNs, reference);
    for (let j = 0; j < m; j++) {
      let v = 0;
      for (let s = 0; s < n; s++) v -= feedback.k[j * n + s] * (known ? x[s] - reference[s] : x[s]);
      for (let s = 0; s < ni; s++) v -= feedback.ki[j * ni + s] * q[s];
      this.plan[i * m + j] = v;
    }
    if (known) {
      known.feedforward(actsAtNs, reference);
      for (let j = 0; j < m; j++) this.plan[i * m + j] += reference[j];
    }
    for (let j = 0; j < m; j++) {
      const u = limitCommand(limits, j, this.plan[i * m + j], before[beforeOffset + j], this.limited);
      this.plan[i * m + j] = encoder ? encoder.apply(j, u) : u;
    }
  }

  /** q+ = q + T (C_I x - r), held where the last command was limited and the step would push it further. */
  #integrate(q: Float64Array, x: Float64Array, sampledAtNs: number): void {
    const { design, known } = this.#setup;
    const { feedback } = design;
    if (!feedback || this.#ni === 0) return;
    const n = this.#n;
    const m = this.#m;
    const ni = this.#ni;
    if (known) known.integrated(sampledAtNs, this.#reference);
    for (let i = 0; i < ni; i++) {
      let error = known ? -this.#reference[i] : 0;
      for (let s = 0; s < n; s++) error += feedback.ci[i * n + s] * x[s];
      const step = design.instants.periodS * error;
      let further = false;
      for (let j = 0; j < m; j++) if (-feedback.ki[j * ni + i] * step * this.limited[j] > 0) further = true;
      if (!further) q[i] += step;
    }
  }
}
