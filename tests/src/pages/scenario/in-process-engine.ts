/** The engine in the test's own process, where there are no workers. */
import { simulate } from "#shared/simulation/simulate.ts";
import type { EngineClient } from "#src/workers/pool.ts";

export const createEngine = (): EngineClient => ({
  run: async (scenario, seed) => simulate(scenario, seed),
  cancel: () => {},
  digest: async () => "0".repeat(64),
  dispose: () => {},
});
