/**
 * One interface for every machine. All vectors are deviations from the operating point, in SI units.
 * A plant object is built for one run and may keep scratch space; it holds no clock and no random numbers.
 */
export interface Signal {
  /** Plain name, used in scenarios, series and CSV. */
  name: string;
  /** SI unit, "" when it has none. */
  unit: string;
  /** Letter of the field, for labels: "θ". */
  symbol: string;
  label: string;
}

export interface LinearModel {
  n: number;
  m: number;
  /** n x n, row-major, continuous time. Leaves out Coulomb friction (see Methods). */
  a: Float64Array;
  /** n x m, row-major. */
  b: Float64Array;
}

export interface Output extends Signal {
  /** Row over the states, length n. */
  c: Float64Array;
  /** Row over the inputs, length m. */
  d: Float64Array;
}

export interface Plant {
  readonly n: number;
  readonly m: number;
  readonly states: readonly Signal[];
  readonly inputs: readonly Signal[];
  /** Everything that a sensor can measure: the states first, in order, then further outputs. */
  readonly outputs: readonly Output[];
  /** Where pushes act; an impulse has the unit times seconds. */
  readonly channels: readonly Signal[];
  /** dx (n) from state x (n), plant input u (m) and push d (one per channel). x may be longer than n. */
  derivative(dx: Float64Array, x: Float64Array, u: Float64Array, d: Float64Array): void;
  /** Applies an impulse of the given size on a channel to x, in place. */
  impulse(x: Float64Array, channel: number, size: number): void;
  /** At the operating point, of the parameters as they are now. */
  linear(): LinearModel;
  /** Names of the parameters that a change in mid-run may set. */
  readonly changeable: readonly string[];
  /** Sets a parameter of the true machine. Throws RangeError for a name that is not changeable. */
  change(parameter: string, value: number): void;
  /** Extra friction force of a brake on the driven axis, N; plants without one leave it out. */
  brake?(forceN: number): void;
  /** A state that ends the run when it leaves ± this value (track end); null: none. */
  readonly end: { state: number; at: number; label: string } | null;
}
