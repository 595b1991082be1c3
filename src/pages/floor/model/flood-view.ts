/** One flood of a recorded run, step by step: who sends, who has the message, and what became of it, in sentences. */
import { NO_SLOT, NOT_RECEIVED, RADIO_OFF, type Relay, received, sendsIn } from "#shared/network/flood.ts";
import type { FloodRecord } from "#shared/network/floods.ts";
import { occurs, type Slot } from "#shared/network/round.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import type { NodeState } from "#src/components/plan/marks.tsx";
import type { MarkState } from "#src/components/ui/mark.tsx";
import { countedInWords, listed, msText } from "#src/lib/format.ts";

export interface FloodShown {
  slot: Slot;
  slotIndex: number;
  round: number;
  /** Per node, in the floor's order: step of first reception, 0 at the source; else one of the codes of flood.ts. */
  first: Uint8Array;
  nodes: readonly number[];
  steps: number;
}

export function floodShown(record: FloodRecord, slot: Slot, slotIndex: number, round: number): FloodShown {
  const n = record.nodes.length;
  const at = (round * record.slots + slotIndex) * n;
  return { slot, slotIndex, round, first: record.firstStep.subarray(at, at + n), nodes: record.nodes, steps: slot.steps };
}

const source = (flood: FloodShown): number => flood.first.indexOf(0);

/** States at a step, 1 to the slot's steps. Lost is only said at the last step, when nothing can come any more. */
export function statesAt(flood: FloodShown, relay: Relay, step: number): NodeState[] {
  const { first, steps } = flood;
  return Array.from(first, (at): NodeState => {
    if (at === RADIO_OFF || at === NO_SLOT) return "off";
    if (at === 0) return step === 1 || !sendsIn(relay, at, step) ? "starts" : "sends";
    if (at === NOT_RECEIVED) return step >= steps ? "lost" : "waiting";
    if (at > step) return "waiting";
    if (at === step) return "receives";
    return sendsIn(relay, at, step) ? "sends" : "has";
  });
}

/** Nodes that have the message after each step, the source too. */
export function reachedBy(flood: FloodShown): number[] {
  const counts = new Array<number>(flood.steps).fill(0);
  for (const at of flood.first) if (received(at) && at <= flood.steps) for (let s = Math.max(at, 1); s <= flood.steps; s++) counts[s - 1]++;
  return counts;
}

/** Indices of the nodes that need the message. */
export function neededBy({ slot, nodes, first }: FloodShown): number[] {
  const all = nodes.map((_, i) => i).filter((i) => first[i] !== 0);
  return slot.to === null ? all : all.filter((i) => slot.to?.includes(nodes[i]));
}

const didReceive = (flood: FloodShown, i: number): boolean => received(flood.first[i]);

/** Was it lost at somebody who needs it? */
export const isMissed = (flood: FloodShown): boolean => neededBy(flood).some((i) => !didReceive(flood, i));

/** The next round, from `from` on in this direction, in which somebody who needs the slot's message missed it. */
export function nextMissed(record: FloodRecord, slot: Slot, slotIndex: number, from: number, direction: 1 | -1): number | null {
  for (let round = from + direction; round >= 0 && round < record.rounds; round += direction) {
    if (occurs(slot, round) && isMissed(floodShown(record, slot, slotIndex, round))) return round;
  }
  return null;
}

/** The nearest round, in this direction, in which the slot occurs. */
export function nextOccurring(slot: Slot, rounds: number, from: number, direction: 1 | -1): number | null {
  for (let round = from + direction; round >= 0 && round < rounds; round += direction) if (occurs(slot, round)) return round;
  return null;
}

export interface Sentence {
  mark: MarkState;
  text: string;
}

/** "3 Controller" */
export const shortName = (floor: Floor, id: number): string => {
  const name = floor.nodes.find((node) => node.id === id)?.name;
  return name ? `${id}\u2060\u00a0${name}` : String(id);
};

