/** Who is who on a floor, and how link models are called. */
import type { Floor, LinkBudgetSettings } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { listed, significant, withUnit } from "#src/lib/format.ts";
import { getAt } from "#src/pages/scenario/model/json-path.ts";

export type Role = "sensor" | "controller" | "actuator" | "beacon";
export interface RoleAt {
  role: Role;
  loop: string | null;
}

/** By node number: what runs on it. The beacon's host is the controller's node unless the floor says otherwise. */
export function rolesOf(json: unknown): Map<number, RoleAt[]> {
  const roles = new Map<number, RoleAt[]>();
  const add = (id: number | null | undefined, role: Role, loop: string | null) => {
    if (typeof id === "number") roles.set(id, [...(roles.get(id) ?? []), { role, loop }]);
  };
  const { loops = [], round } = json as Scenario;
  const several = loops.length + (round?.otherLoops?.length ?? 0) > 1;
  for (const loop of [...loops, ...(round?.otherLoops ?? [])])
    for (const part of ["sensor", "controller", "actuator"] as const) add(loop.nodes?.[part], part, several ? loop.name : null);
  if (round?.beacon) add((getAt(json, ["floor", "beaconNode"]) as number | null) ?? loops[0]?.nodes?.controller, "beacon", null);
  return roles;
}

const WORDS: Record<Role, string> = { sensor: "sensor", controller: "controller", actuator: "actuator", beacon: "sends the beacon" };

/** "controller, sends the beacon"; "relay" when nothing runs on it. */
export function roleText(roles: readonly RoleAt[] | undefined): string {
  if (!roles || roles.length === 0) return "relay";
  return listed(roles.map(({ role, loop }) => (loop && role !== "beacon" ? `${WORDS[role]} of ${loop}` : WORDS[role])));
}

export const PATH_LOSS = [
  { value: "log-distance", word: "Log-distance", hint: "Loss at 1 m and 10 n dB a decade; n from measurements of the hall" },
  { value: "free-space", word: "Free space", hint: "ITU-R P.525: nothing but air" },
  { value: "p1238-10", word: "ITU-R P.1238, industrial", hint: "Edition 10 (2019), with and without line of sight" },
  { value: "p1238-8", word: "ITU-R P.1238, buildings", hint: "Edition 8 (2015): residential, office, commercial" },
  { value: "indoor-factory", word: "3GPP indoor factory", hint: "TR 38.901, table 7.4.1-1: by clutter and height of the antennas" },
] as const;

export const P1238_10 = [
  { value: "industrial-los", word: "in line of sight" },
  { value: "industrial-nlos", word: "without" },
];
export const P1238_8 = [
  { value: "residential", word: "residential" },
  { value: "office", word: "office" },
  { value: "commercial", word: "commercial" },
];
export const CLUTTER = [
  { value: "LOS", word: "line of sight" },
  { value: "SL", word: "sparse clutter, low antennas" },
  { value: "DL", word: "dense clutter, low antennas" },
  { value: "SH", word: "sparse clutter, high antennas" },
  { value: "DH", word: "dense clutter, high antennas" },
];

/** "Log-distance path loss, exponent 3.45; shadowing 1.7 dB, the same in every run; dryer averaged over on and off." */
export function linkModelText(links: LinkBudgetSettings, { interferers }: Floor): string {
  const { pathLoss, shadowing, fading } = links;
  const word = PATH_LOSS.find(({ value }) => value === pathLoss.type)?.word ?? pathLoss.type;
  const detail =
    pathLoss.type === "log-distance"
      ? `, exponent ${significant(pathLoss.exponent, 3)}`
      : pathLoss.type === "indoor-factory"
        ? `, ${CLUTTER.find(({ value }) => value === pathLoss.clutter)?.word}`
        : "";
  const parts = [
    `${word} path loss${detail}`,
    shadowing.sigmaDb > 0 ? `shadowing ${withUnit(significant(shadowing.sigmaDb, 3), "dB")}, the same in every run` : "no shadowing",
    ...(fading ? ["averaged over Rician fading"] : []),
    ...(interferers.length === 1 ? [`${interferers[0].name || "the interferer"} averaged over on and off`] : []),
    ...(interferers.length > 1 ? ["interferers averaged over on and off"] : []),
  ];
  return `${parts.join("; ")}.`;
}
