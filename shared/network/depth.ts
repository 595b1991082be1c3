/** Nodes deeper than the hop bound (model 1): the slot's steps were counted for fewer hops than they are away. */
import { NO_SLOT, received } from "./flood.ts";
import type { FloodRecord } from "./floods.ts";
import type { RoundTiming } from "./round.ts";
import { medianStep } from "./tally.ts";

export interface DeepNode {
  node: number;
  /** The latest step by which half of some slot's floods have arrived; above the hop bound. */
  step: number;
}

/** From the floods of a run. A node that is out of service, or that less than half of the floods reach, is not deep but down or weak. */
export function deeperThanBound({ nodes, slots, rounds, firstStep }: FloodRecord, { hops, slots: table }: RoundTiming): DeepNode[] {
  const n = nodes.length;
  const deep: DeepNode[] = [];
  for (let i = 0; i < n; i++) {
    let latest = 0;
    for (let slot = 0; slot < slots; slot++) {
      const counts = new Uint32Array(table[slot].steps + 1);
      let floods = 0;
      for (let round = 0; round < rounds; round++) {
        const first = firstStep[(round * slots + slot) * n + i];
        if (first === NO_SLOT) continue;
        floods++;
        if (received(first)) counts[first]++;
      }
      latest = Math.max(latest, medianStep({ firstStep: counts, steps: table[slot].steps, floods }, 0) ?? 0);
    }
    if (latest > hops) deep.push({ node: nodes[i], step: latest });
  }
  return deep;
}
