/** Changes of a floor as edits of the draft: each is one step of undo. Nodes are named by their number, as loops name them. */
import type { Floor, FloorNode, Interferer, Obstacle } from "#shared/scenario/floor-schema.ts";
import { MAX_NODES } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { Edit } from "#src/pages/scenario/model/draft.ts";
import { getAt, setAt } from "#src/pages/scenario/model/json-path.ts";
import { append, duplicate, remove } from "#src/pages/scenario/model/list-edits.ts";

const FLOOR = ["floor"] as const;
export const NODES = ["floor", "nodes"] as const;
export const OBSTACLES = ["floor", "obstacles"] as const;
export const INTERFERERS = ["floor", "interferers"] as const;

const MATRIX = ["floor", "links", "prr"] as const;
const MOST_NUMBER = 999;

export const floorOf = (json: unknown): Floor | null => (getAt(json, FLOOR) as Floor | null | undefined) ?? null;
const put = (json: unknown, more: Partial<Extract<Edit, { kind: "put" }>> = {}): Edit => ({ kind: "put", json, ...more });

/** The lowest number that no node has; null when there are as many nodes as a floor may have. */
export function freeNumber(floor: Floor): number | null {
  if (floor.nodes.length >= MAX_NODES) return null;
  const taken = new Set(floor.nodes.map(({ id }) => id));
  for (let id = 1; id <= MOST_NUMBER; id++) if (!taken.has(id)) return id;
  return null;
}

export const newNode = (id: number, xM: number, yM: number, name = ""): FloorNode => ({
  id,
  name,
  xM,
  yM,
  heightM: 1,
  txPowerDbm: null,
  wayPoints: [],
  outages: [],
});

/** Reception ratios with a further row and column: nothing is known of a new node's links. */
const widened = (prr: readonly number[][], row: readonly number[] | null, at: number): number[][] => {
  const old = prr.map((line, i) => line.toSpliced(at, 0, row ? (row[i] ?? 0) : 0));
  return old.toSpliced(at, 0, [...(row ?? Array(prr.length).fill(0))].toSpliced(at, 0, 0));
};

function withMatrix(json: unknown, change: (prr: number[][]) => number[][]): unknown {
  const prr = getAt(json, MATRIX);
  return Array.isArray(prr) ? setAt(json, MATRIX, change(prr as number[][])) : json;
}

export function addNode(json: unknown, node: FloorNode): Edit {
  const nodes = floorOf(json)?.nodes ?? [];
  const next = setAt(json, NODES, [...nodes, node]);
  return put(
    withMatrix(next, (prr) => widened(prr, null, nodes.length)),
    { forget: [MATRIX] },
  );
}

/** A node like this one, two metres beside it, with the lowest free number. */
export function duplicateNode(json: unknown, index: number): { edit: Edit; id: number } | null {
  const floor = floorOf(json);
  const node = floor?.nodes[index];
  const id = floor && freeNumber(floor);
  if (!floor || !node || id === null) return null;
  const xM = node.xM + 2 <= floor.widthM ? node.xM + 2 : Math.max(0, node.xM - 2);
  const copy = { ...node, id, name: "", xM: Number(xM.toFixed(3)) };
  const next = setAt(json, NODES, [...floor.nodes, copy]);
  return {
    id,
    edit: put(
      withMatrix(next, (prr) => widened(prr, prr[index] ?? null, floor.nodes.length)),
      { forget: [MATRIX] },
    ),
  };
}

type Nodes = { sensor: number; controller: number; actuator: number } | null;

/** Who uses a node, in words: "sensor of Balancer", "sends the beacon". */
export function usesOf(json: unknown, id: number): string[] {
  const scenario = json as Scenario;
  const uses: string[] = [];
  const ofLoop = (name: string, nodes: Nodes) => {
    for (const part of ["sensor", "controller", "actuator"] as const) if (nodes?.[part] === id) uses.push(`${part} of ${name}`);
  };
  for (const loop of scenario.loops) ofLoop(loop.name, loop.nodes);
  for (const loop of scenario.round.otherLoops ?? []) ofLoop(loop.name, loop.nodes);
  for (const message of scenario.round.messages ?? []) if (message.from === id) uses.push(`sender of ${message.name}`);
  if (scenario.floor?.beaconNode === id) uses.push("sender of the beacon");
  return uses;
}

/** Without the node. Loops keep the number of a node that is gone, so that the page can say who misses it. */
export function removeNode(json: unknown, index: number): Edit {
  const floor = floorOf(json);
  const id = floor?.nodes[index]?.id;
  const edit = remove(json, NODES, index);
  if (edit.kind !== "put" || id === undefined) return edit;
  let next = withMatrix(edit.json, (prr) => prr.toSpliced(index, 1).map((row) => row.toSpliced(index, 1)));
  if (floor?.beaconNode === id) next = setAt(next, ["floor", "beaconNode"], null);
  const messages = (next as Scenario).round.messages ?? [];
  if (messages.some(({ to }) => to.includes(id)))
    next = setAt(
      next,
      ["round", "messages"],
      messages.map((message) => ({ ...message, to: message.to.filter((one) => one !== id) })),
    );
  return { ...edit, json: next, forget: [MATRIX] };
}

