/**
 * The usual time from packet to packet in bounded memory: times are counted in bins 0.1 % wide; the answer is the mean of what
 * lies below twice the median, so that jitter averages out while pauses stay outside.
 */
import { ln } from "#shared/math/elementary.ts";

const BINS_PER_E = 1000;
/** Enough to know the interval while reading. */
const FIRST_ANSWER = 20;

export class IntervalMeter {
  private bins = new Map<number, { count: number; sum: number }>();
  private count = 0;
  private nextAnswer = FIRST_ANSWER;
  private answer: number | null = null;

  add(seconds: number): void {
    if (!(seconds > 0)) return;
    const at = Math.floor(ln(seconds) * BINS_PER_E);
    const bin = this.bins.get(at);
    if (bin) {
      bin.count++;
      bin.sum += seconds;
    } else this.bins.set(at, { count: 1, sum: seconds });
    this.count++;
    if (this.count >= this.nextAnswer) {
      this.answer = this.usual();
      this.nextAnswer *= 4;
    }
  }

  /** From what was seen so far; null as long as that is too little. */
  get known(): number | null {
    return this.answer;
  }

  usual(): number | null {
    if (this.count === 0) return null;
    const sorted = [...this.bins].sort((a, b) => a[0] - b[0]);
    let below = 0;
    let median = 0;
    for (const [, { count, sum }] of sorted) {
      below += count;
      median = sum / count;
      if (2 * below >= this.count) break;
    }
    let count = 0;
    let sum = 0;
    for (const [, bin] of sorted) {
      const mean = bin.sum / bin.count;
      if (mean > 2 * median) continue;
      count += bin.count;
      sum += bin.sum;
    }
    return sum / count;
  }
}
