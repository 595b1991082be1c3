/** A first arrangement for the loops of a scenario: who takes part, and relays between them, at places that follow from the size. */
import { MID_BAND_MHZ, noiseDbm } from "#shared/network/link-budget.ts";
import { pathLoss } from "#shared/network/path-loss.ts";
import type { Floor, FloorNode } from "#shared/scenario/floor-schema.ts";
import { floorSchema } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { newNode } from "./floor-edits.ts";

/** Relays stand about so far apart, m; at most so many of them. */
const RELAY_EVERY_M = 18;
const MOST_RELAYS = 40;
/** Closer than this part of a cell counts as beside. */
const CROWDED = 0.4;
/** A hall with machines in it, with the shadowing that the model's source gives. */
const HALL_LINKS: Floor["links"] = {
  type: "budget",
  pathLoss: { type: "p1238-10", environment: "industrial-nlos" },
  shadowing: { sigmaDb: 9, correlationM: 10, seed: 1 },
  fading: null,
  noiseFigureDb: 6,
  captureDb: 3,
  concurrencyPenaltyDb: 3,
};

/** The wave is to take some steps from corner to corner, or there would be nothing to relay: power for this part of the way, but at least from relay to relay. */
const HOPS_ACROSS = 4;
/** Signal above noise with which a packet arrives nearly always, dB. */
const WANTED_DB = 3;

/** Transmit power, whole dBm from -40 up, that carries over such a distance in this hall. */
function powerForHops(distanceM: number): number {
  if (HALL_LINKS.type !== "budget") return 0;
  const noise = noiseDbm(2, HALL_LINKS.noiseFigureDb);
  return Math.max(-40, Math.round(noise + WANTED_DB + pathLoss(HALL_LINKS.pathLoss, MID_BAND_MHZ)(distanceM)));
}

export const emptyFloor = (name: string, widthM: number, depthM: number): Floor => floorSchema.parse({ name, widthM, depthM });

const on = (value: number): number => Number(value.toFixed(1));

/**
 * Sensor and actuator stand by the machine at the lower left, the controller in the opposite corner, other loops' machines
 * along the lower edge; relays on a grid of equal cells, each in the middle of its cell.
 */
export function exampleFloor(scenario: Scenario, name: string, widthM: number, depthM: number): Scenario {
  const nodes: FloorNode[] = [];
  const add = (xM: number, yM: number, words: string): number => {
    const id = nodes.length + 1;
    nodes.push(newNode(id, on(Math.min(Math.max(xM, 0), widthM)), on(Math.min(Math.max(yM, 0), depthM)), words));
    return id;
  };
  const apart = Math.min(3, widthM / 8);
  const sensor = add(widthM * 0.1, depthM * 0.84, "Sensor");
  const actuator = add(widthM * 0.1 + apart, depthM * 0.84 - Math.min(1.2, depthM / 10), "Actuator");
  const controller = add(widthM * 0.9, depthM * 0.14, "Controller");
  const others = scenario.round.otherLoops ?? [];
  const otherNodes = others.map((other, i) => {
    const x = widthM * (0.1 + (0.8 * (i + 1)) / (others.length + 1));
    return { sensor: add(x, depthM * 0.92, `${other.name} sensor`), actuator: add(x + apart, depthM * 0.92, `${other.name} actuator`), controller };
  });
  let columns = Math.max(2, Math.round(widthM / RELAY_EVERY_M));
  let rows = Math.max(1, Math.round(depthM / RELAY_EVERY_M));
  while (columns * rows > MOST_RELAYS) {
    if (columns >= rows) columns--;
    else rows--;
  }
  for (let row = 0; row < rows; row++)
    for (let column = 0; column < columns; column++) {
      // Every second row is shifted a little: straight rows of racks would hide a straight row of relays.
      const shift = row % 2 === 0 ? -0.12 : 0.12;
      const x = ((column + 0.5 + shift) * widthM) / columns;
      const y = ((row + 0.5) * depthM) / rows;
      // Beside a node that relays anyway another one helps nobody.
      const crowded = nodes.some((node) => Math.hypot(node.xM - x, node.yM - y) < CROWDED * Math.min(widthM / columns, depthM / rows));
      if (!crowded) add(x, y, "");
    }
  const floor: Floor = { ...emptyFloor(name, widthM, depthM), nodes, links: HALL_LINKS };
  let next = setAt(scenario, ["floor"], floor) as Scenario;
  const enough = powerForHops(Math.max(RELAY_EVERY_M, Math.hypot(widthM, depthM) / HOPS_ACROSS));
  if (enough < scenario.radio.txPowerDbm) next = setAt(next, ["radio", "txPowerDbm"], enough) as Scenario;
  next = setAt(next, ["loops", 0, "nodes"], { sensor, controller, actuator }) as Scenario;
  otherNodes.forEach((one, i) => {
    next = setAt(next, ["round", "otherLoops", i, "nodes"], one) as Scenario;
  });
  next.round.messages?.forEach((message, i) => {
    if (message.from === null) next = setAt(next, ["round", "messages", i, "from"], controller) as Scenario;
  });
  return next;
}

/** Nodes for a table of reception ratios, on a ring: where they stand is not known. */
export function floorOfMatrix(scenario: Scenario, name: string, prr: number[][]): Scenario {
  const count = prr.length;
  const widthM = 40;
  const depthM = 24;
  const nodes = prr.map((_, i) => {
    const angle = (2 * Math.PI * i) / count - Math.PI / 2;
    return newNode(i + 1, on(widthM / 2 + 15 * Math.cos(angle)), on(depthM / 2 + 9 * Math.sin(angle)));
  });
  const floor: Floor = { ...emptyFloor(name, widthM, depthM), nodes, links: { type: "matrix", prr } };
  const next = setAt(scenario, ["floor"], floor) as Scenario;
  const role = (i: number) => Math.min(i, count);
  return next.loops[0].nodes ? next : (setAt(next, ["loops", 0, "nodes"], { sensor: role(1), controller: role(2), actuator: role(3) }) as Scenario);
}
