/** The library has no types of its own. Version 1.1.0, pinned: its stages and update are called one by one. */
declare module "ode45-cash-karp" {
  export interface Integrator {
    y: Float64Array;
    t: number;
    _calculateK1(): void;
    _calculateKs(dt: number): void;
    _update(dt: number): void;
    readonly _k1: Float64Array;
    readonly _k3: Float64Array;
    readonly _k4: Float64Array;
    readonly _k5: Float64Array;
    readonly _k6: Float64Array;
  }
  export interface Options {
    verbose: boolean;
  }
  export default function integrator(
    y0: Float64Array,
    derivative: (dydt: Float64Array, y: Float64Array, t: number) => void,
    t0: number,
    dt0: number,
    options: Options,
  ): Integrator;
}
