/**
 * PID on one measured signal, without a model (model 4, step 4): e = r(s_k) - y_k with the last received y (at first the
 * operating point); u = K_p e + I + D, I+ = I + K_i T e, D_k = (T_f D_{k-1} - K_d (y_k - y_{k-1})) / (T_f + T).
 * I and D advance every round; I stays where the command was limited and the step would push it further.
 */
import type { Law } from "#shared/scenario/schema.ts";
import { type Controller, type ControllerSetup, limitCommand } from "./controller.ts";

type PidLaw = Extract<Law, { type: "pid" }>;

export class Pid implements Controller {
  readonly plan = new Float64Array(1);
  readonly estimate = new Float64Array(0);
  readonly limited = new Int8Array(1);
  /** Last received y, y of the round before, I, D. */
  readonly #state = new Float64Array(4);
  readonly #law: PidLaw;
  readonly #setup: ControllerSetup;
  /** Index of the signal among the measured ones. */
  readonly #signal: number;
  readonly #reference: (tNs: number) => number;
  readonly #feedforward = new Float64Array(1);

  constructor(law: PidLaw, setup: ControllerSetup, signal: number, reference: (tNs: number) => number) {
    this.#law = law;
    this.#setup = setup;
    this.#signal = signal;
    this.#reference = reference;
  }

  get memory(): readonly Float64Array[] {
    return [this.#state, this.plan];
  }

  compute(k: number, y: Float64Array, delivered: boolean): void {
    const { design, limits, encoder, known } = this.#setup;
    const { periodS, periodNs, sampleNs, latencyNs } = design.instants;
    const sampledAt = k * periodNs + sampleNs;
    const { proportional, integral, derivative, filterS } = this.#law;
    const state = this.#state;
    if (delivered) state[0] = y[this.#signal];
    const error = this.#reference(sampledAt) - state[0];
    state[3] = (filterS * state[3] - derivative * (state[0] - state[1])) / (filterS + periodS);
    state[1] = state[0];
    let v = proportional * error + state[2] + state[3];
    if (known) {
      known.feedforward(sampledAt + latencyNs, this.#feedforward);
      v += this.#feedforward[0];
    }
    const before = this.plan[0];
    const u = limitCommand(limits, 0, v, before, this.limited);
    this.plan[0] = encoder ? encoder.apply(0, u) : u;
    const step = integral * periodS * error;
    if (!(step * this.limited[0] > 0)) state[2] += step;
  }
}
