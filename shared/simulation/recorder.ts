import type { Integrator } from "./integrator.ts";

/** Grid points per round; figures and verdicts are taken on them and on all events. */
export const POINTS_PER_ROUND = 10;

/** Rows of numbers that grow as needed; for events that fall between grid points. */
export class Rows {
  count = 0;
  #data: Float64Array;
  readonly width: number;

  constructor(width: number) {
    this.width = width;
    this.#data = new Float64Array(width * 64);
  }

  /** A place for one more row: the array and the row's offset. */
  next(): { data: Float64Array; offset: number } {
    const offset = this.count * this.width;
    if (offset + this.width > this.#data.length) {
      const larger = new Float64Array(this.#data.length * 2);
      larger.set(this.#data);
      this.#data = larger;
    }
    this.count++;
    return { data: this.#data, offset };
  }

  at(row: number, column: number): number {
    return this.#data[row * this.width + column];
  }
}

/**
 * Keeps states and inputs on the grid of 10 points a round. Grid point i lies at the whole nanosecond nearest to i T / 10;
 * at an event the value just after it is kept.
 */
export class Recorder {
  readonly x: Float64Array[];
  readonly u: Float64Array[];
  readonly t: Float64Array;
  /** Grid points written so far. */
  count = 0;
  readonly #n: number;
  readonly #m: number;
  /** The integrator's components: the states, then the lagged inputs, if any. */
  readonly #columns: readonly Float64Array[];

  constructor(n: number, m: number, periodNs: number, endNs: number) {
    const points = Math.floor((endNs * POINTS_PER_ROUND) / periodNs) + 1;
    this.t = new Float64Array(points);
    const step = periodNs / POINTS_PER_ROUND;
    for (let i = 0; i < points; i++) this.t[i] = Math.round(i * step) / 1e9;
    this.x = Array.from({ length: n }, () => new Float64Array(points));
    this.u = Array.from({ length: m }, () => new Float64Array(points));
    this.#columns = [...this.x, ...this.u];
    this.#n = n;
    this.#m = m;
  }

  /**
   * Writes every grid point of the integrator's last step, its end excluded, and stops at the first one where state
   * `guard` leaves ± guardAt. u(t) = u0 + slope (t - segmentS), or the lagged input behind the states. Returns false then.
   */
  step(integrator: Integrator, u: Float64Array, slope: Float64Array, segmentS: number, lagged: boolean, guard: number, guardAt: number): boolean {
    const until = integrator.stepFrom + integrator.stepLength;
    const { t, x } = this;
    const first = this.count;
    let end = first;
    while (end < t.length && t[end] < until) end++;
    if (end === first) return true;
    integrator.record(t, first, end, this.#columns);
    if (!lagged) {
      for (let j = 0; j < this.#m; j++) {
        const felt = this.u[j];
        if (slope[j] === 0) for (let i = first; i < end; i++) felt[i] = u[j];
        else for (let i = first; i < end; i++) felt[i] = u[j] + slope[j] * (t[i] - segmentS);
      }
    }
    if (guard >= 0) {
      const guarded = x[guard];
      for (let i = first; i < end; i++) {
        if (Math.abs(guarded[i]) < guardAt) continue;
        this.count = i;
        return false;
      }
    }
    this.count = end;
    return true;
  }

  /** Writes the grid point at time tS, if there is one that is still missing. */
  last(tS: number, y: Float64Array, u: Float64Array, lagged: boolean): void {
    if (this.count >= this.t.length || this.t[this.count] !== tS) return;
    for (let j = 0; j < this.#n; j++) this.x[j][this.count] = y[j];
    for (let j = 0; j < this.#m; j++) this.u[j][this.count] = lagged ? y[this.#n + j] : u[j];
    this.count++;
  }
}
