/**
 * The Markov jump linear system of a loop (model 5), read off the loop logic itself: the stages of shared/control/loop.ts are fed
 * by the plant's exact discretisation and applied to unit vectors. A step runs from one sampling instant to the next, so that
 * its command is the one that acts after the sampling; or from just before one acting instant to the next.
 */
import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { designLoop } from "#shared/control/design.ts";
import { zeroOrderHold } from "#shared/control/discretise.ts";
import { LoopLogic } from "#shared/control/loop.ts";
import { roundTiming } from "#shared/network/round.ts";
import { createPlant } from "#shared/plants/registry.ts";
import { type ScenarioInput, scenarioSchema } from "#shared/scenario/schema.ts";

export interface JumpModel {
  /** Length of z: plant, then all memory of the loop. */
  size: number;
  /** z after one round, with that measurement and the command that acts in it delivered or lost. */
  step(z: ArrayLike<number>, measurement: boolean, command: boolean): Float64Array;
  /** The matrix of a loss pattern, size x size. */
  matrix(measurement: boolean, command: boolean): Matrix;
}

export function jumpModel(input: ScenarioInput, from: "sampling" | "acting" = "sampling"): JumpModel {
  const scenario = scenarioSchema.parse(input);
  const timing = roundTiming(scenario);
  if (timing.issues.length > 0) throw new Error(timing.issues[0].message);
  const { design, issues } = designLoop(scenario, timing.ns.loops[0]);
  if (!design) throw new Error(issues[0].message);
  const { n, m } = design.model;
  const { restS } = design.instants;
  const { a, b } = createPlant(scenario.loops[0].plant).linear();
  const period = timing.periodS;
  const first = restS > 0 ? restS : period;
  const before = zeroOrderHold(a, b, n, m, first);
  const after = zeroOrderHold(a, b, n, m, period - first);
  const logic = new LoopLogic(scenario, design, new Float64Array(n), { linear: true });
  const noise = new Float64Array(design.p);
  const x = new Float64Array(n);
  const next = new Float64Array(n);
  const parts = [x, ...logic.memory];
  const size = parts.reduce((sum, part) => sum + part.length, 0);

  const carry = (hold: { phi: Float64Array; gamma: Float64Array }) => {
    for (let i = 0; i < n; i++) {
      next[i] = 0;
      for (let j = 0; j < n; j++) next[i] += hold.phi[i * n + j] * x[j];
      for (let j = 0; j < m; j++) next[i] += hold.gamma[i * m + j] * logic.actuator.inForce[j];
    }
    x.set(next);
  };
  const step = (z: ArrayLike<number>, measurement: boolean, command: boolean) => {
    let at = 0;
    for (const part of parts) for (let i = 0; i < part.length; i++) part[i] = z[at++];
    if (from === "acting") {
      logic.act(command, true);
      carry(after);
    }
    logic.measure(x, logic.actuator.inForce, noise, 0);
    // round 0 begins at t = 0 instead of the sampling instant before it; any later round is like any other
    logic.compute(1, measurement);
    carry(before);
    if (from === "sampling") {
      logic.act(command, true);
      carry(after);
    }
    return Float64Array.from(parts.flatMap((part) => Array.from(part)));
  };
  return {
    size,
    step,
    matrix(measurement, command) {
      const out = Matrix.zeros(size, size);
      for (let j = 0; j < size; j++) {
        const unit = new Float64Array(size);
        unit[j] = 1;
        out.setColumn(j, Array.from(step(unit, measurement, command)));
      }
      return out;
    },
  };
}

/** Probability of [measurement delivered, command delivered]. */
export type Joint = (measurement: boolean, command: boolean) => number;

const BOTH = [true, false];

/** Independent losses with those probabilities. */
export const independent =
  (measurementLost: number, commandLost: number): Joint =>
  (measurement, command) =>
    (measurement ? 1 - measurementLost : measurementLost) * (command ? 1 - commandLost : commandLost);

/**
 * Spectral radius of P -> sum of q_r A_r P A_r' on symmetric matrices (half-vectorised), by dense eigenvalues: the loop is
 * mean-square stable exactly when it is below 1 (Costa, Fragoso and Marques 2005, Theorem 3.9).
 */
export function secondMomentRadius(model: JumpModel, probability: Joint): number {
  const n = model.size;
  const operator = Matrix.zeros((n * (n + 1)) / 2, (n * (n + 1)) / 2);
  for (const measurement of BOTH) {
    for (const command of BOTH) {
      const q = probability(measurement, command);
      if (q === 0) continue;
      const a = model.matrix(measurement, command);
      let column = 0;
      for (let i = 0; i < n; i++) {
        for (let j = i; j < n; j++, column++) {
          // image of the symmetric unit matrix with ones at (i, j) and (j, i)
          let row = 0;
          for (let r = 0; r < n; r++) {
            for (let s = r; s < n; s++, row++) {
              let value = a.get(r, i) * a.get(s, j);
              if (i !== j) value += a.get(r, j) * a.get(s, i);
              operator.set(row, column, operator.get(row, column) + q * value);
            }
          }
        }
      }
    }
  }
  const values = new EigenvalueDecomposition(operator, { assumeSymmetric: false });
  return Math.max(...values.realEigenvalues.map((re, i) => Math.hypot(re, values.imaginaryEigenvalues[i])));
}
