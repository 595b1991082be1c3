/** From a scenario's loop to the numbers that the loop logic works with. */
import { add, diagonal, fromRows, identity, maxAbs, multiply } from "#shared/math/matrix.ts";
import { createPlant } from "#shared/plants/registry.ts";
import type { Issue } from "#shared/scenario/issues.ts";
import type { Loop, Scenario } from "#shared/scenario/schema.ts";
import { delayedHold, type Hold, processCovariance, zeroOrderHold } from "./discretise.ts";
import { filterGain, lqr, stationaryCovariance } from "./riccati.ts";

/** Instants of the loop within its round; the same in every round. Whole nanoseconds, and seconds for the formulas. */
export interface LoopInstants {
  periodNs: number;
  sampleNs: number;
  latencyNs: number;
  periodS: number;
  /** Whole periods in the latency. */
  wholePeriods: number;
  /** Latency beyond the whole periods, 0 <= restS < periodS. */
  restS: number;
}

/** What the controller believes of the machine: its linear model over the spans that the loop needs. */
export interface ControllerModel {
  n: number;
  m: number;
  /** Over one period, input constant. */
  period: Hold;
  /** From one sampling instant to the next: gamma1 acts before the acting instant in between, gamma0 after it. */
  between: { gamma0: Float64Array; gamma1: Float64Array };
  /** Over restS. */
  rest: Hold;
  /** Over sampleAtS, from t = 0 to the first sampling. */
  start: Hold;
}

export interface KalmanDesign {
  /** Stationary filter gain, n x p; null when the covariance is carried along. */
  gain: Float64Array | null;
  /** n x n over one period, and over sampleAtS. */
  processPeriod: Float64Array;
  processStart: Float64Array;
  /** p x p */
  sensor: Float64Array;
}

export interface LoopDesign {
  instants: LoopInstants;
  model: ControllerModel;
  /** p x n and p x m: what the measurement shows of state and input. */
  c: Float64Array;
  d: Float64Array;
  p: number;
  /** Where every measured signal is one state and nothing else: the state's index for each signal; null otherwise. */
  selected: Int32Array | null;
  /** Present for lqr and gain; k: m x n, ki: m x ni, integrated: indices of states. */
  feedback: { k: Float64Array; ki: Float64Array; ni: number; ci: Float64Array } | null;
  kalman: KalmanDesign | null;
  /** No filter: all states are measured, and a delivered measurement is the estimate. */
  direct: boolean;
}

/** Signals that a loop can refer to, by name: states first, then outputs. */
export function measuredRows(loop: Loop): { c: Float64Array; d: Float64Array; missing: number[] } {
  const plant = createPlant(loop.plant);
  const missing: number[] = [];
  const c: number[] = [];
  const d: number[] = [];
  loop.sensor.signals.forEach(({ signal }, i) => {
    const output = plant.outputs.find((candidate) => candidate.name === signal);
    if (!output) missing.push(i);
    c.push(...(output?.c ?? new Float64Array(plant.n)));
    d.push(...(output?.d ?? new Float64Array(plant.m)));
  });
  return { c: Float64Array.from(c), d: Float64Array.from(d), missing };
}

function selectedStates(c: Float64Array, d: Float64Array, n: number, m: number, p: number): Int32Array | null {
  const selected = new Int32Array(p);
  for (let i = 0; i < p; i++) {
    const row = c.subarray(i * n, (i + 1) * n);
    selected[i] = row.indexOf(1);
    if (row.some((value, j) => value !== (j === selected[i] ? 1 : 0)) || d.subarray(i * m, (i + 1) * m).some((value) => value !== 0)) return null;
  }
  return selected;
}

function controllerModel(a: Float64Array, b: Float64Array, n: number, m: number, instants: LoopInstants): ControllerModel {
  const hold = (h: number): Hold => (h > 0 ? zeroOrderHold(a, b, n, m, h) : { phi: identity(n), gamma: new Float64Array(n * m) });
  const period = hold(instants.periodS);
  const rest = hold(instants.restS);
  // Without a rest the acting instant falls on the sampling instant, and nothing acts before it.
  const between =
    instants.restS > 0 ? delayedHold(a, b, n, m, instants.periodS, instants.restS) : { gamma0: period.gamma, gamma1: new Float64Array(n * m) };
  return { n, m, period, between, rest, start: hold(instants.sampleNs / 1e9) };
}

/** Growth over one round beyond this would overflow as soon as it is multiplied by anything. */
const GROWTH = 1e100;

/** Largest modulus among the eigenvalues is clearly above 1: the powers of A grow without bound. */
function grows(a: Float64Array, n: number): boolean {
  let power = a;
  for (let i = 0; i < 16; i++) {
    power = multiply(power, power, n, n, n);
    const size = maxAbs(power);
    if (!(size < 1e12)) return true;
    if (size < 1e-6) return false;
  }
  return false;
}

