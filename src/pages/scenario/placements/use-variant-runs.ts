import { useEffect, useState } from "react";
import type { RunResult } from "#shared/simulation/result.ts";
import { createEngine } from "#src/workers/pool.ts";
import type { Placement, Variant } from "./variants.ts";

export type VariantRun = { state: "waits" } | { state: "failed"; why: string } | { state: "done"; result: RunResult };
export type VariantRuns = Readonly<Partial<Record<Placement, VariantRun>>>;

/** Runs one placement after the other in a worker of its own, so that the bench goes on undisturbed. */
export function useVariantRuns(variants: readonly Variant[], seed: number | null): VariantRuns {
  const [runs, setRuns] = useState<VariantRuns>({});
  useEffect(() => {
    const engine = createEngine();
    let wanted = true;
    setRuns({});
    const told = (placement: Placement, run: VariantRun) => wanted && setRuns((before) => ({ ...before, [placement]: run }));
    const go = async () => {
      for (const { placement, scenario } of variants) {
        if (!scenario || !wanted) continue;
        told(placement, { state: "waits" });
        const outcome = await engine.run(scenario, seed).catch(() => null);
        if (outcome?.ok) told(placement, { state: "done", result: outcome.result });
        else told(placement, { state: "failed", why: outcome && "issues" in outcome ? (outcome.issues[0]?.message ?? "") : "The engine stopped." });
      }
    };
    void go();
    return () => {
      wanted = false;
      engine.dispose();
    };
  }, [variants, seed]);
  return runs;
}
