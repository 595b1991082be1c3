/** Rules of floor, radio and round across fields: who stands where, who sends to whom, which channels there are. */
import { channelRange, channelsInUse } from "#shared/network/channels.ts";
import { blockS } from "#shared/network/fading.ts";
import { MID_BAND_MHZ } from "#shared/network/link-budget.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import type { Floor } from "./floor-schema.ts";
import type { Report } from "./report.ts";
import { roundsOf } from "./rounds.ts";
import type { Scenario } from "./schema.ts";

/** Most states of fading that a run keeps, pairs of nodes x channels x blocks of coherence in a round; 28 bytes each. */
const MAX_FADING = 10_000_000;

/** Most entries of the record of all floods of a run, rounds x slots x nodes, one byte each. */
const MAX_FLOOD_RECORD = 100_000_000;

export function checkFloor(report: Report, scenario: Scenario, timing: RoundTiming): void {
  checkRound(report, scenario);
  checkRadio(report, scenario);
  const { floor, losses } = scenario;
  const floods = losses.process.type === "flood";
  if (floods && !floor) {
    report.add(
      "missing-field",
      "floor",
      "Floods decide what is delivered, but there is no floor. Lay out a floor with at least two nodes, or choose another process.",
    );
    return;
  }
  if (!floor) return;
  checkNodes(report, floor);
  checkThings(report, floor);
  checkUse(report, scenario, floor, floods);
  checkFading(report, scenario, floor, timing);
  const record = roundsOf(scenario) * timing.slots.length * floor.nodes.length;
  if (floods && record > MAX_FLOOD_RECORD) {
    const most = Math.floor(MAX_FLOOD_RECORD / (timing.slots.length * floor.nodes.length));
    report.add(
      "out-of-range",
      "run.durationS",
      `${roundsOf(scenario)} rounds of ${timing.slots.length} floods over ${floor.nodes.length} nodes are more than a run can record; at most ${most} rounds, ${(most * scenario.round.periodS).toFixed(1)} s.`,
    );
  }
}

/** Fading that changes within the round is kept for every block of it, pair and channel. */
function checkFading(report: Report, { radio }: Scenario, { links, nodes }: Floor, { slots, ns }: RoundTiming): void {
  if (links.type !== "budget" || !links.fading) return;
  const block = blockS(links.fading, MID_BAND_MHZ) * 1e9;
  const blocks = new Set(ns.slots.map(({ floodStart }) => Math.floor(floodStart / block))).size;
  const channels = radio.channels.hopping === "none" ? 1 : channelsInUse(radio).length;
  const states = ((nodes.length * (nodes.length - 1)) / 2) * channels * blocks;
  if (states <= MAX_FADING) return;
  const { type } = links.fading.coherence;
  report.add(
    "out-of-range",
    `floor.links.fading.coherence.${type === "time" ? "coherenceS" : "leastMPerS"}`,
    `Fading of ${nodes.length} nodes on ${channels} channels that changes ${blocks} times in the ${slots.length} slots of a round has ${states} states, more than the ${MAX_FADING} that a run can keep. Let it change more slowly, or use fewer channels or nodes.`,
  );
}

function checkRhythm(report: Report, path: string, what: string, { everyRounds, firstRound }: { everyRounds: number; firstRound: number }): void {
  if (firstRound >= everyRounds) {
    report.add(
      "out-of-range",
      `${path}.firstRound`,
      `${what} begins in round ${firstRound}, but comes every ${everyRounds === 1 ? "round" : `${everyRounds} rounds`}; permitted 0 to ${everyRounds - 1}.`,
    );
  }
}

function checkRound(report: Report, { loops, round }: Scenario): void {
  const loopIds = [...loops.map(({ id }) => id), ...round.otherLoops.map(({ id }) => id)];
  loops.forEach((loop, i) => {
    checkRhythm(report, `loops[${i}].timing`, loop.name, loop.timing);
  });
  round.otherLoops.forEach((loop, i) => {
    const path = `round.otherLoops[${i}]`;
    checkRhythm(report, path, loop.name, loop);
    if (loopIds.indexOf(loop.id) !== loops.length + i) report.add("duplicate-name", `${path}.id`, `"${loop.id}" is the id of two loops.`);
  });
  round.messages.forEach((message, i) => {
    const path = `round.messages[${i}]`;
    checkRhythm(report, path, message.name, message);
    if (round.messages.findIndex(({ id }) => id === message.id) !== i)
      report.add("duplicate-name", `${path}.id`, `"${message.id}" is the id of two messages.`);
  });
}

function checkRadio(report: Report, { radio }: Scenario): void {
  const { first, last } = channelRange(radio.phy);
  const { list } = radio.channels;
  list.forEach((channel, i) => {
    const path = `radio.channels.list[${i}]`;
    if (channel < first || channel > last) report.add("out-of-range", path, `Channel ${channel} does not exist; this radio has ${first} to ${last}.`);
    else if (list.indexOf(channel) !== i) report.add("duplicate-name", path, `Channel ${channel} is listed twice.`);
  });
  if (radio.reception.type === "table") {
    const { rows } = radio.reception;
    rows.forEach(({ snrDb }, i) => {
      if (i > 0 && snrDb <= rows[i - 1].snrDb)
        report.add(
          "out-of-order",
          `radio.reception.rows[${i}].snrDb`,
          `Row ${i + 1} is at ${snrDb} dB, not above the row before it (${rows[i - 1].snrDb} dB).`,
        );
    });
  }
}

