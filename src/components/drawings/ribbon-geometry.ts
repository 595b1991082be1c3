/** The round ribbon: one round to scale between two posts. Everything comes from the round's timing. Pixels and seconds. */
import type { LoopTiming, RoundTiming, Slot } from "#shared/network/round.ts";

/** What the picture needs of a timing; lists carry no more than this. */
export type RoundPicture = Omit<RoundTiming, "ns" | "savings" | "issues">;

/** Share of the nodes that have a slot's message after each of its steps, by the slot's id. */
export type ReachedShares = Readonly<Record<string, readonly number[]>>;

/** Where slots end, the last of them: their order in the table is not that of their ends. */
export const slotsEndS = (timing: RoundPicture): number => Math.max(0, ...timing.slots.map(({ endS }) => endS));

/** "0, 2, 4 …": the rounds in which something occurs; "" when it does in every one. */
export function roundsText({ everyRounds, firstRound }: { everyRounds: number; firstRound: number }): string {
  if (everyRounds === 1) return "";
  return `${[0, 1, 2].map((k) => firstRound + k * everyRounds).join(", ")} …`;
}

/**
 * Slots of different rounds may share a place. Line of each slot, from 0: the lowest on which nothing is in its way; what
 * occurs in every round lies lowest.
 */
export function linesOf(slots: readonly Slot[]): number[] {
  const lines = new Array<number>(slots.length).fill(0);
  const laid: number[] = [];
  const inOrder = slots.map((_, index) => index).sort((a, b) => slots[a].everyRounds - slots[b].everyRounds || slots[a].startS - slots[b].startS);
  for (const index of inOrder) {
    const { startS, endS } = slots[index];
    const taken = new Set(
      laid.filter((other) => slots[other].endS > startS + 1e-9 && slots[other].startS < endS - 1e-9).map((other) => lines[other]),
    );
    while (taken.has(lines[index])) lines[index]++;
    laid.push(index);
  }
  return lines;
}

export interface Stair {
  slot: Slot;
  /** Outline, from the base up one stair per step, along, and down again; closed. */
  path: string;
  /** Divisions between steps, with the height of the stair before each. */
  divisions: { x: number; top: number }[];
  /** Middle and height of the tread on which the wave stands after each of the first H steps; none where shares are known. */
  treads: { x: number; top: number; hop: number }[];
  wake: { from: number; until: number };
  left: number;
  right: number;
}

export interface RibbonScale {
  left: number;
  /** Where the round ends. */
  post: number;
  /** Where the drawn time ends: the post, or later when the round does not fit or acts in the next one. */
  right: number;
  endS: number;
  xOf(seconds: number): number;
}

/** The longest instant that has to be shown. */
export const drawnUntilS = (timing: RoundPicture): number =>
  Math.max(timing.periodS, slotsEndS(timing) + timing.guardS, ...timing.loops.flatMap((loop) => [loop.actAtS, loop.computeUntilS]));

/** All that happens, and at least what lies before untilS. */
export function ribbonScale(timing: RoundPicture, left: number, right: number, untilS = 0): RibbonScale {
  const endS = Math.max(untilS, drawnUntilS(timing));
  const xOf = (seconds: number) => left + (seconds / endS) * (right - left);
  return { left, right, endS, post: xOf(timing.periodS), xOf };
}

/** Share of the height on which the wave stands after step s (from 1): hop s, at the latest on a line without loss, up to hop H. */
export const waveShare = (step: number, hops: number): number => Math.min(step, hops) / hops;

const round = (value: number): string => String(Math.round(value * 100) / 100);

export interface StairPlace {
  base: number;
  height: number;
  /** Drawn so much later: in the round that follows. */
  shiftS?: number;
  /** Share of the nodes reached after each step; left out: the hop that the wave has reached. */
  shares?: readonly number[];
}

export function stairOf(slot: Slot, hops: number, scale: RibbonScale, { base, height, shiftS = 0, shares }: StairPlace): Stair {
  const x = (seconds: number) => scale.xOf(seconds + shiftS);
  const topOf = (step: number) => base - height * (shares ? (shares[step - 1] ?? shares.at(-1) ?? 0) : waveShare(step, Math.min(hops, slot.steps)));
  let path = `M${round(x(slot.floodStartS))} ${round(base)}`;
  const divisions: Stair["divisions"] = [];
  const treads: Stair["treads"] = [];
  for (let step = 1; step <= slot.steps; step++) {
    const from = x(slot.floodStartS + (step - 1) * slot.stepS);
    const until = x(slot.floodStartS + step * slot.stepS);
    path += `V${round(topOf(step))}H${round(until)}`;
    if (step > 1) divisions.push({ x: from, top: topOf(step - 1) });
    if (step <= hops && !shares) treads.push({ x: (from + until) / 2, top: topOf(step), hop: step });
  }
  return {
    slot,
    path: `${path}V${round(base)}Z`,
    divisions,
    treads,
    wake: { from: x(slot.startS), until: x(slot.floodStartS) },
    left: x(slot.startS),
    right: x(slot.endS),
  };
}

