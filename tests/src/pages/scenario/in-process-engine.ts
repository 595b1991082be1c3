/** The engine in the test's own process, where there are no workers. */
import { prepareFloor } from "#shared/network/prepare.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import type { TaskOutcome } from "#src/workers/contract.ts";
import * as tasks from "#src/workers/floor-tasks.ts";
import type { EngineClient } from "#src/workers/pool.ts";

async function worked<T>(scenario: unknown, start: (prepared: tasks.Prepared) => tasks.Job<T>): Promise<TaskOutcome<T>> {
  const prepared = prepareFloor(scenario);
  if (!prepared.ok) return prepared;
  const job = start(prepared);
  for (;;) {
    const { done, value } = job.next();
    if (done) return { ok: true, value };
  }
}

export const createEngine = (): EngineClient => ({
  run: async (scenario, seed) => simulate(scenario, seed),
  cancel: () => {},
  cancelTask: () => {},
  floods: (scenario, seed) => worked(scenario, (prepared) => tasks.floodsJob(prepared, seed)),
  survey: (scenario, options) => worked(scenario, (prepared) => tasks.surveyJob(prepared, options)),
  contours: (scenario, slotId, options) => worked(scenario, (prepared) => tasks.contoursJob(prepared, slotId, options)),
  links: (scenario, atS) => worked(scenario, (prepared) => tasks.linksJob(prepared, atS)),
  digest: async () => "0".repeat(64),
  dispose: () => {},
});