const MOST_NAMES = 5;
const names = (floor: Floor, ids: readonly number[]): string =>
  ids.length > MOST_NAMES
    ? `${ids
        .slice(0, MOST_NAMES)
        .map((id) => shortName(floor, id))
        .join(", ")} and ${ids.length - MOST_NAMES} more`
    : listed(ids.map((id) => shortName(floor, id)));

/** Within so many metres a node stands beside an interferer. */
const BESIDE_M = 8;

function besideText(floor: Floor, id: number): string {
  const node = floor.nodes.find((one) => one.id === id);
  if (!node) return "";
  const near = floor.interferers
    .map((one) => ({ name: one.name, away: Math.hypot(one.xM - node.xM, one.yM - node.yM) }))
    .filter(({ away, name }) => away <= BESIDE_M && name !== "")
    .sort((a, b) => a.away - b.away)[0];
  return near ? `, beside the ${near.name.charAt(0).toLowerCase()}${near.name.slice(1)}` : "";
}

/** What became of the flood: delivered where it is needed, lost where it is not, what was not needed. */
export function floodSentences(flood: FloodShown, floor: Floor): Sentence[] {
  const { slot, nodes, first, steps } = flood;
  const from = source(flood);
  if (from < 0) {
    const sender = slot.from === null ? null : shortName(floor, slot.from);
    return [
      {
        mark: "crosses",
        text: sender
          ? `Nobody sent: ${sender} was out of service, or had missed the round's beacon.`
          : "Nobody sent: the round does not say which node starts this flood.",
      },
    ];
  }
  const needed = neededBy(flood);
  const missed = needed.filter((i) => !didReceive(flood, i)).map((i) => nodes[i]);
  const got = needed.filter((i) => didReceive(flood, i));
  const sentences: Sentence[] = [];
  const all = slot.to === null;
  if (got.length > 0) {
    const last = Math.max(...got.map((i) => first[i]));
    const spare = steps - last;
    const whom =
      all && missed.length === 0
        ? `all ${nodes.length}`
        : names(
            floor,
            got.map((i) => nodes[i]),
          );
    const redundancy =
      missed.length > 0
        ? ""
        : spare === 0
          ? " It needed every step of the slot."
          : ` ${countedInWords(spare, "step")} ${spare === 1 ? "was" : "were"} not needed: ${msText(spare * slot.stepS, 2)} of the slot ${spare === 1 ? "is" : "are"} redundancy.`;
    sentences.push({ mark: "holds", text: `Delivered to ${whom} ${all ? "by" : "in"} step ${last} of ${steps}.${redundancy}` });
  }
  const off = (id: number) => first[nodes.indexOf(id)] === RADIO_OFF;
  const silent = missed.filter(off);
  const lost = missed.filter((id) => !off(id));
  if (lost.length > 0)
    sentences.push({
      mark: "crosses",
      text: `Lost at ${names(floor, lost)}${lost.length === 1 ? besideText(floor, lost[0]) : ""}. ${slot.loop ? "The loop needs it there." : "It is needed there."}`,
    });
  if (silent.length > 0)
    sentences.push({ mark: "crosses", text: `Not heard by ${names(floor, silent)}: out of service, or silent after a missed beacon.` });
  const elsewhere = nodes.filter((_, i) => !needed.includes(i) && first[i] !== 0 && !didReceive(flood, i) && first[i] !== RADIO_OFF);
  if (elsewhere.length > 0)
    sentences.push({
      mark: "not-decided",
      text: `Lost at ${names(floor, elsewhere)}${elsewhere.length === 1 ? besideText(floor, elsewhere[0]) : ""}. No loop needs it there.`,
    });
  const offElsewhere = nodes.filter((_, i) => !needed.includes(i) && first[i] === RADIO_OFF);
  if (offElsewhere.length > 0) sentences.push({ mark: "not-decided", text: `Out of service: ${names(floor, offElsewhere)}.` });
  return sentences;
}
