/** The same run is the same, bit for bit, in Chromium's page, in its worker and in Node. */
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { sha256 } from "@noble/hashes/sha2.js";
import { bytesToHex } from "@noble/hashes/utils.js";
import { build, type PreviewServer, preview } from "vite";
import { afterAll, beforeAll } from "vitest";
import { drawFloods } from "#shared/network/floods.ts";
import { roundTiming } from "#shared/network/round.ts";
import { roundsOf } from "#shared/scenario/rounds.ts";
import { type ScenarioInput, scenarioSchema } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { ROOT } from "../architecture/files.ts";
import { expect, testAt } from "./app.ts";

const bursts = { goodToBad: 0.05, badToGood: 0.4, lossInGood: 0.01 };
const inBursts: ScenarioInput["losses"] = { process: { type: "gilbert-elliott", measurement: bursts, command: bursts } };

/** Ten runs: both machines, five seeds each, every other one with losses in bursts. */
const RUNS = TEMPLATES.flatMap(({ key, scenario }) =>
  [1, 2, 3, 4, 5].map((seed) => {
    const losses = seed % 2 === 0 ? inBursts : scenario.losses;
    return { name: `${key}, seed ${seed}${losses === inBursts ? ", bursts" : ""}`, seed, scenario: { ...scenario, losses } };
  }),
);

/** Floods decide: shadowing, fading, interference, hopping and a moving node; and a matrix of reception ratios. */
const FLOODED = ["balancer-rig-1-floor.json", "film-line-2-shared-round.json"].map((file) => ({
  name: file,
  scenario: scenarioSchema.parse(JSON.parse(readFileSync(join(ROOT, "examples", file), "utf8"))),
}));

let folder: string;
let server: PreviewServer;
let address = "";
const test = testAt(() => address);

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), "holdfast-engine-"));
  const shared = { configFile: join(ROOT, "vite.config.ts"), root: join(ROOT, "tests/e2e/engine"), logLevel: "error" } as const;
  await build({ ...shared, build: { outDir: folder, emptyOutDir: true } });
  server = await preview({ ...shared, build: { outDir: folder }, preview: { host: "127.0.0.1", port: 0 } });
  address = server.resolvedUrls?.local[0].replace(/\/$/, "") ?? "";
});

afterAll(async () => {
  await server.close();
  rmSync(folder, { recursive: true, force: true });
});

test("ten runs give the same digests in the page, in the worker and in Node", async ({ holdfast }) => {
  const { page } = await holdfast.stranger();
  await page.goto("/");
  for (const { name, scenario, seed } of RUNS) {
    const outcome = simulate(scenario, seed);
    if (!outcome.ok) throw new Error(`${name}: ${outcome.issues[0].message}`);
    const inNode = digestRun(outcome.result);
    const inPage = await page.evaluate(([scenario, seed]) => window.digestInPage(scenario, seed), [scenario, seed] as const);
    const inWorker = await page.evaluate(([scenario, seed]) => window.digestInWorker(scenario, seed), [scenario, seed] as const);
    expect({ name, inPage, inWorker }).toEqual({ name, inPage: inNode, inWorker: inNode });
  }
});

test("floods come out the same in the worker and in Node, node by node and step by step", async ({ holdfast }) => {
  const { page } = await holdfast.stranger();
  await page.goto("/");
  for (const { name, scenario } of FLOODED) {
    for (const seed of [1, 2]) {
      const outcome = simulate(scenario, seed);
      if (!outcome.ok) throw new Error(`${name}: ${outcome.issues[0].message}`);
      const { firstStep } = drawFloods(scenario, roundTiming(scenario), roundsOf(scenario), seed);
      const inWorker = await page.evaluate(
        async ([scenario, seed]) => [await window.digestInWorker(scenario, seed), await window.floodsInWorker(scenario, seed)],
        [scenario, seed] as const,
      );
      expect({ name, seed, inWorker }).toEqual({ name, seed, inWorker: [digestRun(outcome.result), bytesToHex(sha256(firstStep))] });
    }
  }
});