/** Another number, everywhere where the node is named. */
export function renumberNode(json: unknown, index: number, id: number): Edit {
  const before = floorOf(json)?.nodes[index]?.id;
  const swap = (one: number): number => (one === before ? id : one);
  const swapNodes = (nodes: Nodes): Nodes =>
    nodes && { sensor: swap(nodes.sensor), controller: swap(nodes.controller), actuator: swap(nodes.actuator) };
  let next = setAt(json, [...NODES, index, "id"], id) as Scenario;
  next.loops.forEach((loop, i) => {
    if (loop.nodes) next = setAt(next, ["loops", i, "nodes"], swapNodes(loop.nodes)) as Scenario;
  });
  next.round.otherLoops?.forEach((loop, i) => {
    if (loop.nodes) next = setAt(next, ["round", "otherLoops", i, "nodes"], swapNodes(loop.nodes)) as Scenario;
  });
  next.round.messages?.forEach((message, i) => {
    if (message.from === before) next = setAt(next, ["round", "messages", i, "from"], id) as Scenario;
    if (before !== undefined && message.to.includes(before)) next = setAt(next, ["round", "messages", i, "to"], message.to.map(swap)) as Scenario;
  });
  if (next.floor?.beaconNode === before) next = setAt(next, ["floor", "beaconNode"], id) as Scenario;
  return put(next, { forget: [[...NODES, index, "id"]] });
}

/** Moved to a place; a drag or a held key is one step. */
export function placeNode(json: unknown, index: number, spot: { xM: number; yM: number }, step: string): Edit {
  const node = floorOf(json)?.nodes[index];
  return { kind: "set", path: [...NODES, index], value: { ...node, ...spot }, step };
}

export const placeInterferer = (json: unknown, index: number, spot: { xM: number; yM: number }, step: string): Edit => ({
  kind: "set",
  path: [...INTERFERERS, index],
  value: { ...floorOf(json)?.interferers[index], ...spot },
  step,
});

export const shapeObstacle = (index: number, value: Obstacle, step: string): Edit => ({ kind: "set", path: [...OBSTACLES, index], value, step });

/** The obstacle as a whole, elsewhere. */
export function shifted(obstacle: Obstacle, dx: number, dy: number): Obstacle {
  const on = (value: number) => Number(Math.max(0, value).toFixed(3));
  return obstacle.type === "wall"
    ? { ...obstacle, fromXM: on(obstacle.fromXM + dx), toXM: on(obstacle.toXM + dx), fromYM: on(obstacle.fromYM + dy), toYM: on(obstacle.toYM + dy) }
    : { ...obstacle, xM: on(obstacle.xM + dx), yM: on(obstacle.yM + dy) };
}

export const addObstacle = (json: unknown, obstacle: Obstacle): Edit => append(json, OBSTACLES, obstacle);
export const addInterferer = (json: unknown, interferer: Interferer): Edit => append(json, INTERFERERS, interferer);
export const removeObstacle = (json: unknown, index: number): Edit => remove(json, OBSTACLES, index);
export const removeInterferer = (json: unknown, index: number): Edit => remove(json, INTERFERERS, index);
export const duplicateObstacle = (json: unknown, index: number): Edit => duplicate(json, OBSTACLES, index);

export const WALL_LOSS_DB = 6;
export const BLOCK_LOSS_DB = 4.5;
export const newWall = (fromXM: number, fromYM: number, toXM: number, toYM: number): Obstacle => ({
  type: "wall",
  name: "",
  fromXM,
  fromYM,
  toXM,
  toYM,
  lossDb: WALL_LOSS_DB,
});
/** Between two corners. */
export function newBlock(ax: number, ay: number, bx: number, by: number): Obstacle {
  const side = (a: number, b: number) => Number(Math.max(0.1, Math.abs(a - b)).toFixed(3));
  return { type: "block", name: "", xM: Math.min(ax, bx), yM: Math.min(ay, by), widthM: side(ax, bx), depthM: side(ay, by), lossDb: BLOCK_LOSS_DB };
}
export const newInterferer = (xM: number, yM: number, centreMHz: number, bandwidthMHz: number, name = ""): Interferer => ({
  name,
  xM,
  yM,
  heightM: 2.5,
  powerDbm: 20,
  centreMHz,
  bandwidthMHz,
  activity: { type: "random", onShare: 0.3, meanOnS: 0.005 },
  fromS: 0,
  untilS: null,
});

/** A way-point after the last one, at walking pace. */
const PACE_M_PER_S = 1;
export function addWayPoint(json: unknown, index: number, spot: { xM: number; yM: number }): Edit {
  const node = floorOf(json)?.nodes[index];
  if (!node) return put(json);
  const last = node.wayPoints.at(-1) ?? { atS: 0, xM: node.xM, yM: node.yM };
  const away = Math.hypot(spot.xM - last.xM, spot.yM - last.yM);
  const atS = Number((last.atS + Math.max(0.1, away / PACE_M_PER_S)).toFixed(1));
  return append(json, [...NODES, index, "wayPoints"], { atS, ...spot });
}

/** Floods decide what is delivered from now on. */
export const letFloodsDecide = (json: unknown): Edit =>
  put(setAt(json, ["losses", "process"], { type: "flood" }), { forget: [["losses", "process"]] });
