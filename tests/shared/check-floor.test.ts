import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { prepareFloor } from "#shared/network/prepare.ts";
import { checkScenario } from "#shared/scenario/check.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { type Scenario, scenarioSchema } from "#shared/scenario/schema.ts";

const example = (file: string): Scenario =>
  scenarioSchema.parse(JSON.parse(readFileSync(new URL(`../../examples/${file}`, import.meta.url), "utf8")));
const HALL = example("balancer-rig-1-floor.json");
const LINE = example("film-line-2-shared-round.json");

const floorOf = (scenario: Scenario): Floor => {
  if (!scenario.floor) throw new Error("no floor");
  return scenario.floor;
};

function complaints(base: Scenario, change: (scenario: Scenario, floor: Floor) => void): string[] {
  const scenario = structuredClone(base);
  change(scenario, floorOf(scenario));
  return checkScenario(scenario).issues.map(({ code, path }) => `${code} at ${path}`);
}

const messages = (count: number, copies: number): Scenario["round"]["messages"] =>
  Array.from({ length: count }, (_, i) => ({ id: `m${i}`, name: `M ${i}`, from: 1, to: [], payloadBytes: 1, everyRounds: 1, firstRound: 0, copies }));

type Case = [string, (scenario: Scenario, floor: Floor) => void, string[]];
const HALL_CASES: Case[] = [
  ["floods without a floor", (s) => (s.floor = null), ["missing-field at floor"]],
  [
    "floods on a floor with one node",
    (s, f) => {
      f.nodes = f.nodes.filter(({ id }) => id === 1);
      f.beaconNode = 1;
      s.loops[0].nodes = { sensor: 1, controller: 1, actuator: 1 };
    },
    ["missing-field at floor.nodes"],
  ],
  ["a loop that is on no node", (s) => (s.loops[0].nodes = null), ["missing-field at loops[0].nodes"]],
  [
    "a loop on a node that is not there",
    (s) => (s.loops[0].nodes = { sensor: 1, controller: 99, actuator: 2 }),
    ["unknown-name at loops[0].nodes.controller"],
  ],
  ["a beacon from a node that is not there", (_, f) => (f.beaconNode = 98), ["unknown-name at floor.beaconNode"]],
  ["two nodes of one number", (_, f) => (f.nodes[5].id = f.nodes[6].id), ["duplicate-name at floor.nodes[6].id"]],
  ["a node outside the plan", (_, f) => (f.nodes[4].xM = 80), ["out-of-range at floor.nodes[4].xM"]],
  ["a way-point outside the plan", (_, f) => (f.nodes[10].wayPoints[1].yM = 41), ["out-of-range at floor.nodes[10].wayPoints[1].yM"]],
  ["way-points out of order", (_, f) => (f.nodes[10].wayPoints[1].atS = 1), ["out-of-order at floor.nodes[10].wayPoints[1].atS"]],
  ["an outage that ends before it begins", (_, f) => (f.nodes[13].outages[0].untilS = 4), ["out-of-order at floor.nodes[13].outages[0].untilS"]],
  [
    "a wall of no length",
    (_, f) => f.obstacles.unshift({ type: "wall", name: "", fromXM: 3, fromYM: 3, toXM: 3, toYM: 3, lossDb: 3 }),
    ["out-of-range at floor.obstacles[0].toXM"],
  ],
  [
    "a block beside the plan",
    (_, f) => f.obstacles.unshift({ type: "block", name: "", xM: 100, yM: 3, widthM: 1, depthM: 1, lossDb: 3 }),
    ["out-of-range at floor.obstacles[0].xM"],
  ],
  [
    "an interferer that ends before it begins",
    (_, f) => Object.assign(f.interferers[0], { fromS: 3, untilS: 2 }),
    ["out-of-order at floor.interferers[0].untilS"],
  ],
  ["a channel of another radio", (s) => (s.radio.channels.list = [15, 3]), ["out-of-range at radio.channels.list[1]"]],
  ["a channel listed twice", (s) => (s.radio.channels.list = [15, 26, 15]), ["duplicate-name at radio.channels.list[2]"]],
  [
    "a reception curve out of order",
    (s) =>
      (s.radio.reception = {
        type: "table",
        name: "",
        rows: [
          { snrDb: 1, prr: 0 },
          { snrDb: 1, prr: 1 },
        ],
      }),
    ["out-of-order at radio.reception.rows[1].snrDb"],
  ],
  ["a first round that does not come", (s) => (s.loops[0].timing.firstRound = 1), ["out-of-range at loops[0].timing.firstRound"]],
  [
    "fading with more states than fit",
    (s, f) => {
      s.radio.phy = "le-2m";
      s.radio.channels.list = Array.from({ length: 40 }, (_, i) => i);
      s.round.periodS = 0.2;
      s.round.messages = messages(24, 2);
      f.nodes = Array.from({ length: 120 }, (_, i) => ({ ...f.nodes[0], id: i + 1, xM: i / 2, wayPoints: [], outages: [] }));
      if (f.links.type === "budget") f.links.fading = { kDb: 3, coherence: { type: "time", coherenceS: 0.0001 } };
    },
    ["out-of-range at floor.links.fading.coherence.coherenceS"],
  ],
];
const LINE_CASES: Case[] = [
  ["a matrix that is short of a row", (_, f) => f.links.type === "matrix" && f.links.prr.pop(), ["wrong-length at floor.links.prr"]],
  ["a row that is short", (_, f) => f.links.type === "matrix" && f.links.prr[2].pop(), ["wrong-length at floor.links.prr[2]"]],
  ["two loops of one id", (s) => (s.round.otherLoops[1].id = "dancer"), ["duplicate-name at round.otherLoops[1].id"]],
  ["two messages of one id", (s) => (s.round.messages[1].id = "recipe"), ["duplicate-name at round.messages[1].id"]],
  ["an other loop on no node", (s) => (s.round.otherLoops[0].nodes = null), ["missing-field at round.otherLoops[0].nodes"]],
  ["a message from nobody", (s) => (s.round.messages[0].from = null), ["missing-field at round.messages[0].from"]],
  ["a message to a node that is not there", (s) => (s.round.messages[1].to = [1, 77]), ["unknown-name at round.messages[1].to[1]"]],
];

