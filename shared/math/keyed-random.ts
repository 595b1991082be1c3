/**
 * Random numbers that are a pure function of a key and a counter: the number for (node, step, round) is the same whatever
 * else was drawn before, so that nothing that is added to a scenario changes what was there, and nothing has to be drawn
 * in vain. Generator: Threefry-2x32 with 20 rounds (Salmon, Moraes, Dror, Shaw, "Parallel random numbers: as easy as 1, 2,
 * 3", SC 2011), integer operations only.
 */
import { ln } from "./elementary.ts";
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

/**
 * Two independent standard normal values to out[0] and out[1], for counter (x, y): the normal law's inverse at each word.
 * `words` is scratch of length 2.
 */
export function keyedNormalPair(key: RandomKey, x: number, y: number, words: Int32Array, out: Float64Array): void {
  threefry(key, x, y, words);
  out[0] = normalOfWord(words[0] >>> 0);
  out[1] = normalOfWord(words[1] >>> 0);
}

/**
 * Inverse of the normal distribution function at (word + 1/2) / 2^32 (Wichura, "Algorithm AS 241", Applied Statistics 37(3),
 * 1988, PPND16). Of its three pieces the outermost begins beyond what 32 bits can ask for. Much quicker than logarithm and sine.
 */
export function normalOfWord(word: number): number {
  const p = (word + 0.5) / 4294967296;
  const q = p - 0.5;
  if (q >= -0.425 && q <= 0.425) {
    const r = 0.180625 - q * q;
    const above =
      ((((((2509.0809287301227 * r + 33430.57558358813) * r + 67265.7709270087) * r + 45921.95393154987) * r + 13731.69376550946) * r +
        1971.5909503065513) *
        r +
        133.14166789178438) *
        r +
      3.3871328727963665;
    const below =
      ((((((5226.495278852854 * r + 28729.085735721943) * r + 39307.89580009271) * r + 21213.794301586597) * r + 5394.196021424751) * r +
        687.1870074920579) *
        r +
        42.31333070160091) *
        r +
      1;
    return (q * above) / below;
  }
  const r = Math.sqrt(-ln(q < 0 ? p : 1 - p)) - 1.6;
  const above =
    ((((((0.0007745450142783414 * r + 0.022723844989269184) * r + 0.2417807251774506) * r + 1.2704582524523684) * r + 3.6478483247632045) * r +
      5.769497221460691) *
      r +
      4.630337846156546) *
      r +
    1.4234371107496835;
  const below =
    ((((((1.0507500716444169e-9 * r + 0.0005475938084995345) * r + 0.015198666563616457) * r + 0.14810397642748008) * r + 0.6897673349851) * r +
      1.6763848301838038) *
      r +
      2.053191626637759) *
      r +
    1;
  return q < 0 ? -above / below : above / below;
}
