/** The slot table in words and as a file. */
import type { Slot } from "#shared/network/round.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { fixed, withUnit } from "#src/lib/format.ts";
import { type RoundPicture, roundsText, slotName, slotsEndS } from "./ribbon-geometry.ts";

const ms = (seconds: number) => withUnit(fixed(seconds * 1000, 2), "ms");

/** "3 Controller"; the number alone where the node has no name or there is no floor. */
export function nodeText(floor: Floor | null | undefined, id: number | null): string {
  if (id === null) return "–";
  const name = floor?.nodes.find((node) => node.id === id)?.name;
  return name ? `${id} ${name}` : String(id);
}

/** "3 Controller", "all 17", "4, 5, 9" */
export function neededByText(floor: Floor | null | undefined, to: readonly number[] | null): string {
  if (to === null) return floor ? `all ${floor.nodes.length}` : "all";
  return to.length === 1 ? nodeText(floor, to[0] ?? null) : to.join(", ");
}

export const roundsWord = (slot: Slot): string => roundsText(slot) || "every";

/** Time of a round in which some slot may be on the air; slots that share a place count once. */
export function occupiedS({ slots }: RoundPicture): number {
  let sum = 0;
  let until = 0;
  for (const { startS, endS } of [...slots].sort((a, b) => a.startS - b.startS)) {
    sum += Math.max(0, endS - Math.max(startS, until));
    until = Math.max(until, endS);
  }
  return sum;
}

/** "Slots 19.42 ms, compute 1.50 ms, guard 1.00 ms: the round fits with 3.08 ms in reserve" */
export function roundSum(timing: RoundPicture): string {
  const occupied = occupiedS(timing);
  const between = slotsEndS(timing) - occupied;
  const [own] = timing.loops;
  const computing = timing.loops.length === 1 && Math.abs(between - (own.computeUntilS - own.computeFromS)) < 1e-9;
  const parts = [
    `Slots ${ms(occupied)}`,
    ...(between > 5e-9 ? [`${computing ? "compute" : "between them"} ${ms(between)}`] : []),
    `guard ${ms(timing.guardS)}`,
  ];
  const fit = timing.fits
    ? `the round fits with ${ms(timing.reserveS)} in reserve`
    : `the round does not fit, ${ms(-timing.reserveS)} are missing; the shortest period is ${ms(Math.ceil(timing.shortestPeriodS * 1e5 - 1e-6) / 1e5)}`;
  return `${parts.join(", ")}: ${fit}`;
}

/** Delivered shares of the run, for the slots of the scenario's own loop; of a message with two slots only both together are known. */
export function deliveredOf(scenario: Scenario, result: RunResult): Record<string, number> | undefined {
  const [loop] = scenario.loops;
  const known = result.figures.messages.flatMap(({ message, sent, lost }): [string, number][] => {
    const copies = message === "measurement" ? loop.sensor.copies : loop.actuator.copies;
    return sent > 0 && copies === 1 ? [[`${loop.id}/${message}`, 1 - lost / sent]] : [];
  });
  return known.length > 0 ? Object.fromEntries(known) : undefined;
}

const cell = (value: string | number): string => (/[",\n]/.test(String(value)) ? `"${String(value).replaceAll('"', '""')}"` : String(value));

/** One row per slot; times in whole units of the head, exact to the nanosecond. */
export function slotsCsv(timing: RoundPicture, floor: Floor | null | undefined, delivered?: Readonly<Record<string, number>>): string {
  const exact = (seconds: number, factor: number) => String(Number((seconds * factor).toFixed(6)));
  const head = [
    "slot",
    "message",
    "loop",
    "from",
    "needed by",
    "every so many rounds",
    "first round",
    "payload (B)",
    "airtime (us)",
    "steps",
    "starts (ms)",
    "flood starts (ms)",
    "ends (ms)",
    "slot (ms)",
    ...(delivered ? ["delivered (%)"] : []),
  ];
  const rows = timing.slots.map((slot, i) => [
    i + 1,
    slotName({ ...timing, loops: timing.loops.slice(0, 1) }, slot),
    timing.loops.find(({ loop }) => loop === slot.loop)?.name ?? "",
    slot.from === null ? "" : nodeText(floor, slot.from),
    slot.to === null ? "all" : slot.to.map((id) => nodeText(floor, id)).join("; "),
    slot.everyRounds,
    slot.firstRound,
    slot.payloadBytes,
    exact(slot.airtimeS, 1e6),
    slot.steps,
    exact(slot.startS, 1e3),
    exact(slot.floodStartS, 1e3),
    exact(slot.endS, 1e3),
    exact(slot.endS - slot.startS, 1e3),
    ...(delivered ? [slot.id in delivered ? exact(delivered[slot.id] ?? 0, 100) : ""] : []),
  ]);
  return `${[head, ...rows].map((row) => row.map(cell).join(",")).join("\r\n")}\r\n`;
}