describe("rules of floor, radio and round", () => {
  it("let the examples pass", () => {
    for (const scenario of [HALL, LINE]) expect(checkScenario(scenario).issues).toEqual([]);
  });

  it.each(HALL_CASES)("refuse %s", (_, change, wanted) => {
    expect(complaints(HALL, change)).toEqual(wanted);
  });
  it.each(LINE_CASES)("refuse %s", (_, change, wanted) => {
    expect(complaints(LINE, change)).toEqual(wanted);
  });

  it("say how long a run's floods may be, and let that run", () => {
    const scenario = structuredClone(HALL);
    const floor = floorOf(scenario);
    floor.nodes.push(...Array.from({ length: 100 }, (_, i) => ({ ...floor.nodes[3], id: 100 + i })));
    scenario.radio.phy = "le-2m";
    scenario.radio.channels.list = [];
    scenario.round.messages = messages(4, 1);
    scenario.run.durationS = 3600;
    const [issue] = checkScenario(scenario).issues.filter(({ message }) => message.includes("floods over"));
    expect(issue?.path).toBe("run.durationS");
    const most = Number(/at most (\d+) rounds/.exec(issue?.message ?? "")?.[1]);
    expect(most * 7 * 117).toBeLessThanOrEqual(100_000_000);
    scenario.run.durationS = most * scenario.round.periodS;
    expect(checkScenario(scenario).issues.filter(({ message }) => message.includes("floods over"))).toEqual([]);
  });

  it("ask nothing of a floor that nothing uses yet", () => {
    expect(
      complaints(HALL, (s, f) => {
        s.losses.process = { type: "none" };
        s.loops[0].nodes = null;
        f.nodes = [];
        f.beaconNode = null;
      }),
    ).toEqual([]);
  });
});

describe("what asks about floods alone", () => {
  it("needs the floor in order, not the machine", () => {
    const scenario = structuredClone(HALL);
    scenario.limits = [{ type: "within", signal: "nothing", of: "signal", lo: -1, hi: 1, fromS: 0, untilS: null }];
    scenario.losses.process = { type: "bernoulli", measurement: 0.1, command: 0.1 };
    expect(prepareFloor(scenario).ok).toBe(true);
    floorOf(scenario).nodes[1].id = 1;
    expect(prepareFloor(scenario).ok).toBe(false);
  });
});
