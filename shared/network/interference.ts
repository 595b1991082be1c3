/** When interferers send: any piece of an on-time that overlaps the asked interval counts. All times in whole nanoseconds. */
import { exp, ln } from "#shared/math/elementary.ts";
import { type Uniform, uniformStream } from "#shared/math/random.ts";
import type { Interferer } from "#shared/scenario/floor-schema.ts";
import { toNs } from "./schedule.ts";

/** A random process forgets in its mean on- or off-time; after so many of both it is drawn anew instead of followed. */
const MEMORY = 1000;

export class Activity {
  private readonly from: number;
  private readonly until: number;
  private readonly uniform: Uniform | null = null;
  private readonly meanOn: number = 0;
  private readonly meanOff: number = 0;
  private on = false;
  private changesAt = 0;

  /** `name` is that of the random stream. */
  constructor(
    private readonly activity: Interferer["activity"],
    window: { fromS: number; untilS: number | null },
    seed: number,
    name: string,
  ) {
    this.from = toNs(window.fromS);
    this.until = window.untilS === null ? Number.POSITIVE_INFINITY : toNs(window.untilS);
    if (activity.type === "random" && activity.onShare > 0 && activity.onShare < 1) {
      this.uniform = uniformStream(seed, name);
      this.meanOn = activity.meanOnS * 1e9;
      this.meanOff = (this.meanOn * (1 - activity.onShare)) / activity.onShare;
      this.drawState(0);
    }
  }

  /** Does it send at any time of [start, end)? Random processes are asked for in ascending order of `start`. */
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
    if (!this.uniform) return activity.onShare > 0;
    if (begin - this.changesAt > MEMORY * (this.meanOn + this.meanOff)) this.drawState(begin);
    while (this.changesAt <= begin) {
      this.on = !this.on;
      this.changesAt += this.draw();
    }
    return this.on || this.changesAt < stop;
  }

  private drawState(at: number): void {
    if (this.activity.type !== "random" || !this.uniform) return;
    this.on = this.uniform() < this.activity.onShare;
    this.changesAt = at + this.draw();
  }

  /** Exponential time until the state changes; 1 - u is never 0. */
  private draw(): number {
    return this.uniform ? -ln(1 - this.uniform()) * (this.on ? this.meanOn : this.meanOff) : Number.POSITIVE_INFINITY;
  }
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
