import { sin } from "#shared/math/elementary.ts";
import { normalStream, uniformStream } from "#shared/math/random.ts";
import { toNs } from "#shared/network/schedule.ts";
import type { Push, Scenario } from "#shared/scenario/schema.ts";

export interface Impulse {
  atNs: number;
  channel: number;
  size: number;
}

interface Sustained {
  channel: number;
  fromNs: number;
  untilNs: number;
  /** Instants at which the formula changes, inside (from, until): the next one after a time. */
  nextBreak(tNs: number): number;
  /** Value at time t (s) within the segment that began at segmentNs. */
  value(t: number, segmentNs: number): number;
}

/** Values of a noise push, each held for its interval; the stream carries the push's place in the list. */
export function noiseValues(push: Extract<Push, { type: "noise" }>, index: number, seed: number, endS: number): Float64Array {
  const until = Math.min(push.untilS ?? endS, endS);
  const count = Math.max(0, Math.ceil((toNs(until) - toNs(push.fromS)) / toNs(push.intervalS)));
  const normal = normalStream(uniformStream(seed, `push/${index}`));
  return Float64Array.from({ length: count }, () => push.std * normal());
}

function sustained(push: Exclude<Push, { type: "impulse" }>, channel: number, index: number, seed: number, endS: number): Sustained {
  const fromNs = toNs(push.fromS);
  const whole = (untilNs: number, value: Sustained["value"], breakAt = Number.POSITIVE_INFINITY): Sustained => ({
    channel,
    fromNs,
    untilNs,
    nextBreak: (t) => (t < breakAt ? breakAt : Number.POSITIVE_INFINITY),
    value,
  });
  const held = (values: ArrayLike<number>, intervalNs: number, untilNs: number): Sustained => ({
    channel,
    fromNs,
    untilNs,
    nextBreak: (t) => (t < fromNs ? fromNs : fromNs + (Math.floor((t - fromNs) / intervalNs) + 1) * intervalNs),
    value: (_t, segmentNs) => values[Math.floor((segmentNs - fromNs) / intervalNs)] ?? 0,
  });
  switch (push.type) {
    case "step":
      return whole(push.untilS === null ? Number.POSITIVE_INFINITY : toNs(push.untilS), () => push.size);
    case "ramp": {
      const endNs = toNs(push.untilS);
      const slope = push.size / ((endNs - fromNs) / 1e9);
      return whole(Number.POSITIVE_INFINITY, (t, segmentNs) => (segmentNs >= endNs ? push.size : slope * (t - fromNs / 1e9)), endNs);
    }
    case "sine": {
      const omega = 2 * Math.PI * push.frequencyHz;
      return whole(
        push.untilS === null ? Number.POSITIVE_INFINITY : toNs(push.untilS),
        (t) => push.amplitude * sin(omega * (t - fromNs / 1e9) + push.phaseRad),
      );
    }
    case "noise": {
      const intervalNs = toNs(push.intervalS);
      return held(noiseValues(push, index, seed, endS), intervalNs, push.untilS === null ? Number.POSITIVE_INFINITY : toNs(push.untilS));
    }
    case "given": {
      const intervalNs = toNs(push.intervalS);
      return held(push.values, intervalNs, fromNs + push.values.length * intervalNs);
    }
  }
}

/** Everything that pushes the machine, by channel. */
export class Disturbance {
  readonly impulses: readonly Impulse[];
  readonly #sustained: readonly Sustained[];
  #active: Sustained[] = [];

  constructor(scenario: Scenario, channels: readonly string[], seed: number) {
    const indexed = scenario.pushes.map((push, index) => ({ push, index, channel: channels.indexOf(push.channel) }));
    this.impulses = indexed
      .flatMap(({ push, channel }) => (push.type === "impulse" ? [{ atNs: toNs(push.atS), channel, size: push.size }] : []))
      .sort((a, b) => a.atNs - b.atNs);
    this.#sustained = indexed.flatMap(({ push, index, channel }) =>
      push.type === "impulse" ? [] : [sustained(push, channel, index, seed, scenario.run.durationS)],
    );
  }

  /** Whether anything but impulses ever pushes. */
  get canPush(): boolean {
    return this.#sustained.length > 0;
  }

  /** Chooses what acts in the segment that begins at tNs; true when anything does. */
  begin(tNs: number): boolean {
    if (this.#sustained.length === 0) return false;
    this.#active = this.#sustained.filter((push) => push.fromNs <= tNs && tNs < push.untilNs);
    return this.#active.length > 0;
  }

  /** The next instant after tNs at which a formula begins, changes or ends; Infinity: none. */
  nextBreak(tNs: number): number {
    let next = Number.POSITIVE_INFINITY;
    for (const push of this.#sustained) {
      if (tNs < push.fromNs) next = Math.min(next, push.fromNs);
      else if (tNs < push.untilNs) next = Math.min(next, push.untilNs, push.nextBreak(tNs));
    }
    return next;
  }

  /** Adds up the active pushes at time t (s) of the segment that began at segmentNs. */
  fill(d: Float64Array, t: number, segmentNs: number): void {
    d.fill(0);
    for (const push of this.#active) d[push.channel] += push.value(t, segmentNs);
  }
}
