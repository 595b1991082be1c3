import { describe, expect, it } from "vitest";
import { deeperThanBound } from "#shared/network/depth.ts";
import { drawFloods } from "#shared/network/floods.ts";
import { roundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { template } from "../../helpers/scenarios.ts";

/** Five nodes in a line, each of which hears only its neighbours, perfectly; node 1 is the sensor, node 5 controller and actuator. */
function line(hops: number, change?: (scenario: Scenario) => void): Scenario {
  const scenario = template(0);
  scenario.round.hops = hops;
  scenario.round.periodS = 0.1;
  scenario.loops[0].nodes = { sensor: 1, controller: 3, actuator: 5 };
  const ids = [1, 2, 3, 4, 5];
  scenario.floor = {
    name: "",
    widthM: 50,
    depthM: 10,
    nodes: ids.map((id) => ({ id, name: "", xM: id * 8, yM: 5, heightM: 1, txPowerDbm: null, wayPoints: [], outages: [] })),
    obstacles: [],
    interferers: [],
    links: { type: "matrix", prr: ids.map((a) => ids.map((b) => (Math.abs(a - b) === 1 ? 1 : 0))) },
    beaconNode: null,
    picture: null,
  };
  scenario.losses = { process: { type: "flood" }, streams: "own", outages: [] };
  change?.(scenario);
  return scenario;
}
const deep = (scenario: Scenario) => {
  const timing = roundTiming(scenario);
  return deeperThanBound(drawFloods(scenario, timing, 40, 1), timing);
};

describe("nodes deeper than the hop bound", () => {
  it("are those that floods reach later than in step H, each with its step", () => {
    // The measurement goes from end to end; beacon and command start in the middle, two hops from each end.
    expect(deep(line(2))).toEqual([
      { node: 4, step: 3 },
      { node: 5, step: 4 },
    ]);
    expect(deep(line(3))).toEqual([{ node: 5, step: 4 }]);
    expect(deep(line(4))).toEqual([]);
  });

  it("are not those that are out of service", () => {
    const out = line(3, (scenario) => scenario.floor?.nodes[4].outages.push({ fromS: 0, untilS: null }));
    expect(deep(out)).toEqual([]);
  });
});
