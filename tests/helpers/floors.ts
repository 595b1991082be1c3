import { readFileSync } from "node:fs";
import { type Scenario, type ScenarioInput, scenarioSchema } from "#shared/scenario/schema.ts";
import { scalar } from "./scenarios.ts";

type FloorInput = NonNullable<ScenarioInput["floor"]>;
type NodeInput = NonNullable<FloorInput["nodes"]>[number];

/** Nodes in a row, numbered from 1, each hearing its neighbours only, with this packet reception ratio. */
export function line(count: number, prr: number, change?: (scenario: ScenarioInput) => void): Scenario {
  return flooded((scenario) => {
    const nodes = Array.from({ length: count }, (_, i): NodeInput => ({ id: i + 1, xM: 10 + 10 * i, yM: 10 }));
    const matrix = nodes.map((_, i) => nodes.map((_, j) => (Math.abs(i - j) === 1 ? prr : 0)));
    scenario.floor = { widthM: 20 + 10 * count, depthM: 20, nodes, links: { type: "matrix", prr: matrix } };
    scenario.loops[0].nodes = { sensor: 1, controller: count, actuator: 1 };
    change?.(scenario);
  });
}

/** Any floor, with the scalar loop on it; floods decide what is delivered. */
export function flooded(change: (scenario: ScenarioInput) => void): Scenario {
  return scalar((scenario) => {
    scenario.losses = { process: { type: "flood" } };
    scenario.round = { periodS: 0.05, hops: 4 };
    scenario.run = { durationS: 5, seed: 1 };
    change(scenario);
  });
}

/** The example's hall: 72 x 40 m, 17 nodes, racks, walls, a way, an outage and an interferer, fading. */
export function hall(change?: (scenario: ScenarioInput) => void): Scenario {
  const scenario: ScenarioInput = JSON.parse(readFileSync("examples/balancer-rig-1-floor.json", "utf8"));
  change?.(scenario);
  return scenarioSchema.parse(scenario);
}
