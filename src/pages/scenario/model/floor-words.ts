/** The floor's parts in a few words, for lists of changes and for the plan's own lists. */
import type { Floor, FloorNode, Interferer, Obstacle } from "#shared/scenario/floor-schema.ts";
import { counted, percentText, significant, withUnit } from "#src/lib/format.ts";
import { getAt, type Path } from "./json-path.ts";

const metres = (value: unknown): string => (typeof value === "number" ? withUnit(significant(value, 4), "m") : "none");
const placeText = (xM: unknown, yM: unknown): string => `${metres(xM)} across, ${metres(yM)} down`;
const nth = (word: string, path: Path): string => `${word} ${Number(path.at(-1)) + 1}`;

/** "Node 11, Truck" */
export const nodeName = ({ id, name }: Pick<FloorNode, "id" | "name">): string => (name ? `Node ${id}, ${name}` : `Node ${id}`);

/** "Rack 2" by its own name, else "Wall 3". */
export const obstacleName = ({ name, type }: Pick<Obstacle, "name" | "type">, index: number): string =>
  name || `${type === "wall" ? "Wall" : "Block"} ${index + 1}`;

export const interfererName = ({ name }: Pick<Interferer, "name">, index: number): string => name || `Interferer ${index + 1}`;

/** "on 35 % of the time" */
export function activityText(activity: Interferer["activity"]): string {
  if (activity.type === "always") return "always on";
  const share = activity.type === "random" ? activity.onShare : activity.onS / (activity.onS + activity.offS);
  return `on ${percentText(share, share < 0.1 ? 1 : 0)} of the time`;
}

export const obstacleText = (obstacle: Obstacle): string => `weakens by ${withUnit(significant(obstacle.lossDb, 3), "dB")}`;

const named =
  <T>(say: (value: T, index: number) => string) =>
  (json: unknown, path: Path) => {
    const value = getAt(json, path);
    return value !== null && typeof value === "object" ? say(value as T, Number(path.at(-1))) : nth("Entry", path);
  };

export const FLOOR_LISTS: Record<string, { name: (json: unknown, path: Path) => string; say: (json: unknown, path: Path) => string }> = {
  "floor.nodes": { name: named<FloorNode>(nodeName), say: named<FloorNode>(({ xM, yM }) => placeText(xM, yM)) },
  "floor.obstacles": { name: named<Obstacle>(obstacleName), say: named<Obstacle>(obstacleText) },
  "floor.interferers": {
    name: named<Interferer>(interfererName),
    say: named<Interferer>(({ powerDbm, activity }) => `${withUnit(significant(powerDbm, 3), "dBm")}, ${activityText(activity)}`),
  },
  "floor.nodes[].wayPoints": {
    name: (json, path) => `${named<FloorNode>(nodeName)(json, path.slice(0, -2))}, ${nth("way-point", path)}`,
    say: named<FloorNode["wayPoints"][number]>(({ atS, xM, yM }) => `${withUnit(significant(atS, 4), "s")}: ${placeText(xM, yM)}`),
  },
  "floor.nodes[].outages": {
    name: (json, path) => `${named<FloorNode>(nodeName)(json, path.slice(0, -2))}, ${nth("outage", path)}`,
    say: named<FloorNode["outages"][number]>(
      ({ fromS, untilS }) => `${withUnit(significant(fromS, 4), "s")} to ${untilS === null ? "the end" : withUnit(significant(untilS, 4), "s")}`,
    ),
  },
};

/** What a setting belongs to, by the beginning of its pattern. */
export const FLOOR_OWNERS: readonly (readonly [string, string])[] = [
  ["floor.links.shadowing", "Links"],
  ["floor.links.fading", "Fading"],
  ["floor.links", "Links"],
  ["floor.picture", "Picture"],
  ["floor.", "Floor"],
];

/** "72 × 40 m, 17 nodes" */
export const floorText = ({ widthM, depthM, nodes }: Floor): string =>
  `${significant(widthM, 4)} × ${metres(depthM)}, ${counted(nodes.length, "node")}`;

export const FLOOR_WHOLES: Record<string, (value: unknown) => string> = {
  floor: (value) => floorText(value as Floor),
  "floor.picture": () => "a picture",
  "floor.links.fading": (value) => `Rician, K ${withUnit(significant((value as { kDb: number }).kDb, 3), "dB")}`,
  "floor.links.prr": (value) => `a table of ${(value as unknown[]).length} × ${(value as unknown[]).length}`,
};
