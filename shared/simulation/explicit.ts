import { toNs } from "#shared/network/schedule.ts";
import type { Push, Scenario } from "#shared/scenario/schema.ts";
import { noiseValues } from "./disturbance.ts";
import type { RunResult } from "./result.ts";

/**
 * The scenario with everything random of a run written out: deliveries (outages included), sensor noise and noise pushes
 * as given sequences. Run with any seed, it gives the same run; anybody's script can reproduce it.
 */
export function explicitScenario(scenario: Scenario, result: RunResult): Scenario {
  const { rounds, seed } = result;
  const p = rounds.measured.length;
  const [loop] = scenario.loops;
  const { everyRounds, firstRound, commandTravels } = loop.timing;
  const later = everyRounds > 1 && commandTravels === "next-round" ? 1 : 0;
  /** Given sequences count rounds of the network; between those in which the loop has a slot, nothing can be lost. */
  const bits = (delivered: Uint8Array, first: number): (0 | 1)[] => {
    const sequence = new Array<0 | 1>(first + delivered.length * everyRounds).fill(1);
    delivered.forEach((value, k) => {
      sequence[first + k * everyRounds] = value === 1 ? 1 : 0;
    });
    return sequence;
  };
  const noise = Array.from({ length: rounds.count }, (_, k) => Array.from(rounds.noise.subarray(k * p, (k + 1) * p)));
  return {
    ...scenario,
    loops: [{ ...loop, sensor: { ...loop.sensor, noise: { type: "given", values: noise, then: "zero" } } }],
    losses: {
      process: {
        type: "given",
        measurement: bits(rounds.measurementDelivered, firstRound),
        command: bits(rounds.commandDelivered, firstRound + later),
        then: "delivered",
      },
      streams: "own",
      outages: [],
    },
    pushes: scenario.pushes.flatMap((push, index) => (push.type === "noise" ? written(push, index, seed, scenario.run.durationS) : [push])),
  };
}

/** A noise push as given values; the last one as a step where the push ends before the value's interval does. */
function written(push: Extract<Push, { type: "noise" }>, index: number, seed: number, endS: number): Push[] {
  const { channel, fromS, untilS, intervalS } = push;
  const values = Array.from(noiseValues(push, index, seed, endS));
  const lastFromNs = toNs(fromS) + (values.length - 1) * toNs(intervalS);
  const cut = untilS !== null && toNs(untilS) < lastFromNs + toNs(intervalS) ? values.pop() : undefined;
  return [
    ...(values.length > 0 ? [{ type: "given" as const, channel, fromS, intervalS, values }] : []),
    ...(cut === undefined ? [] : [{ type: "step" as const, channel, fromS: lastFromNs / 1e9, untilS, size: cut }]),
  ];
}
