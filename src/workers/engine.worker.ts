import { expose } from "comlink";
import { prepareFloor } from "#shared/network/prepare.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import { prepareRun } from "#shared/simulation/simulate.ts";
import type { EngineProgress, EngineWorker, TaskKind, TaskOutcome, TaskProgress, WorkerOutcome } from "./contract.ts";
import { contoursJob, floodsJob, type Job, linksJob, type Prepared, surveyJob } from "./floor-tasks.ts";

/** Rounds between two looks at the clock, and how long a stretch may last before messages are heard again. */
const ROUNDS = 50;
const STRETCH_MS = 12;

/** Longer runs warm the engine up by themselves. */
const WARM_ROUNDS = 2000;
/** Runs after which the browser has compiled the engine; until then the idle worker repeats the last one. */
const WARM_RUNS = 12;

let newest = 0;
let runs = 0;
/** Jobs under way: they go before warming up. */
let tasks = 0;

/** A turn of the event loop without the four milliseconds of nested timers. */
const turn = (): Promise<void> =>
  new Promise((resolve) => {
    const { port1, port2 } = new MessageChannel();
    port1.onmessage = () => {
      port1.close();
      resolve();
    };
    port2.postMessage(null);
  });

/** Simulates so that messages are heard in between; ends as cancelled when it is no longer wanted. */
async function inStretches(
  scenario: unknown,
  seed: number | null,
  wanted: () => boolean,
  onProgress?: (progress: EngineProgress) => void,
): Promise<WorkerOutcome> {
  const prepared = prepareRun(scenario, seed);
  if (!prepared.ok) return prepared;
  const { run } = prepared;
  for (let since = performance.now(); !run.advance(ROUNDS); ) {
    if (performance.now() - since < STRETCH_MS) continue;
    onProgress?.({ round: run.round, rounds: run.rounds });
    await turn();
    if (!wanted()) return { ok: false, cancelled: true };
    since = performance.now();
  }
  return { ok: true, result: run.result() };
}

/** A first run is many times slower than a later one; without this the first edits would lag behind the hand. */
async function warmUp(mine: number, scenario: unknown, seed: number | null): Promise<void> {
  while (runs < WARM_RUNS) {
    runs++;
    await turn();
    if (tasks > 0) return;
    const prepared = mine === newest ? prepareRun(scenario, seed) : null;
    if (!prepared?.ok || prepared.run.rounds > WARM_ROUNDS) return;
    prepared.run.advance(Number.POSITIVE_INFINITY);
    prepared.run.result();
  }
}

const newestTask = new Map<TaskKind, number>();

/** Works a job off in stretches; a newer job of its kind, or cancelTask, ends it. */
async function task<T>(kind: TaskKind, scenario: unknown, start: (prepared: Prepared) => Job<T>, onProgress?: TaskProgress): Promise<TaskOutcome<T>> {
  const mine = (newestTask.get(kind) ?? 0) + 1;
  newestTask.set(kind, mine);
  const prepared = prepareFloor(scenario);
  if (!prepared.ok) return prepared;
  const job = start(prepared);
  tasks++;
  try {
    for (let since = performance.now(); ; ) {
      const { done, value } = job.next();
      if (done) return { ok: true, value };
      if (performance.now() - since < STRETCH_MS) continue;
      onProgress?.(value);
      await turn();
      if (newestTask.get(kind) !== mine) return { ok: false, cancelled: true };
      since = performance.now();
    }
  } finally {
    tasks--;
  }
}

const engine: EngineWorker = {
  async run(scenario, seed, onProgress): Promise<WorkerOutcome> {
    const mine = ++newest;
    const outcome = await inStretches(scenario, seed, () => mine === newest, onProgress);
    if (outcome.ok) void warmUp(mine, scenario, seed);
    return outcome;
  },
  cancel() {
    newest++;
  },
  cancelTask(kind) {
    newestTask.set(kind, (newestTask.get(kind) ?? 0) + 1);
  },
  floods: (scenario, seed, onProgress) => task("floods", scenario, (prepared) => floodsJob(prepared, seed), onProgress),
  survey: (scenario, options, onProgress) => task("survey", scenario, (prepared) => surveyJob(prepared, options), onProgress),
  contours: (scenario, slotId, options) => task("contours", scenario, (prepared) => contoursJob(prepared, slotId, options)),
  links: (scenario, atS) => task("links", scenario, (prepared) => linksJob(prepared, atS)),
  async digest(scenario, seed) {
    const outcome = await inStretches(scenario, seed, () => true);
    return outcome.ok ? digestRun(outcome.result) : null;
  },
};

expose(engine);
