import alea from "seedrandom/lib/alea.js";
import { ln, sincos } from "./elementary.ts";

export type Uniform = () => number;

/**
 * A named stream of uniform numbers in [0, 1). Streams of different names are independent of each other, so that adding a
 * message or changing the sensor noise leaves every other stream as it was. Generator: Alea (Baagøe, 2010).
 */
export function uniformStream(seed: number, name: string): Uniform {
  const next = alea(`${seed}/${name}`);
  return () => next.quick();
}

/** Standard normal values from a uniform stream (Box and Muller, 1958). 1 - u is never 0, so the logarithm is finite. */
export function normalStream(uniform: Uniform): () => number {
  const pair = new Float64Array(2);
  let spare = 0;
  let hasSpare = false;
  return () => {
    if (hasSpare) {
      hasSpare = false;
      return spare;
    }
    const radius = Math.sqrt(-2 * ln(1 - uniform()));
    sincos(2 * Math.PI * uniform(), pair, 1, 0);
    spare = radius * pair[0];
    hasSpare = true;
    return radius * pair[1];
  };
}
