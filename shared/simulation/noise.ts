import { normalStream, uniformStream } from "#shared/math/random.ts";
import type { Loop } from "#shared/scenario/schema.ts";

/** Sensor noise, samplings x p: one normal value per component and sampling is always drawn, in component order, or taken as given. */
export function drawNoise(loop: Loop, samplings: number, p: number, seed: number): Float64Array {
  const values = new Float64Array(samplings * p);
  const { noise, signals } = loop.sensor;
  if (noise.type === "given") {
    for (let k = 0; k < samplings; k++) {
      const row = k < noise.values.length ? noise.values[k] : noise.then === "repeat" ? noise.values[k % noise.values.length] : null;
      if (row) values.set(row, k * p);
    }
  } else if (signals.some(({ noiseStd }) => noiseStd > 0)) {
    const normal = normalStream(uniformStream(seed, `noise/${loop.id}`));
    for (let i = 0; i < values.length; i++) values[i] = signals[i % p].noiseStd * normal();
  }
  return values;
}
