/** The library has no types of its own. Version 1.1.0, pinned: the stages _k1 to _k6 are read for the continuous extension. */
declare module "ode45-cash-karp" {
  export interface Integrator {
    y: Float64Array;
    t: number;
    dt: number;
    step(): boolean;
    readonly _k1: Float64Array;
    readonly _k3: Float64Array;
    readonly _k4: Float64Array;
    readonly _k6: Float64Array;
  }
  export interface Options {
    tol: number;
    errorScaleFunction(i: number, dt: number, y: number, dydt: number): number;
    errorPostFunction(error: number): number;
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
