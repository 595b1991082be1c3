/** The round ribbon: one round to scale between two posts. Everything comes from the round's timing. Pixels and seconds. */
import type { LoopTiming, RoundTiming, Slot } from "#shared/network/round.ts";

/** What the picture needs of a timing; lists carry no more than this. */
export type RoundPicture = Omit<RoundTiming, "ns" | "savings" | "issues">;

export interface Stair {
  slot: Slot;
  /** Outline, from the base up one stair per hop, along, and down again; closed. */
  path: string;
  /** Divisions between steps, with the height of the stair before each. */
  divisions: { x: number; top: number }[];
  /** Middle and height of the tread on which the wave stands after each of the first H steps. */
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
export function ribbonScale(timing: RoundPicture, left: number, right: number): RibbonScale {
  const slotsEnd = timing.slots[timing.slots.length - 1]?.endS ?? 0;
  const endS = Math.max(timing.periodS, slotsEnd + timing.guardS, ...timing.loops.flatMap((loop) => [loop.actAtS, loop.computeUntilS]));
  const xOf = (seconds: number) => left + (seconds / endS) * (right - left);
  return { left, right, endS, post: xOf(timing.periodS), xOf };
}

/** Share of the height on which the wave stands after step s (from 1): hop s, at the latest on a line without loss, up to hop H. */
export const waveShare = (step: number, hops: number): number => Math.min(step, hops) / hops;

const round = (value: number): string => String(Math.round(value * 100) / 100);

export function stairOf(slot: Slot, hops: number, scale: RibbonScale, base: number, height: number, shiftS = 0): Stair {
  const x = (seconds: number) => scale.xOf(seconds + shiftS);
  const topOf = (step: number) => base - height * waveShare(step, Math.min(hops, slot.steps));
  let path = `M${round(x(slot.floodStartS))} ${round(base)}`;
  const divisions: Stair["divisions"] = [];
  const treads: Stair["treads"] = [];
  for (let step = 1; step <= slot.steps; step++) {
    const from = x(slot.floodStartS + (step - 1) * slot.stepS);
    const until = x(slot.floodStartS + step * slot.stepS);
    path += `V${round(topOf(step))}H${round(until)}`;
    if (step > 1) divisions.push({ x: from, top: topOf(step - 1) });
    if (step <= hops) treads.push({ x: (from + until) / 2, top: topOf(step), hop: step });
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
  const of = (message: Slot["message"]) => timing.slots.find((slot) => slot.message === message && slot.loop === loop.loop);
  const measurement = of("measurement");
  const command = of("command");
  const later = loop.commandDelay * timing.periodS;
  const parts: LanePart[] = [];
  let at = loop.sampleAtS;
  const add = (kind: LanePart["kind"], fromS: number, untilS: number, words: string) => {
    if (fromS > at + 1e-9) parts.push({ kind: "wait", fromS: at, untilS: fromS, words: "waits" });
    if (untilS > fromS) parts.push({ kind, fromS, untilS, words });
    at = Math.max(at, untilS);
  };
  if (measurement) add("way", measurement.startS, measurement.endS, "measurement on its way");
  add("computes", loop.computeFromS, loop.computeUntilS, "computes");
  if (command) add("way", command.startS + later, command.endS + later, "command on its way");
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

/** What the picture shows, in words. */
export function ribbonText(timing: RoundPicture): string {
  const ms = (seconds: number) => `${Number((seconds * 1000).toPrecision(4))} ms`;
  const slots = timing.slots.map(({ label, startS, endS }) => `${label} from ${ms(startS)} to ${ms(endS)}`);
  const fit = timing.fits ? `${ms(timing.reserveS)} reserve` : `too long by ${ms(-timing.reserveS)}`;
  return [
    `One round of ${ms(timing.periodS)}: ${slots.length > 0 ? slots.join(", ") : "no slots"}`,
    ...timing.loops.map(
      (loop) =>
        `${timing.loops.length > 1 ? `${loop.name} ` : ""}samples at ${ms(loop.sampleAtS)}, computes from ${ms(loop.computeFromS)} to ${ms(loop.computeUntilS)}, acts at ${ms(loop.actAtS)}, latency ${ms(loop.latencyS)}`,
    ),
    fit,
  ].join("; ");
}
