import { exp, log10 } from "./elementary.ts";

const LN10_PER_10 = 0.23025850929940458;

/** Power ratio of a level in dB; milliwatts of a level in dBm. */
export const fromDb = (levelDb: number): number => exp(levelDb * LN10_PER_10);

/** Level in dB of a power ratio; -Infinity for 0. */
export const toDb = (ratio: number): number => 10 * log10(ratio);
