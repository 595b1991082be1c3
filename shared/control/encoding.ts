import type { Encoding } from "#shared/scenario/schema.ts";

/** Rounds v to the grid of the encoding (model 1): value = lo + code q, code clamped to 0 .. 2^bits - 1. */
export function encode(v: number, lo: number, quantum: number, lastCode: number): number {
  const code = Math.floor((v - lo) / quantum + 0.5);
  return lo + Math.max(0, Math.min(code, lastCode)) * quantum;
}

/** 2^bits without pow; bits up to 32. */
const codes = (bits: number): number => {
  let count = 1;
  for (let i = 0; i < bits; i++) count *= 2;
  return count;
};

export const quantumOf = (encoding: Encoding): number => (encoding.hi - encoding.lo) / codes(encoding.bits);

/** A table of encodings for hot loops; a signal without encoding passes unchanged. */
export class Encoder {
  readonly #lo: Float64Array;
  readonly #quantum: Float64Array;
  readonly #last: Float64Array;

  constructor(encodings: readonly (Encoding | null)[]) {
    this.#lo = Float64Array.from(encodings, (encoding) => encoding?.lo ?? 0);
    this.#quantum = Float64Array.from(encodings, (encoding) => (encoding ? quantumOf(encoding) : 0));
    this.#last = Float64Array.from(encodings, (encoding) => (encoding ? codes(encoding.bits) - 1 : 0));
  }

  apply(i: number, v: number): number {
    return this.#quantum[i] === 0 ? v : encode(v, this.#lo[i], this.#quantum[i], this.#last[i]);
  }
}
