/**
 * One simulation: the nonlinear plant between events, the loop logic at them. Instants are whole nanoseconds. At the same
 * instant: parameter change, push, acting, sampling. Segment ends do not depend on what is recorded.
 */
import type { LoopDesign } from "#shared/control/design.ts";
import { LoopLogic } from "#shared/control/loop.ts";
import { type Deliveries, drawDeliveries } from "#shared/network/delivery.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import { toNs } from "#shared/network/schedule.ts";
import type { Plant } from "#shared/plants/plant.ts";
import { createPlant } from "#shared/plants/registry.ts";
import { roundsOf, samplingsOf } from "#shared/scenario/rounds.ts";
import type { Loop, Scenario } from "#shared/scenario/schema.ts";
import { assemble } from "./assemble.ts";
import { Disturbance } from "./disturbance.ts";
import { Drive } from "./drive.ts";
import { Integrator } from "./integrator.ts";
import { drawNoise } from "./noise.ts";
import { POINTS_PER_ROUND, Recorder, Rows } from "./recorder.ts";
import type { RunEvent, RunResult } from "./result.ts";

/** A state beyond this is taken as diverged, in its SI unit. */
const DIVERGED = 1e9;
const NEVER = Number.POSITIVE_INFINITY;

/** What a run leaves behind, before figures and verdicts. */
export interface Raw {
  scenario: Scenario;
  timing: RoundTiming;
  design: LoopDesign;
  plant: Plant;
  seed: number;
  rounds: number;
  /** How often the loop samples: once a round, or less often. */
  samplings: number;
  recorder: Recorder;
  /** Rows of t, x (n), u (m) at events off the grid, and just before impulses. */
  extra: Rows;
  /** By round of the network. */
  deliveries: Deliveries;
  measurement: Float64Array;
  noise: Float64Array;
  estimate: Float64Array;
  command: Float64Array;
  sampled: number;
  saturatedNs: number;
  costSum: number;
  silentReactions: number;
  endedNs: number;
  ended: RunResult["ended"];
  events: RunEvent[];
}

export class Run {
  /** Rounds of the whole run. */
  readonly rounds: number;
  readonly #loop: Loop;
  readonly #plant: Plant;
  readonly #logic: LoopLogic;
  readonly #drive: Drive;
  readonly #disturbance: Disturbance;
  readonly #integrator: Integrator;
  readonly #raw: Raw;
  readonly #noise: Float64Array;
  readonly #u: Float64Array;
  readonly #zeroSlope: Float64Array;
  readonly #d: Float64Array;
  readonly #lagged: boolean;
  readonly #changes: { atNs: number; parameter: string; value: number }[];
  readonly #joinsNs: number;
  /** Start of the command's slot in its round. */
  readonly #slotNs: number;
  /** The network's round, and the loop's own instants. */
  readonly #roundNs: number;
  readonly #ns: RoundTiming["ns"]["loops"][number];
  readonly #samplings: number;
  readonly #everyRounds: number;
  readonly #firstRound: number;
  readonly #endNs: number;
  readonly #commandDelay: number;
  readonly #weights: { states: readonly number[]; inputs: readonly number[] } | null;
  #nowNs = 0;
  #nextSample = 0;
  #nextAct = 0;
  #nextChange = 0;
  #nextImpulse = 0;
  #pushing = false;
  #segmentNs = 0;
  #done = false;
  readonly #onStep: () => boolean;

