/**
 * The drive behind the actuator node (model 4, step 5): dead time, then saturation, then slew. A first-order lag comes last
 * and is integrated with the plant; this class keeps the input before the lag, constant or a ramp between events.
 */
import { quantumOf } from "#shared/control/encoding.ts";
import { toNs } from "#shared/network/schedule.ts";
import type { Loop } from "#shared/scenario/schema.ts";

/** How the drive goes to a new input: at its own rate, along the silence ramp, or at once because power is off. */
export type Manner = "own-rate" | "ramp" | "at-once";

const NEVER = Number.POSITIVE_INFINITY;

export class Drive {
  /** Input at the start of the present segment, and its slope per second. */
  readonly value: Float64Array;
  readonly slope: Float64Array;
  sloping = false;
  /** Whether any input can ever be on a ramp. */
  readonly canSlope: boolean;
  /** Some input stands at its lowest or largest value; a drive that only pulls is not saturated at rest. */
  saturated = false;
  /** The next instant at which something changes by itself; Infinity: none. */
  nextNs = NEVER;
  readonly #m: number;
  readonly #lo: Float64Array;
  readonly #hi: Float64Array;
  readonly #rate: Float64Array;
  /** Half a step of the command's grid: the grid may miss the limit by as much. */
  readonly #margin: Float64Array;
  readonly #target: Float64Array;
  readonly #reachNs: Float64Array;
  readonly #deadNs: number;
  readonly #rampS: number;
  readonly #pending: { atNs: number; target: Float64Array; manner: Manner }[] = [];
  #valueNs = 0;

  constructor(loop: Loop) {
    const { inputs, deadTimeS, silence } = loop.actuator;
    this.#m = inputs.length;
    this.#lo = Float64Array.from(inputs, (input) => input.lo);
    this.#hi = Float64Array.from(inputs, (input) => input.hi);
    this.#rate = Float64Array.from(inputs, (input) => input.ratePerS ?? NEVER);
    this.#margin = Float64Array.from(inputs, (input) => (input.encoding ? quantumOf(input.encoding) / 2 : 0));
    this.#deadNs = toNs(deadTimeS);
    this.#rampS = silence?.rampS ?? 1;
    this.canSlope = silence?.reaction === "ramp" || inputs.some((input) => input.ratePerS !== null);
    this.value = new Float64Array(this.#m);
    this.slope = new Float64Array(this.#m);
    this.#target = new Float64Array(this.#m);
    this.#reachNs = new Float64Array(this.#m).fill(NEVER);
  }

  /** Asks for an input (m) at nowNs; it takes effect after the dead time. */
  ask(nowNs: number, target: Float64Array, manner: Manner): void {
    if (this.#deadNs === 0) {
      this.#move(nowNs);
      this.#apply(nowNs, target, manner);
    } else {
      this.#pending.push({ atNs: nowNs + this.#deadNs, target: target.slice(), manner });
    }
    this.#schedule();
  }

  /** Brings the drive to nowNs, which is not later than nextNs. */
  advance(nowNs: number): void {
    this.#move(nowNs);
    for (let first = this.#pending[0]; first && first.atNs <= nowNs; first = this.#pending[0]) {
      this.#pending.shift();
      this.#apply(nowNs, first.target, first.manner);
    }
    this.#schedule();
  }

  #move(nowNs: number): void {
    if (this.sloping) {
      const dt = (nowNs - this.#valueNs) / 1e9;
      for (let i = 0; i < this.#m; i++) {
        if (nowNs >= this.#reachNs[i]) {
          this.value[i] = this.#target[i];
          this.slope[i] = 0;
          this.#reachNs[i] = NEVER;
        } else {
          this.value[i] += this.slope[i] * dt;
        }
      }
    }
    this.#valueNs = nowNs;
  }

  #apply(nowNs: number, target: Float64Array, manner: Manner): void {
    for (let i = 0; i < this.#m; i++) {
      const clipped = Math.min(this.#hi[i], Math.max(this.#lo[i], target[i]));
      const way = clipped - this.value[i];
      const rate = manner === "at-once" ? NEVER : manner === "ramp" ? Math.min(this.#rate[i], Math.abs(way) / this.#rampS) : this.#rate[i];
      this.#target[i] = clipped;
      if (way === 0 || rate === NEVER) {
        this.value[i] = clipped;
        this.slope[i] = 0;
        this.#reachNs[i] = NEVER;
      } else {
        this.slope[i] = way > 0 ? rate : -rate;
        this.#reachNs[i] = nowNs + Math.max(1, Math.ceil((Math.abs(way) / rate) * 1e9));
      }
    }
  }

  #schedule(): void {
    this.nextNs = this.#pending.length > 0 ? this.#pending[0].atNs : NEVER;
    this.sloping = false;
    this.saturated = false;
    for (let i = 0; i < this.#m; i++) {
      if (this.slope[i] !== 0) {
        this.sloping = true;
        this.nextNs = Math.min(this.nextNs, this.#reachNs[i]);
      } else if (
        (this.#lo[i] < 0 && this.value[i] <= this.#lo[i] + this.#margin[i]) ||
        (this.#hi[i] > 0 && this.value[i] >= this.#hi[i] - this.#margin[i])
      ) {
        this.saturated = true;
      }
    }
  }
}
