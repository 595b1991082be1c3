/** Reception logs as text: two links over a channel with bursts, made anew for each test and never kept. */
import { columnMappingSchema } from "#shared/reception/types.ts";

export const MAPPING = columnMappingSchema.parse({
  number: { column: "round", kind: "round" },
  time: { column: "time", unit: "s" },
  source: "from",
  receiver: "to",
  received: "ok",
  rssi: "rssi",
});

/** Numerical Recipes' 32-bit generator: good enough to lose packets by. */
function uniform(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return state / 2 ** 32;
  };
}

/** In chunks of some hundred rows, header first. `remark`: length of a column that nobody needs. */
export function* csvChunks(rounds: number, seed = 1, remark = 0): Generator<string> {
  const next = uniform(seed);
  const bad = [false, false];
  const end = `${remark > 0 ? `,${"-".repeat(remark - 1)}` : ""}\n`;
  let text = `round,time,from,to,ok,rssi${end}`;
  for (let round = 0; round < rounds; round++) {
    for (const [link, node] of [3, 7].entries()) {
      bad[link] = next() < (bad[link] ? 0.7 : 0.02);
      const time = (round * 0.025).toFixed(3);
      text += bad[link] ? `${round},${time},1,${node},0,${end}` : `${round},${time},1,${node},1,-${60 + Math.floor(next() * 20)}${end}`;
    }
    if (text.length < 60_000) continue;
    yield text;
    text = "";
  }
  yield text;
}

export const csvText = (rounds: number, seed?: number): string => [...csvChunks(rounds, seed)].join("");
