/**
 * Pendulum on a cart, upright or hanging (overhead crane): model 7. State (position, angle, velocity, angularVelocity) as
 * deviations; the angle counts from upright, or from hanging, in the same sense of rotation, so that the centre of mass
 * lies at position + l sin(theta) with theta = angle, or pi + angle when hanging.
 */
import { sincos, tanh } from "#shared/math/elementary.ts";
import type { LinearModel, Output, Plant, Signal } from "./plant.ts";
import type { PendulumSpec } from "./schema.ts";

const CHANGEABLE = [
  "cartMassKg",
  "rodMassKg",
  "rodLengthM",
  "rodInertiaKgM2",
  "cartFrictionNsPerM",
  "pivotFrictionNmsPerRad",
  "coulombFrictionN",
] as const;
type Changeable = (typeof CHANGEABLE)[number];

function signals(hanging: boolean): Signal[] {
  const body = hanging ? "Trolley" : "Cart";
  return [
    { name: "position", unit: "m", symbol: "x", label: hanging ? "Trolley position" : "Position" },
    { name: "angle", unit: "rad", symbol: "θ", label: hanging ? "Swing angle" : "Angle" },
    { name: "velocity", unit: "m/s", symbol: "ẋ", label: `${body} speed` },
    { name: "angularVelocity", unit: "rad/s", symbol: "θ̇", label: hanging ? "Swing rate" : "Angular speed" },
  ];
}

export class Pendulum implements Plant {
  readonly n = 4;
  readonly m = 1;
  readonly states: readonly Signal[];
  readonly inputs: readonly Signal[] = [{ name: "force", unit: "N", symbol: "F", label: "Force" }];
  readonly outputs: readonly Output[];
  readonly channels: readonly Signal[];
  readonly changeable = CHANGEABLE;
  readonly end: Plant["end"];
  readonly #spec: PendulumSpec;
  /** cos(theta) = sign cos(angle): 1 upright, -1 hanging. */
  readonly #sign: number;
  readonly #trig = new Float64Array(2);
  #brakeN = 0;
  // Kept ready for the right-hand side; see #prepare.
  #totalMass = 0;
  #ml = 0;
  #inertia = 0;
  #mgl = 0;
  #b = 0;
  #c = 0;
  #coulomb = 0;
  #perSpeed = 0;

  constructor(spec: PendulumSpec) {
    this.#spec = { ...spec };
    const hanging = spec.rest === "hanging";
    this.#sign = hanging ? -1 : 1;
    this.states = signals(hanging);
    this.outputs = this.states.map((signal, i) => ({
      ...signal,
      c: Float64Array.from({ length: 4 }, (_, j) => (i === j ? 1 : 0)),
      d: new Float64Array(1),
    }));
    this.channels = [
      { name: "cart", unit: "N", symbol: "F", label: hanging ? "on the trolley" : "on the cart" },
      { name: "pivot", unit: "N m", symbol: "M", label: hanging ? "on the load, about the trolley" : "on the rod, about its pivot" },
    ];
    this.end = spec.halfTrackM === null ? null : { state: 0, at: spec.halfTrackM, label: "end of the track" };
    this.#prepare();
  }

  #prepare(): void {
    const { cartMassKg, rodMassKg, rodLengthM, rodInertiaKgM2, gravityMps2 } = this.#spec;
    this.#totalMass = cartMassKg + rodMassKg;
    this.#ml = rodMassKg * rodLengthM * this.#sign;
    this.#inertia = rodInertiaKgM2 + rodMassKg * rodLengthM * rodLengthM;
    this.#mgl = this.#ml * gravityMps2;
    this.#b = this.#spec.cartFrictionNsPerM;
    this.#c = this.#spec.pivotFrictionNmsPerRad;
    this.#coulomb = this.#spec.coulombFrictionN + this.#brakeN;
    this.#perSpeed = 1 / this.#spec.coulombSpeedMps;
  }

  derivative(dx: Float64Array, x: Float64Array, u: Float64Array, d: Float64Array): void {
    const trig = this.#trig;
    sincos(x[1], trig, 1, 0);
    const v = x[2];
    const w = x[3];
    const inertia = this.#inertia;
    const ml = this.#ml;
    const mc = ml * trig[1];
    const scale = 1 / (this.#totalMass * inertia - mc * mc);
    let force = u[0] + d[0] - this.#b * v + ml * trig[0] * w * w;
    if (this.#coulomb !== 0) force -= this.#coulomb * tanh(v * this.#perSpeed);
    const torque = d[1] + this.#mgl * trig[0] - this.#c * w;
    dx[0] = v;
    dx[1] = w;
    dx[2] = (inertia * force - mc * torque) * scale;
    dx[3] = (this.#totalMass * torque - mc * force) * scale;
  }

  impulse(x: Float64Array, channel: number, size: number): void {
    const trig = this.#trig;
    sincos(x[1], trig, 1, 0);
    const mc = this.#ml * trig[1];
    const scale = size / (this.#totalMass * this.#inertia - mc * mc);
    x[2] += (channel === 0 ? this.#inertia : -mc) * scale;
    x[3] += (channel === 0 ? -mc : this.#totalMass) * scale;
  }

  linear(): LinearModel {
    const inertia = this.#inertia;
    const ml = this.#ml;
    const scale = 1 / (this.#totalMass * inertia - ml * ml);
    const a = new Float64Array(16);
    a[2] = 1;
    a[7] = 1;
    a[9] = -ml * this.#mgl * scale;
    a[10] = -inertia * this.#b * scale;
    a[11] = ml * this.#c * scale;
    a[13] = this.#totalMass * this.#mgl * scale;
    a[14] = ml * this.#b * scale;
    a[15] = -this.#totalMass * this.#c * scale;
    return { n: 4, m: 1, a, b: Float64Array.of(0, 0, inertia * scale, -ml * scale) };
  }

  change(parameter: string, value: number): void {
    if (!(CHANGEABLE as readonly string[]).includes(parameter)) throw new RangeError(`${parameter} cannot change in mid-run`);
    this.#spec[parameter as Changeable] = value;
    this.#prepare();
  }

  brake(forceN: number): void {
    this.#brakeN = forceN;
    this.#prepare();
  }

  /** Kinetic and potential energy, J; the latter is 0 at the pivot's height. */
  energy(x: Float64Array): number {
    const trig = this.#trig;
    sincos(x[1], trig, 1, 0);
    const mc = this.#ml * trig[1];
    return 0.5 * this.#totalMass * x[2] * x[2] + mc * x[2] * x[3] + 0.5 * this.#inertia * x[3] * x[3] + this.#mgl * trig[1];
  }
}
