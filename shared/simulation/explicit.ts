import type { Scenario } from "#shared/scenario/schema.ts";
import { noiseValues } from "./disturbance.ts";
import type { RunResult } from "./result.ts";

/**
 * The scenario with everything random of a run written out: deliveries (outages included), sensor noise and noise pushes
 * as given sequences. Run with any seed, it gives the same run; anybody's script can reproduce it.
 */
export function explicitScenario(scenario: Scenario, result: RunResult): Scenario {
  const { rounds, seed } = result;
  const p = rounds.measured.length;
  const bits = (delivered: Uint8Array) => Array.from(delivered, (value): 0 | 1 => (value === 1 ? 1 : 0));
  const [loop] = scenario.loops;
  const noise = Array.from({ length: rounds.count }, (_, k) => Array.from(rounds.noise.subarray(k * p, (k + 1) * p)));
  return {
    ...scenario,
    loops: [{ ...loop, sensor: { ...loop.sensor, noise: { type: "given", values: noise, then: "zero" } } }],
    losses: {
      process: { type: "given", measurement: bits(rounds.measurementDelivered), command: bits(rounds.commandDelivered), then: "delivered" },
      streams: "own",
      outages: [],
    },
    pushes: scenario.pushes.map((push, index) => {
      if (push.type !== "noise") return push;
      const values = Array.from(noiseValues(push, index, seed, scenario.run.durationS));
      return { type: "given", channel: push.channel, fromS: push.fromS, intervalS: push.intervalS, values: values.length > 0 ? values : [0] };
    }),
  };
}
