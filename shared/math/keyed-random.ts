/**
 * Random numbers that are a pure function of a key and a counter: the number for (node, step, round) is the same whatever
 * else was drawn before, so that nothing that is added to a scenario changes what was there, and nothing has to be drawn
 * in vain. Generator: Threefry-2x32 with 20 rounds (Salmon, Moraes, Dror, Shaw, "Parallel random numbers: as easy as 1, 2,
 * 3", SC 2011), integer operations only.
 */
import { ln, sincos } from "./elementary.ts";
import { uniformStream } from "./random.ts";

export interface RandomKey {
  a: number;
  b: number;
}

/** Key of a named stream: the first two words of the stream itself, so names are independent of each other. */
export function randomKey(seed: number, name: string): RandomKey {
  const uniform = uniformStream(seed, name);
  return { a: Math.floor(uniform() * 4294967296) | 0, b: Math.floor(uniform() * 4294967296) | 0 };
}

const PARITY = 0x1bd11bda;

/** Writes the two 32-bit words for counter (x, y) to out[0] and out[1]. */
export function threefry(key: RandomKey, x: number, y: number, out: Int32Array): void {
  const a = key.a | 0;
  const b = key.b | 0;
  const c = PARITY ^ a ^ b;
  let p = (x + a) | 0;
  let q = (y + b) | 0;
  // Five injections of the key; before each four rounds of p += q, q = rotate(q) ^ p, with the rotations of the paper's table 3.
  p = (p + q) | 0;
  q = ((q << 13) | (q >>> 19)) ^ p;
  p = (p + q) | 0;
  q = ((q << 15) | (q >>> 17)) ^ p;
  p = (p + q) | 0;
  q = ((q << 26) | (q >>> 6)) ^ p;
  p = (p + q) | 0;
  q = ((q << 6) | (q >>> 26)) ^ p;
  p = (p + b) | 0;
  q = (q + c + 1) | 0;
  p = (p + q) | 0;
  q = ((q << 17) | (q >>> 15)) ^ p;
  p = (p + q) | 0;
  q = ((q << 29) | (q >>> 3)) ^ p;
  p = (p + q) | 0;
  q = ((q << 16) | (q >>> 16)) ^ p;
  p = (p + q) | 0;
  q = ((q << 24) | (q >>> 8)) ^ p;
  p = (p + c) | 0;
  q = (q + a + 2) | 0;
  p = (p + q) | 0;
  q = ((q << 13) | (q >>> 19)) ^ p;
  p = (p + q) | 0;
  q = ((q << 15) | (q >>> 17)) ^ p;
  p = (p + q) | 0;
  q = ((q << 26) | (q >>> 6)) ^ p;
  p = (p + q) | 0;
  q = ((q << 6) | (q >>> 26)) ^ p;
  p = (p + a) | 0;
  q = (q + b + 3) | 0;
  p = (p + q) | 0;
  q = ((q << 17) | (q >>> 15)) ^ p;
  p = (p + q) | 0;
  q = ((q << 29) | (q >>> 3)) ^ p;
  p = (p + q) | 0;
  q = ((q << 16) | (q >>> 16)) ^ p;
  p = (p + q) | 0;
  q = ((q << 24) | (q >>> 8)) ^ p;
  p = (p + b) | 0;
  q = (q + c + 4) | 0;
  p = (p + q) | 0;
  q = ((q << 13) | (q >>> 19)) ^ p;
  p = (p + q) | 0;
  q = ((q << 15) | (q >>> 17)) ^ p;
  p = (p + q) | 0;
  q = ((q << 26) | (q >>> 6)) ^ p;
  p = (p + q) | 0;
  q = ((q << 6) | (q >>> 26)) ^ p;
  out[0] = p + c;
  out[1] = q + a + 5;
}

/** One of the 2^53 evenly spaced numbers in [0, 1), for counter (x, y). `words` is scratch of length 2. */
export function keyedUniform(key: RandomKey, x: number, y: number, words: Int32Array): number {
  threefry(key, x, y, words);
  return ((words[0] >>> 5) * 67108864 + (words[1] >>> 6)) / 9007199254740992;
}

/** Two independent standard normal values to out[0] and out[1], for counter (x, y) (Box and Muller, 1958). */
export function keyedNormalPair(key: RandomKey, x: number, y: number, words: Int32Array, out: Float64Array): void {
  threefry(key, x, y, words);
  // Half a step above 0, so that the logarithm is finite.
  const radius = Math.sqrt(-2 * ln(((words[0] >>> 0) + 0.5) / 4294967296));
  sincos((2 * Math.PI * (words[1] >>> 0)) / 4294967296, out, 1, 0);
  out[0] *= radius;
  out[1] *= radius;
}