  /** The scenario has passed checkScenario; design is its design. */
  constructor(scenario: Scenario, timing: RoundTiming, design: LoopDesign, seed: number) {
    const loop = scenario.loops[0];
    const plant = createPlant(loop.plant);
    const { n, m } = plant;
    const { p } = design;
    const rounds = roundsOf(scenario);
    const endNs = toNs(scenario.run.durationS);
    this.rounds = rounds;
    this.#loop = loop;
    this.#plant = plant;
    const { everyRounds, firstRound, commandDelay } = timing.loops[0];
    const samplings = samplingsOf(rounds, timing.loops[0]);
    this.#roundNs = timing.ns.period;
    this.#ns = timing.ns.loops[0];
    this.#samplings = samplings;
    this.#everyRounds = everyRounds;
    this.#firstRound = firstRound;
    this.#endNs = endNs;
    this.#commandDelay = commandDelay;
    this.#joinsNs = toNs(loop.start.networkJoinsAtS);
    this.#slotNs = timing.ns.slots.find(({ id }) => id === `${loop.id}/command`)?.start ?? 0;
    this.#lagged = loop.actuator.lagS > 0;
    const start = loop.start.state ?? new Array<number>(n).fill(0);
    this.#logic = new LoopLogic(scenario, design, loop.start.estimate ?? start, { linear: false });
    this.#drive = new Drive(loop);
    this.#disturbance = new Disturbance(
      scenario,
      plant.channels.map(({ name }) => name),
      seed,
    );
    this.#changes = scenario.changes.map((change) => ({ ...change, atNs: toNs(change.atS) })).sort((a, b) => a.atNs - b.atNs);
    this.#u = new Float64Array(m);
    this.#zeroSlope = new Float64Array(m);
    this.#d = new Float64Array(plant.channels.length);
    const width = this.#lagged ? n + m : n;
    const { absoluteTolerance, relativeTolerance } = scenario.run;
    this.#integrator = new Integrator(width, this.#derivative(loop.actuator.lagS), timing.ns.period / 2e9, absoluteTolerance, relativeTolerance);
    this.#integrator.y.set(start);
    const { law } = loop.controller;
    this.#weights = law.type === "lqr" ? { states: law.stateWeights, inputs: law.inputWeights } : null;
    this.#noise = drawNoise(loop, samplings, p, seed);
    this.#raw = {
      scenario,
      timing,
      design,
      plant,
      seed,
      rounds,
      samplings,
      recorder: new Recorder(n, m, timing.ns.period, endNs),
      extra: new Rows(1 + n + m),
      deliveries: drawDeliveries(scenario, timing, rounds, seed),
      measurement: new Float64Array(samplings * p),
      noise: this.#noise,
      estimate: new Float64Array(samplings * this.#logic.controller.estimate.length),
      command: new Float64Array(samplings * m),
      sampled: 0,
      saturatedNs: 0,
      costSum: 0,
      silentReactions: 0,
      endedNs: endNs,
      ended: "complete",
      events: [],
    };
    this.#onStep = this.#observer();
  }

  /** Rounds begun so far. */
  get round(): number {
    return Math.min(this.rounds, this.#firstRound + this.#nextSample * this.#everyRounds);
  }

  /** Simulates about this many further rounds, up to the next event; true when the run is over. */
  advance(rounds: number): boolean {
    const until = Math.min(this.#endNs, this.#nowNs + rounds * this.#roundNs);
    while (!this.#done && this.#nowNs < until) this.#segment();
    if (!this.#done && this.#nowNs >= this.#endNs) {
      this.#done = true;
      this.#drive.advance(this.#endNs);
      this.#raw.recorder.last(this.#endNs / 1e9, this.#integrator.y, this.#felt(), this.#lagged);
    }
    return this.#done;
  }

  /** Figures, verdicts and series. Call it when advance has returned true. */
  result(): RunResult {
    return assemble(this.#raw);
  }

  #derivative(lagS: number): (dy: Float64Array, y: Float64Array, t: number) => void {
    const plant = this.#plant;
    const drive = this.#drive;
    const { n, m } = plant;
    const u = this.#u;
    const d = this.#d;
    if (lagS > 0) {
      return (dy, y, t) => {
        const into = t - this.#segmentNs / 1e9;
        for (let j = 0; j < m; j++) {
          u[j] = y[n + j];
          dy[n + j] = (drive.value[j] + drive.slope[j] * into - y[n + j]) / lagS;
        }
        if (this.#pushing) this.#disturbance.fill(d, t, this.#segmentNs);
        plant.derivative(dy, y, u, d);
      };
    }
    // The right-hand side is most of the cost of a run: nothing is looked up that this scenario cannot need.
    if (!drive.canSlope && !this.#disturbance.canPush) return (dy, y) => plant.derivative(dy, y, u, d);
    return (dy, y, t) => {
      if (drive.sloping) {
        const into = t - this.#segmentNs / 1e9;
        for (let j = 0; j < m; j++) u[j] = drive.value[j] + drive.slope[j] * into;
      }
      if (this.#pushing) this.#disturbance.fill(d, t, this.#segmentNs);
      plant.derivative(dy, y, u, d);
    };
  }

  #observer(): () => boolean {
    const integrator = this.#integrator;
    const { recorder } = this.#raw;
    const { end } = this.#plant;
    const { y } = integrator;
    const n = this.#plant.n;
    const guard = end ? end.state : -1;
    const guardAt = end ? end.at : NEVER;
    return () => {
      const slope = this.#drive.sloping ? this.#drive.slope : this.#zeroSlope;
      const inside = recorder.step(integrator, this.#drive.value, slope, this.#segmentNs / 1e9, this.#lagged, guard, guardAt);
      if (!inside || (guard >= 0 && Math.abs(y[guard]) >= guardAt)) return false;
      for (let i = 0; i < n; i++) if (!(Math.abs(y[i]) <= DIVERGED)) return false;
      return true;
    };
  }

  /** Everything up to the next event, then the events at that instant. */
  #segment(): void {
    if (this.#nowNs === 0 && this.#nextSample === 0) this.#events();
    if (this.#done) return;
    const sampleNs = this.#nextSample < this.#samplings ? this.#nextSample * this.#ns.period + this.#ns.sample : NEVER;
    const actNs = this.#nextAct * this.#ns.period + this.#ns.act;
    const changeNs = this.#nextChange < this.#changes.length ? this.#changes[this.#nextChange].atNs : NEVER;
    const impulseNs = this.#nextImpulse < this.#disturbance.impulses.length ? this.#disturbance.impulses[this.#nextImpulse].atNs : NEVER;
    const pushNs = this.#disturbance.nextBreak(this.#nowNs);
    const next = Math.min(sampleNs, actNs, changeNs, impulseNs, pushNs, this.#drive.nextNs, this.#endNs);
    this.#integrate(next);
    if (this.#done) return;
    this.#nowNs = next;
    if (next < this.#endNs) this.#events();
  }

  #integrate(nextNs: number): void {
    const raw = this.#raw;
    const from = this.#nowNs;
    this.#segmentNs = from;
    const pushed = this.#pushing;
    this.#pushing = this.#disturbance.begin(from);
    if (pushed && !this.#pushing) this.#d.fill(0);
    this.#felt();
    const outcome = this.#integrator.advance(from / 1e9, nextNs / 1e9, this.#onStep);
    if (outcome !== "done") {
      this.#stop(outcome === "stiff");
      if (this.#drive.saturated) raw.saturatedNs += raw.endedNs - from;
      return;
    }
    if (this.#drive.saturated) raw.saturatedNs += nextNs - from;
  }

  /** The run ends inside the integrator's last step: at the track's end, by divergence, or because it is too stiff. */
  #stop(stiff: boolean): void {
    const raw = this.#raw;
    const { end } = this.#plant;
    const { y, stepFrom, stepLength } = this.#integrator;
    this.#done = true;
    if (!stiff && end) {
      const point = new Float64Array(y.length);
      const outside = this.#crossing(end, point);
      if (outside >= 0) {
        raw.endedNs = Math.round((stepFrom + outside * stepLength) * 1e9);
        raw.ended = "track-end";
        this.#observe(raw.endedNs, point);
        raw.events.push({ atS: raw.endedNs / 1e9, kind: "track-end", text: end.label });
        return;
      }
    }
    raw.endedNs = Math.round((stiff ? stepFrom + stepLength : stepFrom) * 1e9);
    raw.ended = "diverged";
    raw.events.push({ atS: raw.endedNs / 1e9, kind: "diverged", text: stiff ? "diverged or too stiff" : "diverged" });
    while (raw.recorder.count > 0 && raw.recorder.t[raw.recorder.count - 1] > raw.endedNs / 1e9) raw.recorder.count--;
  }

  /**
   * The first instant of the last step, to a nanosecond, at which the guarded state is outside, as a fraction of the step;
   * writes the state there to point. Negative when it is never outside.
   */
  #crossing(end: { state: number; at: number }, point: Float64Array): number {
    const { stepFrom, stepLength } = this.#integrator;
    const { t, count } = this.#raw.recorder;
    const leaves = (theta: number): boolean => {
      this.#integrator.interpolate(theta, point);
      return Math.abs(point[end.state]) >= end.at;
    };
    // The recorder stops at the first grid point outside; a crossing after the last grid point shows at the step's end.
    const grid = count < t.length ? (t[count] - stepFrom) / stepLength : 1;
    let outside = grid <= 1 && leaves(grid) ? grid : 1;
    if (!leaves(outside)) return -1;
    let inside = 0;
    if (leaves(0)) outside = 0;
    while ((outside - inside) * stepLength > 1e-9) {
      const middle = (inside + outside) / 2;
      if (leaves(middle)) outside = middle;
      else inside = middle;
    }
    leaves(outside);
    return outside;
  }

  /** Events at #nowNs, in the order that the model gives. */
  #events(): void {
    const now = this.#nowNs;
    const { y } = this.#integrator;
    let eventful = this.#drive.nextNs <= now;
    if (eventful || this.#drive.sloping) this.#drive.advance(now);
    for (let change = this.#changes[this.#nextChange]; change && change.atNs <= now; change = this.#changes[this.#nextChange]) {
      this.#plant.change(change.parameter, change.value);
      this.#nextChange++;
      eventful = true;
    }
    for (
      let impulse = this.#disturbance.impulses[this.#nextImpulse];
      impulse && impulse.atNs <= now;
      impulse = this.#disturbance.impulses[this.#nextImpulse]
    ) {
      this.#observe(now, y);
      this.#plant.impulse(y, impulse.channel, impulse.size);
      this.#nextImpulse++;
      eventful = true;
    }
    if (this.#nextAct * this.#ns.period + this.#ns.act === now) {
      this.#act(now);
      eventful = true;
    }
    if (this.#nextSample < this.#samplings && this.#nextSample * this.#ns.period + this.#ns.sample === now) {
      this.#sample(now);
      eventful = true;
    }
    if (eventful && (now * POINTS_PER_ROUND) % this.#roundNs !== 0) this.#observe(now, y);
  }

  #act(now: number): void {
    const raw = this.#raw;
    const j = this.#nextAct++;
    const travels = this.#firstRound + j * this.#everyRounds + this.#commandDelay;
    // The last command may be due in a round that the run does not have; then it needs no slot, and is not lost.
    const change = this.#logic.act(raw.deliveries.command[travels] !== 0, travels * this.#roundNs + this.#slotNs >= this.#joinsNs);
    const { silence } = this.#loop.actuator;
    if (change === "begins" && silence) {
      raw.silentReactions++;
      raw.events.push({
        atS: now / 1e9,
        kind: "silence",
        text: `silent after ${silence.afterLost} lost, ${silence.reaction === "power-off" ? "power off" : silence.reaction}`,
      });
      if (silence.reaction === "brake") this.#plant.brake?.(silence.brakeN);
      this.#drive.ask(now, this.#logic.actuator.inForce, silence.reaction === "ramp" ? "ramp" : "at-once");
      return;
    }
    if (change === "ends") {
      raw.events.push({ atS: now / 1e9, kind: "resumed", text: "commands act again" });
      if (silence?.reaction === "brake") this.#plant.brake?.(0);
    }
    if (!this.#logic.actuator.silent) this.#drive.ask(now, this.#logic.actuator.inForce, "own-rate");
  }

  #sample(now: number): void {
    const raw = this.#raw;
    const k = this.#nextSample++;
    const { p } = raw.design;
    const { n, m } = this.#plant;
    const { y } = this.#integrator;
    const u = this.#felt();
    if (this.#weights) {
      for (let i = 0; i < n; i++) raw.costSum += this.#weights.states[i] * y[i] * y[i];
      for (let j = 0; j < m; j++) raw.costSum += this.#weights.inputs[j] * u[j] * u[j];
    }
    this.#logic.measure(y, u, this.#noise, k * p);
    // While the drive reacts to silence, what is in force is what the drive does, not what a command asked for.
    this.#logic.compute(
      k,
      raw.deliveries.measurement[this.#firstRound + k * this.#everyRounds] === 1,
      this.#logic.actuator.silent ? this.#drive.value : this.#logic.actuator.inForce,
    );
    const { estimate, plan } = this.#logic.controller;
    if (!allFinite(estimate) || !allFinite(plan)) {
      this.#loseEstimate(now);
      return;
    }
    for (let i = 0; i < p; i++) raw.measurement[k * p + i] = this.#logic.measured[i];
    for (let i = 0; i < estimate.length; i++) raw.estimate[k * estimate.length + i] = estimate[i];
    for (let j = 0; j < m; j++) raw.command[k * m + j] = plan[j];
    raw.sampled = this.#nextSample;
  }

  /** Long without a measurement, an estimate grows as the model does until it is no number any more; the run ends before it. */
  #loseEstimate(now: number): void {
    const raw = this.#raw;
    this.#done = true;
    raw.endedNs = now;
    raw.ended = "diverged";
    raw.events.push({ atS: now / 1e9, kind: "diverged", text: "the controller's estimate diverged" });
    raw.recorder.last(now / 1e9, this.#integrator.y, this.#felt(), this.#lagged);
  }

  /** What the plant feels at the present instant. */
  #felt(): Float64Array {
    const { m, n } = this.#plant;
    for (let j = 0; j < m; j++) this.#u[j] = this.#lagged ? this.#integrator.y[n + j] : this.#drive.value[j];
    return this.#u;
  }

  #observe(nowNs: number, y: Float64Array): void {
    const { n, m } = this.#plant;
    const { data, offset } = this.#raw.extra.next();
    const u = this.#felt();
    data[offset] = nowNs / 1e9;
    for (let i = 0; i < n; i++) data[offset + 1 + i] = y[i];
    for (let j = 0; j < m; j++) data[offset + 1 + n + j] = u[j];
  }
}

function allFinite(values: Float64Array): boolean {
  for (let i = 0; i < values.length; i++) if (!Number.isFinite(values[i])) return false;
  return true;
}
