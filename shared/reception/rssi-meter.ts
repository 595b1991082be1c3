import type { RssiSummary } from "./types.ts";

/** Receivers report about -127 to 0 dBm; 127 is how some say that they do not know. */
export const LOWEST_DBM = -150;
export const HIGHEST_DBM = 50;
const LEVELS = HIGHEST_DBM - LOWEST_DBM + 1;

/** Moments and whole-dB counts of received signal strengths. */
export class RssiMeter {
  private levels = new Uint32Array(LEVELS);
  private count = 0;
  private mean = 0;
  private squares = 0;
  private min = 0;
  private max = 0;

  /** dbm: LOWEST_DBM to HIGHEST_DBM. */
  add(dbm: number): void {
    this.count++;
    // Welford (1962): no difference of large sums.
    const off = dbm - this.mean;
    this.mean += off / this.count;
    this.squares += off * (dbm - this.mean);
    this.min = this.count === 1 ? dbm : Math.min(this.min, dbm);
    this.max = this.count === 1 ? dbm : Math.max(this.max, dbm);
    this.levels[Math.round(dbm) - LOWEST_DBM]++;
  }

  summary(): RssiSummary | null {
    if (this.count === 0) return null;
    return {
      count: this.count,
      meanDbm: this.mean,
      stdDb: this.count > 1 ? Math.sqrt(this.squares / (this.count - 1)) : 0,
      minDbm: this.min,
      p05Dbm: this.quantile(0.05),
      medianDbm: this.quantile(0.5),
      p95Dbm: this.quantile(0.95),
      maxDbm: this.max,
    };
  }

  private quantile(share: number): number {
    let below = 0;
    for (let level = 0; level < LEVELS; level++) {
      below += this.levels[level];
      if (below >= share * this.count) return level + LOWEST_DBM;
    }
    return this.max;
  }
}