export interface LanePart {
  kind: "way" | "wait" | "computes";
  fromS: number;
  untilS: number;
  words: string;
}

/** From sampling to acting, without a gap. A command that travels in the next round does so one period later. */
export function laneParts(timing: RoundPicture, loop: LoopTiming): LanePart[] {
  const of = (message: Slot["message"]) =>
    timing.slots.filter((slot) => slot.message === message && slot.loop === loop.loop).sort((a, b) => a.startS - b.startS);
  const later = loop.commandDelay * timing.periodS;
  const parts: LanePart[] = [];
  let at = loop.sampleAtS;
  const add = (kind: LanePart["kind"], fromS: number, untilS: number, words: string) => {
    if (fromS > at + 1e-9) parts.push({ kind: "wait", fromS: at, untilS: fromS, words: "waits" });
    if (untilS > fromS) parts.push({ kind, fromS, untilS, words });
    at = Math.max(at, untilS);
  };
  for (const { startS, endS } of of("measurement")) add("way", startS, endS, "measurement on its way");
  add("computes", loop.computeFromS, loop.computeUntilS, "computes");
  for (const { startS, endS } of of("command")) add("way", startS + later, endS + later, "command on its way");
  if (loop.actAtS > at + 1e-9) parts.push({ kind: "wait", fromS: at, untilS: loop.actAtS, words: "waits" });
  return parts;
}

export interface Placed {
  x: number;
  y: number;
  width: number;
  anchor: "start" | "middle" | "end";
}
const boxOf = ({ x, y, width, anchor }: Placed) => {
  const from = anchor === "start" ? x : anchor === "end" ? x - width : x - width / 2;
  return { from, until: from + width, top: y - 11, bottom: y + 3 };
};

/** Puts words where none are yet: the first of the offered places that is free and inside; null when there is none. */
export class WordPlacer {
  #taken: ReturnType<typeof boxOf>[] = [];
  readonly #left: number;
  readonly #right: number;
  constructor(left: number, right: number) {
    this.#left = left;
    this.#right = right;
  }
  /** Keeps words off a mark. */
  reserve(x: number, y: number, half: number): void {
    this.#taken.push({ from: x - half, until: x + half, top: y - half, bottom: y + half });
  }
  place(offers: readonly Placed[]): Placed | null {
    for (const offer of offers) {
      const box = boxOf(offer);
      if (box.from < this.#left || box.until > this.#right) continue;
      const hits = this.#taken.some(
        (other) => box.from < other.until + 5 && box.until > other.from - 5 && box.top < other.bottom && box.bottom > other.top,
      );
      if (hits) continue;
      this.#taken.push(box);
      return offer;
    }
    return null;
  }
}

/** "Measurement", "Measurement, second slot"; with the loop's name where there are several. */
export function slotName(timing: RoundPicture, { label, loop, copy }: Slot): string {
  const whose = timing.loops.length > 1 ? timing.loops.find((one) => one.loop === loop)?.name : undefined;
  return [label, ...(copy > 1 ? ["second slot"] : []), ...(whose ? [whose] : [])].join(", ");
}

/** What the picture shows, in words. */
export function ribbonText(timing: RoundPicture): string {
  const ms = (seconds: number) => `${Number((seconds * 1000).toPrecision(4))} ms`;
  const inRounds = (of: { everyRounds: number; firstRound: number }) => (of.everyRounds > 1 ? ` in rounds ${roundsText(of)}` : "");
  const slots = timing.slots.map((slot) => `${slotName(timing, slot)} from ${ms(slot.startS)} to ${ms(slot.endS)}${inRounds(slot)}`);
  const fit = timing.fits ? `${ms(timing.reserveS)} reserve` : `too long by ${ms(-timing.reserveS)}`;
  return [
    `One round of ${ms(timing.periodS)}: ${slots.length > 0 ? slots.join(", ") : "no slots"}`,
    ...timing.loops.map(
      (loop) =>
        `${timing.loops.length > 1 ? `${loop.name} ` : ""}samples at ${ms(loop.sampleAtS)}${inRounds(loop)}, computes from ${ms(loop.computeFromS)} to ${ms(loop.computeUntilS)}, acts at ${ms(loop.actAtS)}, latency ${ms(loop.latencyS)}`,
    ),
    fit,
  ].join("; ");
}
