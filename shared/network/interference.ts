/** When interferers send: any piece of an on-time that overlaps the asked interval counts. All times in whole nanoseconds. */
import { exp, ln } from "#shared/math/elementary.ts";
import { keyedUniform, type RandomKey, randomKey } from "#shared/math/keyed-random.ts";
import type { Interferer } from "#shared/scenario/floor-schema.ts";
import { toNs } from "./schedule.ts";

/**
 * A random process forgets in its mean on- or off-time. After so many of both it begins anew, stationary as at first, so that it can
 * be joined at any time and whoever asks, for whichever slots, meets the same on-times.
 */
const CYCLES = 100;

export class Activity {
  private readonly from: number;
  private readonly until: number;
  private readonly key: RandomKey | null = null;
  private readonly meanOn: number = 0;
  private readonly meanOff: number = 0;
  /** Length of a stretch from beginning to beginning anew. */
  private readonly stretchNs: number = 0;
  private readonly words = new Int32Array(2);
  private stretch = -1;
  private drawn = 0;
  private askedAt = 0;
  private on = false;
  private changesAt = 0;

  /** `name` is that of the random numbers. */
  constructor(
    private readonly activity: Interferer["activity"],
    window: { fromS: number; untilS: number | null },
    seed: number,
    name: string,
  ) {
    this.from = toNs(window.fromS);
    this.until = window.untilS === null ? Number.POSITIVE_INFINITY : toNs(window.untilS);
    if (activity.type === "random" && activity.onShare > 0 && activity.onShare < 1) {
      this.key = randomKey(seed, name);
      this.meanOn = activity.meanOnS * 1e9;
      this.meanOff = (this.meanOn * (1 - activity.onShare)) / activity.onShare;
      this.stretchNs = CYCLES * (this.meanOn + this.meanOff);
    }
  }

  /** Does it send at any time of [start, end)? Quickest when asked in ascending order of `start`. */
  sendsIn(start: number, end: number): boolean {
    const begin = Math.max(start, this.from);
    const stop = Math.min(end, this.until);
    if (begin >= stop) return false;
    const { activity } = this;
    if (activity.type === "always") return true;
    if (activity.type === "periodic") {
      const on = toNs(activity.onS);
      const period = on + toNs(activity.offS);
      const phase = (begin + toNs(activity.phaseS)) % period;
      return phase < on || begin - phase + period < stop;
    }
    return this.key ? this.sendsAtRandom(begin, stop) : activity.onShare > 0;
  }

  private sendsAtRandom(begin: number, stop: number): boolean {
    const { stretchNs } = this;
    const stretch = Math.floor(begin / stretchNs);
    if (stretch !== this.stretch || begin < this.askedAt) this.enter(stretch);
    this.askedAt = begin;
    while (this.changesAt <= begin) {
      this.on = !this.on;
      this.changesAt += this.duration();
    }
    if (this.on) return true;
    const ends = (stretch + 1) * stretchNs;
    if (this.changesAt < ends) return this.changesAt < stop;
    return ends > begin && ends < stop && this.sendsAtRandom(ends, stop);
  }

  private enter(stretch: number): void {
    this.stretch = stretch;
    this.drawn = 0;
    this.on = this.uniform() * (this.meanOn + this.meanOff) < this.meanOn;
    this.changesAt = stretch === 0 ? this.duration() : stretch * this.stretchNs + this.duration();
  }

  private uniform(): number {
    return this.key ? keyedUniform(this.key, this.stretch, this.drawn++, this.words) : 0;
  }

  /** Exponential time until the state changes; 1 - u is never 0. */
  private duration(): number {
    return -ln(1 - this.uniform()) * (this.on ? this.meanOn : this.meanOff);
  }
}

/** Of each interferer. Random numbers go by its name, and by its place among those of one name, so that another interferer changes none. */
export function activitiesOf(interferers: readonly Interferer[], seed: number): Activity[] {
  const alike = new Map<string, number>();
  return interferers.map((interferer) => {
    const { name } = interferer;
    const place = alike.get(name) ?? 0;
    alike.set(name, place + 1);
    return new Activity(interferer.activity, interferer, seed, `interferer/${place}/${name}`);
  });
}

/** Probability that an interferer sends at some time of a step of the given length, at an instant within its window. */
export function overlapProbability(activity: Interferer["activity"], stepS: number): number {
  if (activity.type === "always") return 1;
  if (activity.type === "periodic") return Math.min(1, (activity.onS + stepS) / (activity.onS + activity.offS));
  const { onShare, meanOnS } = activity;
  if (onShare === 0 || onShare === 1) return onShare;
  // Off at the step's start, and no new on-time begins within the step: mean off-time = meanOnS (1 - onShare)/onShare.
  return 1 - (1 - onShare) * exp((-stepS * onShare) / (meanOnS * (1 - onShare)));
}
