/** What the floods of a run come to, slot by slot: delivered shares, and the share of nodes reached after each step. */
import { NO_SLOT, received } from "#shared/network/flood.ts";
import type { FloodRecord } from "#shared/network/floods.ts";
import type { Slot } from "#shared/network/round.ts";

export interface RunShares {
  delivered: Record<string, number>;
  reached: Record<string, number[]>;
  rounds: number;
}

/** Entries that are looked at: longer runs are told of by their first rounds. */
const MOST_ENTRIES = 4_000_000;

export function runShares(record: FloodRecord, slots: readonly Slot[]): RunShares {
  const n = record.nodes.length;
  const perRound = record.slots * n;
  const rounds = Math.min(record.rounds, Math.max(1, Math.floor(MOST_ENTRIES / Math.max(1, perRound))));
  const delivered: RunShares["delivered"] = {};
  const reached: RunShares["reached"] = {};
  slots.slice(0, record.slots).forEach((slot, s) => {
    const needs = slot.to === null ? null : slot.to.map((id) => record.nodes.indexOf(id));
    const counts = new Float64Array(slot.steps + 1);
    let floods = 0;
    let all = 0;
    for (let round = 0; round < rounds; round++) {
      const at = round * perRound + s * n;
      if (record.firstStep[at] === NO_SLOT) continue;
      floods++;
      let missed = false;
      for (let i = 0; i < n; i++) {
        const first = record.firstStep[at + i];
        if (received(first)) {
          if (first <= slot.steps) counts[Math.max(1, first)]++;
        } else if (needs === null) missed = true;
      }
      if (needs) missed = needs.some((i) => i < 0 || !received(record.firstStep[at + i]));
      if (!missed) all++;
    }
    if (floods === 0) return;
    delivered[slot.id] = all / floods;
    let sum = 0;
    reached[slot.id] = Array.from({ length: slot.steps }, (_, i) => {
      sum += counts[i + 1];
      return sum / (floods * n);
    });
  });
  return { delivered, reached, rounds };
}