function checkNodes(report: Report, floor: Floor): void {
  const { nodes, widthM, depthM } = floor;
  const inside = (path: string, what: string, xM: number, yM: number) => {
    if (xM > widthM) report.add("out-of-range", `${path}.xM`, `${what} is ${xM} m across, outside the plan; permitted 0 to ${widthM} m.`);
    if (yM > depthM) report.add("out-of-range", `${path}.yM`, `${what} is ${yM} m down, outside the plan; permitted 0 to ${depthM} m.`);
  };
  nodes.forEach((node, i) => {
    const path = `floor.nodes[${i}]`;
    const what = `Node ${node.id}`;
    if (nodes.findIndex(({ id }) => id === node.id) !== i)
      report.add("duplicate-name", `${path}.id`, `There are two nodes ${node.id}; every node needs its own number.`);
    inside(path, what, node.xM, node.yM);
    node.wayPoints.forEach((point, j) => {
      const at = `${path}.wayPoints[${j}]`;
      inside(at, `Way-point ${j + 1} of node ${node.id}`, point.xM, point.yM);
      const before = node.wayPoints[j - 1]?.atS ?? 0;
      if (point.atS <= before)
        report.add("out-of-order", `${at}.atS`, `Way-point ${j + 1} of node ${node.id} is at ${point.atS} s; it has to be later than ${before} s.`);
    });
    node.outages.forEach(({ fromS, untilS }, j) => {
      report.ordered(`${path}.outages[${j}].untilS`, fromS, untilS);
    });
  });
  if (floor.links.type === "matrix") {
    const { prr } = floor.links;
    const because = `because the floor has ${nodes.length} nodes`;
    report.length("floor.links.prr", "Rows of the reception ratios", prr.length, nodes.length, because);
    prr.forEach((row, i) => {
      report.length(`floor.links.prr[${i}]`, `Row ${i + 1} of the reception ratios`, row.length, nodes.length, because);
    });
  }
}

function checkThings(report: Report, floor: Floor): void {
  const { widthM, depthM } = floor;
  floor.obstacles.forEach((obstacle, i) => {
    const path = `floor.obstacles[${i}]`;
    if (obstacle.type === "wall") {
      if (obstacle.fromXM === obstacle.toXM && obstacle.fromYM === obstacle.toYM)
        report.add("out-of-range", `${path}.toXM`, `The wall begins and ends at the same place (${obstacle.fromXM} m, ${obstacle.fromYM} m).`);
      return;
    }
    if (obstacle.xM > widthM)
      report.add("out-of-range", `${path}.xM`, `The block is ${obstacle.xM} m across, outside the plan; permitted 0 to ${widthM} m.`);
    if (obstacle.yM > depthM)
      report.add("out-of-range", `${path}.yM`, `The block is ${obstacle.yM} m down, outside the plan; permitted 0 to ${depthM} m.`);
  });
  floor.interferers.forEach((interferer, i) => {
    report.ordered(`floor.interferers[${i}].untilS`, interferer.fromS, interferer.untilS);
  });
}

/** Every node that loops, messages and beacon speak of stands on the floor; floods need to know them all. */
function checkUse(report: Report, { loops, round }: Scenario, floor: Floor, floods: boolean): void {
  const ids = floor.nodes.map(({ id }) => String(id));
  const known = (path: string, id: number) => report.known(path, String(id), ids, "the number of a node on the floor");
  if (floods && ids.length < 2) report.add("missing-field", "floor.nodes", `Floods need at least two nodes; the floor has ${ids.length}.`);
  const use = (path: string, name: string, nodes: Scenario["loops"][number]["nodes"]) => {
    if (!nodes) {
      if (floods)
        report.add("missing-field", path, `${name}: say on which nodes sensor, controller and actuator are; floods decide what they receive.`);
      return;
    }
    for (const part of ["sensor", "controller", "actuator"] as const) known(`${path}.${part}`, nodes[part]);
  };
  loops.forEach((loop, i) => {
    use(`loops[${i}].nodes`, loop.name, loop.nodes);
  });
  round.otherLoops.forEach((loop, i) => {
    use(`round.otherLoops[${i}].nodes`, loop.name, loop.nodes);
  });
  round.messages.forEach((message, i) => {
    const path = `round.messages[${i}]`;
    if (message.from !== null) known(`${path}.from`, message.from);
    else if (floods) report.add("missing-field", `${path}.from`, `${message.name}: say which node sends it; floods decide who receives it.`);
    message.to.forEach((id, j) => {
      known(`${path}.to[${j}]`, id);
    });
  });
  if (floor.beaconNode !== null) known("floor.beaconNode", floor.beaconNode);
}
