/** The engine alone in a page: the test asks it for digests, once on the page's own thread and once in the worker. */
import { sha256 } from "@noble/hashes/sha2.js";
import { bytesToHex } from "@noble/hashes/utils.js";
import { digestRun } from "#shared/simulation/digest.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { createEngine } from "#src/workers/pool.ts";

declare global {
  interface Window {
    digestInPage(scenario: unknown, seed: number): string | null;
    digestInWorker(scenario: unknown, seed: number): Promise<string | null>;
    /** Of every node's first reception in every flood of the run. */
    floodsInWorker(scenario: unknown, seed: number): Promise<string | null>;
  }
}

const engine = createEngine();

window.digestInPage = (scenario, seed) => {
  const outcome = simulate(scenario, seed);
  return outcome.ok ? digestRun(outcome.result) : null;
};
window.digestInWorker = (scenario, seed) => engine.digest(scenario, seed);
window.floodsInWorker = async (scenario, seed) => {
  const outcome = await engine.floods(scenario, seed);
  return outcome.ok ? bytesToHex(sha256(outcome.value.firstStep)) : null;
};
