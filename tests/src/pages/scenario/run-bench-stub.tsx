/** In place of the pictures, which need a canvas: what they are given, as attributes. */
import type { PendulumSpec } from "#shared/plants/schema.ts";
import type { RunBenchProps } from "#src/components/drawings/run-bench.tsx";

export const RunBench = ({ scenario, result, stale }: RunBenchProps) => (
  <div data-testid="run-bench" data-stale={stale} data-seed={result.seed} data-mass={(scenario.loops[0].plant as PendulumSpec).cartMassKg} />
);
