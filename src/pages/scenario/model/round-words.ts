/** Radio, round and replayed losses in a few words: sums of folded parts, list entries, lists of changes. */
import { channelsInUse } from "#shared/network/channels.ts";
import { nodesOf } from "#shared/network/demand.ts";
import { type EnergyBound, energyBound } from "#shared/network/energy.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import type { OtherLoop, OtherMessage, Radio } from "#shared/scenario/round-schema.ts";
import type { LossProcess, Scenario } from "#shared/scenario/schema.ts";
import { chargeText, lifeText } from "#src/components/drawings/spent.ts";
import { counted, countText, msText, percentText, significant, withUnit } from "#src/lib/format.ts";
import { numbersAsText } from "./channel-text.ts";
import { BEACON_MISSED, HOPPING, wordOf } from "./choices.ts";
import { getAt, type Path } from "./json-path.ts";

const everyText = ({ everyRounds }: { everyRounds: number }): string => (everyRounds > 1 ? `every ${everyRounds} rounds` : "every round");
const bitsText = (bits: number, copies: number): string => `${bits} bits${copies > 1 ? " twice" : ""}`;

export function otherLoopText({ placement, measurementBits, measurementCopies, commandBits, commandCopies, planLength, ...loop }: OtherLoop): string {
  return [
    everyText(loop),
    ...(placement === "sensor" ? [] : [`measurement ${bitsText(measurementBits, measurementCopies)}`]),
    ...(placement === "actuator" ? [] : [`command ${bitsText(commandBits * planLength, commandCopies)}`]),
  ].join(", ");
}

export function otherMessageText({ payloadBytes, copies, from, to, ...message }: OtherMessage): string {
  const who = from === null ? [] : [`${from} to ${to.length === 0 ? "all" : numbersAsText(to)}`];
  return [...who, withUnit(String(payloadBytes), "B"), everyText(message), ...(copies > 1 ? ["two slots"] : [])].join(", ");
}

const entryAt = <T>(json: unknown, path: Path) => getAt(json, path) as T;

export const ROUND_LISTS: Record<string, { name: (json: unknown, path: Path) => string; say: (json: unknown, path: Path) => string }> = {
  "round.otherLoops": {
    name: (json, path) => {
      const { name } = entryAt<OtherLoop>(json, path);
      return /^loop\b/i.test(name) ? name : `Loop ${name}`;
    },
    say: (json, path) => otherLoopText(entryAt<OtherLoop>(json, path)),
  },
  "round.messages": {
    name: (json, path) => `Message ${entryAt<OtherMessage>(json, path).name}`,
    say: (json, path) => otherMessageText(entryAt<OtherMessage>(json, path)),
  },
};

/** What a setting belongs to, by the beginning of its pattern. */
export const ROUND_OWNERS: readonly (readonly [string, string])[] = [
  ["radio.channels", "Radio"],
  ["radio.reception", "Radio"],
  ["radio.power", "Radio"],
  ["radio.battery", "Radio"],
  ["radio.txPowerDbm", "Radio"],
  ["loops[].nodes.", "Loop"],
  ["loops[].timing.everyRounds", "Loop"],
  ["loops[].timing.firstRound", "Loop"],
  ["losses.process.measurement.", "Replay"],
  ["losses.process.command.", "Replay"],
];

type Nodes = NonNullable<Scenario["loops"][number]["nodes"]>;
const nodesText = ({ sensor, controller, actuator }: Nodes): string => `sensor ${sensor}, controller ${controller}, actuator ${actuator}`;

/** "1000 packets, 52 lost" of run lengths: delivered, lost, delivered, ... */
export function runsFacts(runs: readonly number[]): { packets: number; lost: number; longest: number } {
  let packets = 0;
  let lost = 0;
  let longest = 0;
  runs.forEach((run, i) => {
    packets += run;
    if (i % 2 === 0) return;
    lost += run;
    longest = Math.max(longest, run);
  });
  return { packets, lost, longest };
}

export function runsText(runs: readonly number[]): string {
  const { packets, lost, longest } = runsFacts(runs);
  if (packets === 0) return "nothing recorded";
  return `${countText(packets)} packets, ${countText(lost)} lost (${percentText(lost / packets, lost / packets < 0.01 ? 2 : 1)}), at most ${longest} in a row`;
}

type Replay = Extract<LossProcess, { type: "replay" }>;
export const replayText = ({ log, measurement }: Replay): string =>
  log ? `as recorded in \u201c${log.name}\u201d` : runsFacts(measurement.runs).packets > 0 ? "as recorded" : "as recorded, no log yet";

/** All of a part that is compared as a whole; by its pattern. */
export const ROUND_WHOLES: Record<string, (value: unknown) => string> = {
  "radio.channels.list": (value) => ((value as number[]).length > 0 ? numbersAsText(value) : "the PHY's last"),
  "radio.reception.rows": (value) => counted((value as unknown[]).length, "row"),
  "round.beacon.needed": (value) => wordOf(BEACON_MISSED, value ? "yes" : "no"),
  "round.messages[].to": (value) => ((value as number[]).length > 0 ? numbersAsText(value) : "all"),
  "loops[].nodes": (value) => nodesText(value as Nodes),
  "round.otherLoops[].nodes": (value) => nodesText(value as Nodes),
  "losses.process.measurement.runs": (value) => runsText(value as number[]),
  "losses.process.command.runs": (value) => runsText(value as number[]),
  "losses.process.log": (value) => `\u201c${(value as NonNullable<Replay["log"]>).name}\u201d`,
};

export function describeChannels(radio: Radio): string {
  const used = channelsInUse(radio);
  const list = numbersAsText(used);
  return used.length > 1 ? `${list.length > 20 ? counted(used.length, "channel") : list}, ${wordOf(HOPPING, radio.channels.hopping)}` : list;
}

export const describeReception = ({ reception }: Radio): string =>
  reception.type === "table"
    ? `table${reception.name ? ` \u201c${reception.name}\u201d` : ""}, ${counted(reception.rows.length, "row")}`
    : "the standard's formula";

export const describePower = ({ power, battery }: Radio): string =>
  `${power.device || "own figures"}, ${withUnit(significant(battery.capacityMah, 4), "mAh")}`;

/** "Hall 2 · 17 nodes · 0 dBm" */
export function describeFloorRadio({ floor, radio }: Pick<Scenario, "floor" | "radio">): string {
  const where = floor ? [floor.name || "floor", counted(floor.nodes?.length ?? 0, "node")] : ["no floor"];
  return [...where, withUnit(significant(radio?.txPowerDbm ?? 0, 3), "dBm")].join(" · ");
}

export function describeNodes(json: unknown): string {
  const nodes = getAt(json, ["loops", 0, "nodes"]) as Nodes | null | undefined;
  if (!nodes) return "not said";
  const placed = nodesOf(nodes, getAt(json, ["loops", 0, "controller", "placement"]) as "sensor" | "apart" | "actuator");
  return placed ? `${placed.sensor}, ${placed.controller}, ${placed.actuator}` : "not said";
}

/** Charge and life of the node that spends most, as far as the round alone says; null where it cannot be computed. */
export function boundOf(json: unknown, timing: RoundTiming | null): EnergyBound | null {
  if (!timing) return null;
  try {
    return energyBound(json as Scenario, timing);
  } catch {
    return null;
  }
}

export const boundText = (bound: EnergyBound): string =>
  `Radio on at most ${msText(bound.radioOnS)} a round, ${chargeText(bound.chargeC)}; the battery lasts at least ${lifeText(bound.batteryDays)}.`;
