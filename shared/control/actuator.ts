/**
 * The actuator node's half of the loop logic (model 4, steps 5 and 6): what comes out at an acting instant, and the
 * reaction to silence. Hold is a plan of one command that ends in hold, zero one that ends in zero.
 */
import { copy } from "#shared/math/matrix.ts";

export interface SilenceSetup {
  afterLost: number;
  /** Delivered commands in a row after which commands act again; 0: never. */
  resumeAfter: number;
}

export class ActuatorNode {
  /** A reaction to silence is on. */
  silent = false;
  readonly #m: number;
  readonly #zero: Float64Array;
  /** Row 0 of the buffer. */
  readonly #first: Float64Array;
  /** planLength x m; entry 0 is in force. Shifted, never indexed, so that the stage is linear. */
  readonly #buffer: Float64Array;
  readonly #holdAtEnd: boolean;
  readonly #silence: SilenceSetup | null;
  #lostInARow = 0;
  #goodInARow = 0;

  constructor(m: number, planLength: number, holdAtEnd: boolean, silence: SilenceSetup | null) {
    this.#m = m;
    this.#zero = new Float64Array(m);
    this.#buffer = new Float64Array(planLength * m);
    this.#first = this.#buffer.subarray(0, m);
    this.#holdAtEnd = holdAtEnd;
    this.#silence = silence;
  }

  /** Input in force: what the drive is asked for, m. During a reaction to silence it is zero. */
  get inForce(): Float64Array {
    return this.silent ? this.#zero : this.#first;
  }

  get memory(): readonly Float64Array[] {
    return [this.#buffer];
  }

  /**
   * An acting instant: the plan (planLength x m, at an offset into plans) replaces the buffer when delivered. `counts` is false while the network has
   * not joined. Returns what changed: the reaction to silence began, ended, or nothing.
   */
  act(plans: Float64Array, offset: number, delivered: boolean, counts: boolean): "begins" | "ends" | null {
    const m = this.#m;
    const buffer = this.#buffer;
    const kept = buffer.length - m;
    if (delivered) copy(buffer, plans, buffer.length, offset);
    else {
      for (let i = 0; i < kept; i++) buffer[i] = buffer[i + m];
      if (!this.#holdAtEnd) for (let i = kept; i < buffer.length; i++) buffer[i] = 0;
    }
    return this.#silence ? this.#listen(this.#silence, delivered, counts) : null;
  }

  #listen(silence: SilenceSetup, delivered: boolean, counts: boolean): "begins" | "ends" | null {
    if (delivered) {
      this.#lostInARow = 0;
      this.#goodInARow++;
      if (this.silent && silence.resumeAfter > 0 && this.#goodInARow >= silence.resumeAfter) {
        this.silent = false;
        return "ends";
      }
      return null;
    }
    this.#goodInARow = 0;
    if (counts) this.#lostInARow++;
    if (!this.silent && this.#lostInARow >= silence.afterLost) {
      this.silent = true;
      return "begins";
    }
    return null;
  }
}
