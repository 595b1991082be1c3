/** Starting points that run at once and whose rounds fit. The figures of the machines are our own. */
import type { Scenario, ScenarioInput } from "./schema.ts";
import { scenarioSchema } from "./schema.ts";

export interface Template {
  key: "pendulum-on-cart" | "overhead-crane";
  title: string;
  text: string;
  scenario: Scenario;
}

const pendulum: ScenarioInput = {
  format: "holdfast-scenario",
  version: 1,
  name: "Pendulum on cart",
  description: "A rod held upright by a cart: sensor, controller and drive are three nodes of one flooding network.",
  run: { durationS: 10, seed: 10 },
  loops: [
    {
      id: "balancer",
      name: "Balancer",
      plant: {
        type: "pendulum-on-cart",
        rest: "upright",
        cartMassKg: 1.2,
        rodMassKg: 0.21,
        rodLengthM: 0.3,
        rodInertiaKgM2: 0.0063,
        cartFrictionNsPerM: 2,
        pivotFrictionNmsPerRad: 0.002,
        coulombFrictionN: 0.05,
        halfTrackM: 0.4,
      },
      start: { state: [-0.15, 0, 0, 0] },
      sensor: {
        signals: [
          { signal: "position", noiseStd: 0.0005, encoding: { bits: 16, lo: -1, hi: 1 } },
          { signal: "angle", noiseStd: 0.0008726646259971648, encoding: { bits: 16, lo: -1.5707963267948966, hi: 1.5707963267948966 } },
          { signal: "velocity", noiseStd: 0.004, encoding: { bits: 16, lo: -8, hi: 8 } },
          { signal: "angularVelocity", noiseStd: 0.006, encoding: { bits: 16, lo: -15.707963267948966, hi: 15.707963267948966 } },
        ],
      },
      controller: { placement: "apart", computeS: 0.0015, law: { type: "lqr", stateWeights: [90, 60, 1, 1], inputWeights: [0.12] } },
      actuator: { inputs: [{ lo: -30, hi: 30, encoding: { bits: 12, lo: -32, hi: 32 } }], onLoss: { policy: "plan", length: 6, end: "zero" } },
      references: [
        {
          signal: "position",
          profile: {
            type: "steps",
            points: [
              { atS: 0, value: -0.15 },
              { atS: 1, value: 0.15 },
            ],
          },
        },
      ],
    },
  ],
  radio: { phy: "ieee802154", headerBytes: 4 },
  round: { periodS: 0.025, hops: 3, transmissions: 2 },
  losses: { process: { type: "bernoulli", measurement: 0.05, command: 0.05 }, outages: [{ fromS: 6.5, untilS: 6.6 }] },
  pushes: [{ type: "impulse", channel: "cart", atS: 4, size: 0.5 }],
  limits: [
    { type: "within", signal: "angle", lo: -0.20943951023931953, hi: 0.20943951023931953 },
    { type: "within", signal: "position", lo: -0.3, hi: 0.3 },
    { type: "settle", signal: "position", band: 0.03, withinS: 1.8, afterS: 4 },
    { type: "rms", signal: "angle", below: 0.05235987755982988 },
    { type: "saturation", below: 0.02 },
  ],
};

const crane: ScenarioInput = {
  format: "holdfast-scenario",
  version: 1,
  name: "Overhead crane",
  description: "A load under a trolley: move it without swing, over a radio link between remote sensor, controller and drive.",
  run: { durationS: 20, seed: 4 },
  loops: [
    {
      id: "crane",
      name: "Crane",
      plant: {
        type: "pendulum-on-cart",
        rest: "hanging",
        cartMassKg: 120,
        rodMassKg: 80,
        rodLengthM: 2.5,
        rodInertiaKgM2: 4,
        cartFrictionNsPerM: 60,
        pivotFrictionNmsPerRad: 2,
        coulombFrictionN: 15,
        halfTrackM: 4,
      },
      sensor: {
        signals: [
          { signal: "position", noiseStd: 0.002, encoding: { bits: 16, lo: -8, hi: 8 } },
          { signal: "angle", noiseStd: 0.0017453292519943296, encoding: { bits: 14, lo: -1.0471975511965976, hi: 1.0471975511965976 } },
        ],
      },
      controller: {
        placement: "apart",
        computeS: 0.002,
        law: { type: "lqr", stateWeights: [1000, 4000, 400, 400], inputWeights: [0.002], integral: [{ signal: "position", weight: 100 }] },
        estimator: { type: "kalman", update: "stationary", processNoise: [0.001, 0.001, 0.05, 0.05], measurementNoise: [0.002, 0.002] },
      },
      actuator: {
        inputs: [{ lo: -600, hi: 600, ratePerS: 6000, encoding: { bits: 12, lo: -1024, hi: 1024 } }],
        lagS: 0.02,
        onLoss: { policy: "hold" },
      },
      references: [
        {
          signal: "position",
          profile: {
            type: "ramps",
            points: [
              { atS: 1, value: 0 },
              { atS: 6, value: 2.5 },
            ],
          },
        },
        {
          signal: "velocity",
          profile: {
            type: "steps",
            points: [
              { atS: 1, value: 0.5 },
              { atS: 6, value: 0 },
            ],
          },
        },
      ],
    },
  ],
  radio: { phy: "ieee802154", headerBytes: 4 },
  round: { periodS: 0.06, hops: 4, transmissions: 3 },
  losses: { process: { type: "bernoulli", measurement: 0.02, command: 0.02 } },
  pushes: [{ type: "step", channel: "cart", fromS: 12, untilS: 13, size: 80 }],
  limits: [
    { type: "within", signal: "angle", lo: -0.15707963267948966, hi: 0.15707963267948966 },
    { type: "within", signal: "position", lo: -0.5, hi: 3.2 },
    { type: "settle", signal: "position", band: 0.1, withinS: 5, afterS: 6 },
    { type: "saturation", below: 0.05 },
  ],
};

export const TEMPLATES: readonly Template[] = [
  { key: "pendulum-on-cart", title: "Pendulum on cart", text: "Held upright", scenario: scenarioSchema.parse(pendulum) },
  { key: "overhead-crane", title: "Overhead crane", text: "Moved without swing", scenario: scenarioSchema.parse(crane) },
];
