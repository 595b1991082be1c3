/** The engine alone in a page: the test asks it for digests, once on the page's own thread and once in the worker. */
import { digestRun } from "#shared/simulation/digest.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { createEngine } from "#src/workers/pool.ts";

declare global {
  interface Window {
    digestInPage(scenario: unknown, seed: number): string | null;
    digestInWorker(scenario: unknown, seed: number): Promise<string | null>;
  }
}

const engine = createEngine();

window.digestInPage = (scenario, seed) => {
  const outcome = simulate(scenario, seed);
  return outcome.ok ? digestRun(outcome.result) : null;
};
window.digestInWorker = (scenario, seed) => engine.digest(scenario, seed);
