import { describe, expect, it } from "vitest";
import { drawDeliveries, replayed } from "#shared/network/delivery.ts";
import { roundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { prepareRun } from "#shared/simulation/simulate.ts";
import { ran, template } from "../helpers/scenarios.ts";

const drawn = (scenario: Scenario, rounds = 20_000, seed = 3) => drawDeliveries(scenario, roundTiming(scenario), rounds, seed);
const lost = (delivered: Uint8Array) => delivered.reduce((sum, value) => sum + 1 - value, 0);

function lossy(change?: (scenario: Scenario) => void): Scenario {
  const scenario = template(0);
  scenario.round.periodS = 0.06;
  scenario.losses = { process: { type: "bernoulli", measurement: 0.1, command: 0.1 }, streams: "own", outages: [] };
  change?.(scenario);
  return scenario;
}

/** Three nodes in a row under the template's loop. */
function onFloor(change: (scenario: Scenario) => void): Scenario {
  return lossy((scenario) => {
    scenario.losses.process = { type: "none" };
    scenario.loops[0].nodes = { sensor: 1, controller: 2, actuator: 3 };
    const node = (id: number) => ({ id, name: "", xM: id, yM: 1, heightM: 1, txPowerDbm: null, wayPoints: [], outages: [] });
    scenario.floor = {
      name: "",
      widthM: 10,
      depthM: 10,
      nodes: [node(1), node(2), node(3)],
      obstacles: [],
      interferers: [],
      links: { type: "matrix", prr: [1, 2, 3].map(() => [1, 1, 1]) },
      beaconNode: null,
      picture: null,
    };
    change(scenario);
  });
}
const rounds = (delivered: Uint8Array) => [...delivered.keys()].filter((k) => delivered[k] === 0);

describe("a message in two slots", () => {
  it("is lost only when both are, and its first slot loses what it lost alone", () => {
    const once = drawn(lossy());
    const twice = drawn(
      lossy((scenario) => {
        scenario.loops[0].sensor.copies = 2;
      }),
    );
    expect(lost(once.measurement) / 20_000).toBeCloseTo(0.1, 2);
    // 0.01 within four standard deviations of 20 000 tries
    expect(Math.abs(lost(twice.measurement) / 20_000 - 0.01)).toBeLessThan(4 * Math.sqrt((0.01 * 0.99) / 20_000));
    for (let k = 0; k < 20_000; k++) expect(twice.measurement[k]).toBeGreaterThanOrEqual(once.measurement[k]);
    expect(twice.command).toEqual(once.command);
  });
});

describe("a replayed recording", () => {
  const link = (...runs: number[]) => ({ link: "3 to 7", runs });

  it("gives back what was received, packet after packet", () => {
    const process = { measurement: link(3, 2, 1, 1, 4), command: link(0, 1, 10), then: "delivered" } as const;
    expect(Array.from(replayed(process, "measurement", 12))).toEqual([1, 1, 1, 0, 0, 1, 0, 1, 1, 1, 1, 1]);
    expect(Array.from(replayed(process, "command", 12))).toEqual([0, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1]);
  });

  it("begins anew with a delivered run when it repeats", () => {
    const process = { measurement: link(2, 1), command: link(2, 1), then: "repeat" } as const;
    expect(Array.from(replayed(process, "measurement", 7))).toEqual([1, 1, 0, 1, 1, 0, 1]);
    expect(Array.from(replayed({ ...process, measurement: link(0, 0) }, "measurement", 3))).toEqual([1, 1, 1]);
  });

  it("decides the deliveries of a run", () => {
    const scenario = lossy((s) => {
      s.losses.process = { type: "replay", log: null, measurement: link(10, 3, 1000), command: link(20, 2, 1000), then: "error" };
    });
    const result = ran(scenario);
    expect(rounds(result.rounds.measurementDelivered)).toEqual([10, 11, 12]);
    expect(rounds(result.rounds.commandDelivered)).toEqual([20, 21]);
  });

  it("has to last as long as the run, or say what follows", () => {
    const scenario = lossy((s) => {
      s.losses.process = { type: "replay", log: null, measurement: link(10, 3), command: link(500), then: "error" };
    });
    const refused = prepareRun(scenario);
    expect(refused.ok ? [] : refused.issues.map(({ code, path }) => [code, path])).toEqual([
      ["sequence-too-short", "losses.process.measurement.runs"],
    ]);
  });
});

describe("a node out of service, without floods", () => {
  const out = (scenario: Scenario, node: number) => {
    const found = scenario.floor?.nodes.find(({ id }) => id === node);
    found?.outages.push({ fromS: 0.6, untilS: 0.66 });
  };

  it("loses what its radio would send or hear: a sensor its measurement, an actuator its command, a controller both", () => {
    const losses = (node: number) => {
      const { measurement, command } = drawn(
        onFloor((scenario) => out(scenario, node)),
        30,
      );
      return [rounds(measurement), rounds(command)];
    };
    expect(losses(1)).toEqual([[10], []]);
    expect(losses(2)).toEqual([[10], [10]]);
    expect(losses(3)).toEqual([[], [10]]);
  });

  it("stops a controller in the same node, too", () => {
    const at = (placement: "sensor" | "actuator", node: number) => {
      const { measurement, command } = drawn(
        onFloor((scenario) => {
          scenario.loops[0].controller.placement = placement;
          out(scenario, node);
        }),
        30,
      );
      return [rounds(measurement), rounds(command)];
    };
    // With the sensor: no measurement is taken, no command travels.
    expect(at("sensor", 1)).toEqual([[10], [10]]);
    // With the actuator: the measurement is not heard; the command that would act at 0.6 s was computed in round 9.
    expect(at("actuator", 3)).toEqual([[10], [9]]);
  });

  it("silences a node for the round whose needed beacon it missed, though it is back for its own slot", () => {
    const lostWith = (needed: boolean) => {
      const scenario = onFloor((one) => {
        one.round.beacon = { payloadBytes: 4, needed };
        if (one.floor) one.floor.nodes[0].outages = [{ fromS: 0.12, untilS: 0.1201 }];
      });
      return rounds(drawn(scenario, 10).measurement);
    };
    expect(lostWith(false)).toEqual([]);
    expect(lostWith(true)).toEqual([2]);
  });

  it("silences the round when it is the beacon's host and the beacon is needed", () => {
    const silent = (needed: boolean) => {
      const { measurement, command } = drawn(
        onFloor((scenario) => {
          if (scenario.floor) scenario.floor.beaconNode = 1;
          scenario.loops[0].controller.placement = "apart";
          scenario.loops[0].nodes = { sensor: 2, controller: 3, actuator: 2 };
          scenario.round.beacon = { payloadBytes: 4, needed };
          out(scenario, 1);
        }),
        30,
      );
      return [rounds(measurement), rounds(command)];
    };
    expect(silent(true)).toEqual([[10], [10]]);
    expect(silent(false)).toEqual([[], []]);
  });
});
