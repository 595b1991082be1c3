/**
 * The loop logic, once (model 5): stages measure, compute and act, fed by the nonlinear simulation and, with limits,
 * encoding, references and reaction to silence off, by the analysis. Order within a round, from one sampling instant to the
 * next: measure(k), compute(k), act(k - actAge).
 */
import { shiftIn } from "#shared/math/matrix.ts";
import { createPlant } from "#shared/plants/registry.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { ActuatorNode } from "./actuator.ts";
import { type Controller, type ControllerSetup, type KnownAhead, StateFeedback } from "./controller.ts";
import type { LoopDesign } from "./design.ts";
import { Encoder } from "./encoding.ts";
import { Pid } from "./pid.ts";
import { profileAt } from "./profile.ts";

export class LoopLogic {
  readonly design: LoopDesign;
  readonly controller: Controller & { readonly memory: readonly Float64Array[] };
  readonly actuator: ActuatorNode;
  /** The last measurement as sent, p. */
  readonly measured: Float64Array;
  /** The command that acts next was computed this many rounds before the newest one. */
  readonly actAge: number;
  /** Commands computed and not yet acting: row 0 is the newest. (actAge + 1) x planLength x m. */
  readonly underWay: Float64Array;
  readonly #encoder: Encoder | null;
  readonly #row: number;

  /** linear: leave out saturation, rate limit, anti-windup, encoding, references and reaction to silence. */
  constructor(scenario: Scenario, design: LoopDesign, estimate: ArrayLike<number>, options: { linear: boolean }) {
    const loop = scenario.loops[0];
    const { m } = design.model;
    const { linear } = options;
    const { onLoss, silence } = loop.actuator;
    const planLength = onLoss.policy === "plan" ? onLoss.length : 1;
    const holdAtEnd = onLoss.policy === "hold" || (onLoss.policy === "plan" && onLoss.end === "hold");
    const limits = loop.controller.limits ?? loop.actuator.inputs;
    const setup: ControllerSetup = {
      design,
      limits: linear
        ? null
        : {
            lo: Float64Array.from(limits, (limit) => limit.lo),
            hi: Float64Array.from(limits, (limit) => limit.hi),
            step: Float64Array.from(limits, (limit) =>
              limit.ratePerS === null ? Number.POSITIVE_INFINITY : limit.ratePerS * design.instants.periodS,
            ),
          },
      encoder: linear ? null : new Encoder(loop.actuator.inputs.map((input) => input.encoding)),
      known: linear ? null : knownAhead(scenario),
      acknowledgement: loop.controller.placement === "actuator" ? "at-once" : loop.controller.acknowledgement,
      planLength,
    };
    this.design = design;
    const { law } = loop.controller;
    if (law.type === "pid") {
      const reference = loop.references.find(({ signal }) => signal === law.signal);
      this.controller = new Pid(
        law,
        setup,
        loop.sensor.signals.findIndex(({ signal }) => signal === law.signal),
        reference && !linear ? profileAt(reference.profile) : () => 0,
      );
    } else {
      this.controller = new StateFeedback(setup, estimate);
    }
    this.actuator = new ActuatorNode(
      m,
      planLength,
      holdAtEnd,
      linear || !silence ? null : { afterLost: silence.afterLost, resumeAfter: silence.resumeAfter ?? 0 },
    );
    this.measured = new Float64Array(design.p);
    this.#encoder = linear ? null : new Encoder(loop.sensor.signals.map((signal) => signal.encoding));
    const { wholePeriods, restS } = design.instants;
    this.actAge = restS > 0 ? wholePeriods : wholePeriods - 1;
    this.#row = planLength * m;
    this.underWay = new Float64Array((this.actAge + 1) * this.#row);
  }

  /** All memory of the loop besides the plant, for an analysis. */
  get memory(): readonly Float64Array[] {
    return [...this.controller.memory, ...this.actuator.memory, this.underWay];
  }

  /** Step 1. x (n) true state and u (m) the plant's input at the sampling instant, v (p at vOffset) the sensor noise. */
  measure(x: Float64Array, u: Float64Array, v: Float64Array, vOffset: number): void {
    const { c, d, p, model, selected } = this.design;
    const { n, m } = model;
    if (selected) {
      for (let i = 0; i < p; i++) {
        const y = x[selected[i]] + v[vOffset + i];
        this.measured[i] = this.#encoder ? this.#encoder.apply(i, y) : y;
      }
      return;
    }
    for (let i = 0; i < p; i++) {
      let y = v[vOffset + i];
      for (let j = 0; j < n; j++) y += c[i * n + j] * x[j];
      for (let j = 0; j < m; j++) y += d[i * m + j] * u[j];
      this.measured[i] = this.#encoder ? this.#encoder.apply(i, y) : y;
    }
  }

  /** Steps 2 to 4 of round k; the command is under way afterwards. inForce (m): the input in force at the sampling instant. */
  compute(k: number, measurementDelivered: boolean, inForce: Float64Array = this.actuator.inForce): void {
    this.controller.compute(k, this.measured, measurementDelivered, inForce);
    shiftIn(this.underWay, this.controller.plan, 0, this.#row);
  }

  /** Steps 5 and 6 for the command computed actAge rounds before the newest one. */
  act(commandDelivered: boolean, counts: boolean): "begins" | "ends" | null {
    return this.actuator.act(this.underWay, this.actAge * this.#row, commandDelivered, counts);
  }
}

/** References and feedforward by name; null when there are none. */
function knownAhead(scenario: Scenario): KnownAhead | null {
  const loop = scenario.loops[0];
  if (loop.references.length === 0 && loop.feedforward.length === 0) return null;
  const plant = createPlant(loop.plant);
  const { law } = loop.controller;
  const integrals = law.type === "pid" ? [] : law.integral;
  type Entry = { index: number; at: (tNs: number) => number };
  const states: Entry[] = loop.references.map(({ signal, profile }) => ({
    index: plant.states.findIndex(({ name }) => name === signal),
    at: profileAt(profile),
  }));
  const inputs: Entry[] = loop.feedforward.map(({ signal, profile }) => ({
    index: plant.inputs.findIndex(({ name }) => name === signal),
    at: profileAt(profile),
  }));
  const integrated: Entry[] = integrals.flatMap(({ signal }, index) => {
    const reference = loop.references.find((candidate) => candidate.signal === signal);
    return reference ? [{ index, at: profileAt(reference.profile) }] : [];
  });
  const fill = (entries: readonly Entry[]) => (tNs: number, out: Float64Array) => {
    out.fill(0);
    for (const entry of entries) if (entry.index >= 0) out[entry.index] = entry.at(tNs);
  };
  return { state: fill(states), feedforward: fill(inputs), integrated: fill(integrated) };
}
