/** Scenarios with a floor for tests of links and floods. */
import { roundTiming } from "#shared/network/round.ts";
import { type Scenario, type ScenarioInput, scenarioSchema } from "#shared/scenario/schema.ts";

export type FloorInput = NonNullable<ScenarioInput["floor"]>;

export interface Setting {
  floor: FloorInput;
  round?: Partial<ScenarioInput["round"]>;
  radio?: Partial<ScenarioInput["radio"]>;
  nodes?: { sensor: number; controller: number; actuator: number };
}

/** A pendulum whose sensor, controller and drive are nodes of the floor. */
export function scenarioOn({ floor, round, radio, nodes = { sensor: 1, controller: 2, actuator: 3 } }: Setting): Scenario {
  return scenarioSchema.parse({
    format: "holdfast-scenario",
    version: 1,
    name: "Floor",
    run: { durationS: 10, seed: 1 },
    loops: [
      {
        name: "Pendulum",
        nodes,
        plant: { type: "pendulum-on-cart", cartMassKg: 1.2, rodMassKg: 0.15, rodLengthM: 0.35, rodInertiaKgM2: 0.006 },
        sensor: { signals: ["position", "angle", "velocity", "angularVelocity"].map((signal) => ({ signal })) },
        controller: { law: { type: "gain", gain: [[-5, -45, -7, -9]] } },
        actuator: { inputs: [{ lo: -100, hi: 100 }] },
      },
    ],
    floor,
    radio: { phy: "ieee802154", ...radio },
    round: { periodS: 0.05, ...round },
    losses: { process: { type: "flood" } },
  } satisfies ScenarioInput);
}

/** Nodes 1, 2, ... at the places given, in m. */
export const at = (...places: [number, number][]): FloorInput["nodes"] => places.map(([xM, yM], i) => ({ id: i + 1, xM, yM }));

/** A square plan without anything but nodes. */
export const floorOf = (nodes: FloorInput["nodes"], rest: Partial<FloorInput> = {}): FloorInput => ({ widthM: 200, depthM: 200, nodes, ...rest });

/** The timing, which has to fit. */
export function timingOf(scenario: Scenario) {
  const timing = roundTiming(scenario);
  if (!timing.fits) throw new Error(timing.issues[0]?.message);
  return timing;
}

/** What lies within 4.5 standard errors of p with n tries: a right wave fails once in 150 000. */
export const within = (p: number, n: number): number => 4.5 * Math.sqrt(Math.max(p * (1 - p), 1 / n) / n);
