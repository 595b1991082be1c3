/** A linear plant as the user gives it: dx/dt = A x + B u, y = C x + D u. Model 7. */
import { fromRows } from "#shared/math/matrix.ts";
import type { LinearModel, Output, Plant, Signal } from "./plant.ts";
import type { StateSpaceSpec } from "./schema.ts";

const named = (given: { name: string; unit: string }[] | null, letter: string, length: number): Signal[] =>
  Array.from({ length }, (_, i) => {
    const name = given?.[i]?.name ?? `${letter}${i + 1}`;
    return { name, unit: given?.[i]?.unit ?? "", symbol: name, label: inWords(name) };
  });

/** "armAngle" and "arm_angle" as "Arm angle"; "x1" stays. */
const inWords = (name: string): string => {
  const words = name.replace(/([a-z0-9])([A-Z])/g, "$1 $2").replaceAll("_", " ");
  return words === name ? name : words.charAt(0).toUpperCase() + words.slice(1).toLowerCase();
};

/** Pushes act on each input (added to what the actuator does) and on each state's derivative. */
export class StateSpace implements Plant {
  readonly n: number;
  readonly m: number;
  readonly states: readonly Signal[];
  readonly inputs: readonly Signal[];
  readonly outputs: readonly Output[];
  readonly channels: readonly Signal[];
  readonly changeable: readonly string[] = [];
  readonly end = null;
  readonly #a: Float64Array;
  readonly #b: Float64Array;

  constructor(spec: StateSpaceSpec) {
    this.n = spec.a.length;
    this.m = spec.b[0].length;
    this.#a = fromRows(spec.a);
    this.#b = fromRows(spec.b);
    this.states = named(spec.states, "x", this.n);
    this.inputs = named(spec.inputs, "u", this.m);
    const unit = (i: number) => Float64Array.from({ length: this.n }, (_, j) => (i === j ? 1 : 0));
    const further = spec.c ? named(spec.outputs, "y", spec.c.length) : [];
    this.outputs = [
      ...this.states.map((signal, i) => ({ ...signal, c: unit(i), d: new Float64Array(this.m) })),
      ...further.map((signal, i) => ({
        ...signal,
        c: Float64Array.from(spec.c?.[i] ?? []),
        d: Float64Array.from(spec.d?.[i] ?? new Array(this.m).fill(0)),
      })),
    ];
    this.channels = [
      ...this.inputs.map((signal) => ({ ...signal, label: `on ${signal.name}` })),
      ...this.states.map((signal) => ({ ...signal, unit: signal.unit ? `${signal.unit}/s` : "", label: `on the rate of ${signal.name}` })),
    ];
  }

  derivative(dx: Float64Array, x: Float64Array, u: Float64Array, d: Float64Array): void {
    const { n, m } = this;
    for (let i = 0; i < n; i++) {
      let sum = d[m + i];
      for (let j = 0; j < n; j++) sum += this.#a[i * n + j] * x[j];
      for (let j = 0; j < m; j++) sum += this.#b[i * m + j] * (u[j] + d[j]);
      dx[i] = sum;
    }
  }

  impulse(x: Float64Array, channel: number, size: number): void {
    if (channel >= this.m) x[channel - this.m] += size;
    else for (let i = 0; i < this.n; i++) x[i] += this.#b[i * this.m + channel] * size;
  }

  linear(): LinearModel {
    return { n: this.n, m: this.m, a: this.#a.slice(), b: this.#b.slice() };
  }

  change(parameter: string): void {
    throw new RangeError(`${parameter} cannot change in mid-run`);
  }
}