/**
 * Designs gains and filter of a loop. Needs a scenario whose shape was checked; gives issues instead of throwing when the
 * weights or noise figures admit no gain.
 */
export function designLoop(scenario: Scenario, ns: { period: number; sample: number; act: number }): { design: LoopDesign | null; issues: Issue[] } {
  const loop = scenario.loops[0];
  const periodS = ns.period / 1e9;
  const plant = createPlant(loop.plant);
  const { n, m, a, b } = plant.linear();
  const issues: Issue[] = [];
  const fail = (path: string, message: string) => issues.push({ code: "no-gain", path, message });

  const latencyNs = ns.act - ns.sample;
  const wholePeriods = Math.floor(latencyNs / ns.period);
  const restS = (latencyNs - wholePeriods * ns.period) / 1e9;
  const instants: LoopInstants = { periodNs: ns.period, sampleNs: ns.sample, latencyNs, periodS, wholePeriods, restS };
  const model = controllerModel(a, b, n, m, instants);
  if (![model.period, model.rest, model.start].every(({ phi, gamma }) => [...phi, ...gamma].every((value) => Math.abs(value) < GROWTH))) {
    fail(
      "round.periodS",
      "Within one round the machine's motion grows beyond what can be computed with. Shorten the period, or look at the machine's matrices.",
    );
    return { design: null, issues };
  }
  const { c, d } = measuredRows(loop);
  const p = loop.sensor.signals.length;

  const { law } = loop.controller;
  let feedback: LoopDesign["feedback"] = null;
  if (law.type !== "pid") {
    const ni = law.integral.length;
    const ci = new Float64Array(ni * n);
    law.integral.forEach(({ signal }, i) => {
      const output = plant.outputs.find((candidate) => candidate.name === signal);
      if (output) ci.set(output.c, i * n);
    });
    if (law.type === "gain") {
      const ki = new Float64Array(m * ni);
      law.integral.forEach(({ gain }, i) => {
        for (let j = 0; j < m; j++) ki[j * ni + i] = gain[j];
      });
      feedback = { k: fromRows(law.gain), ki, ni, ci };
    } else {
      const size = n + ni;
      const phi = identity(size);
      const gamma = new Float64Array(size * m);
      for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) phi[i * size + j] = model.period.phi[i * n + j];
      for (let i = 0; i < ni; i++) for (let j = 0; j < n; j++) phi[(n + i) * size + j] = periodS * ci[i * n + j];
      gamma.set(model.period.gamma);
      const q = diagonal([...law.stateWeights, ...law.integral.map(({ weight }) => weight)]);
      const gain = lqr(phi, gamma, q, diagonal(law.inputWeights), size, m);
      if (!gain || gain.some((value) => !Number.isFinite(value)) || grows(add(phi, multiply(gamma, gain, size, m, size), -1), size)) {
        fail(
          "loops[0].controller.law.stateWeights",
          "These weights admit no stabilising gain: some motion that grows by itself is weighted with 0 or cannot be reached by the input. Weights above 0 on the states help; an integral needs a signal that the input can move to rest.",
        );
      } else {
        const k = new Float64Array(m * n);
        const ki = new Float64Array(m * ni);
        for (let j = 0; j < m; j++) {
          for (let i = 0; i < n; i++) k[j * n + i] = gain[j * size + i];
          for (let i = 0; i < ni; i++) ki[j * ni + i] = gain[j * size + n + i];
        }
        feedback = { k, ki, ni, ci };
      }
    }
  }

  const { estimator } = loop.controller;
  let kalman: KalmanDesign | null = null;
  const selected = selectedStates(c, d, n, m, p);
  const direct = law.type !== "pid" && estimator.type === "direct";
  if (law.type !== "pid" && estimator.type === "kalman") {
    const intensity = diagonal(estimator.processNoise.map((std) => std * std));
    const sensor = diagonal(estimator.measurementNoise.map((std) => std * std));
    const processPeriod = processCovariance(a, intensity, n, periodS);
    const processStart = processCovariance(a, intensity, n, ns.sample / 1e9);
    let gain: Float64Array | null = null;
    if (estimator.update === "stationary") {
      const prior = stationaryCovariance(model.period.phi, c, processPeriod, sensor, n, p);
      gain = prior && filterGain(prior, c, sensor, n, p);
      const error = gain && add(model.period.phi, multiply(multiply(model.period.phi, gain, n, n, p), c, n, p, n), -1);
      if (!gain || !error || grows(error, n)) {
        gain = null;
        fail(
          "loops[0].controller.estimator.processNoise",
          "The stationary Kalman filter does not converge with these noise figures: a state that grows by itself needs process noise above 0, and the measured signals have to show it.",
        );
      }
    }
    kalman = { gain, processPeriod, processStart, sensor };
  }
  return { design: issues.length === 0 ? { instants, model, c, d, p, selected, feedback, kalman, direct } : null, issues };
}
