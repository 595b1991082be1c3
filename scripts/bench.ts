/**
 * npm run bench: what the engine costs, as ratios. The yardstick is the same loop written by hand in C (scripts/bench/loop.c,
 * gcc -O2), when a compiler is there, and otherwise the plain run. Times are the best of many runs, so that other work on
 * the machine counts little. Never part of a test.
 */
import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { checkScenario } from "#shared/scenario/check.ts";
import { floorSchema, interfererSchema } from "#shared/scenario/floor-schema.ts";
import { roundSchema } from "#shared/scenario/round-schema.ts";
import { type Scenario, type ScenarioInput, scenarioSchema } from "#shared/scenario/schema.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import { prepareRun, simulate } from "#shared/simulation/simulate.ts";

const REPEATS = 1500;
const GAIN = [-5, -45, -7, -9];
const SIGNALS = ["position", "angle", "velocity", "angularVelocity"];

function pendulum(change?: (scenario: Scenario) => void): Scenario {
  const input: ScenarioInput = {
    format: "holdfast-scenario",
    version: 1,
    name: "Bench",
    run: { durationS: 10, seed: 1, absoluteTolerance: 1e-8, relativeTolerance: 1e-8 },
    loops: [
      {
        name: "Pendulum",
        plant: {
          type: "pendulum-on-cart",
          cartMassKg: 1.2,
          rodMassKg: 0.15,
          rodLengthM: 0.35,
          rodInertiaKgM2: 0.006,
          cartFrictionNsPerM: 0.4,
          pivotFrictionNmsPerRad: 0.002,
        },
        start: { state: [0, 0.08, 0, 0] },
        sensor: { signals: SIGNALS.map((signal) => ({ signal })) },
        controller: { law: { type: "gain", gain: [GAIN] } },
        actuator: { inputs: [{ lo: -1e6, hi: 1e6 }] },
      },
    ],
    radio: { phy: "le-2m" },
    round: { periodS: 0.02 },
    losses: { process: { type: "bernoulli", measurement: 0.1, command: 0.1 } },
    limits: [{ type: "within", signal: "angle", lo: -0.2, hi: 0.2 }],
  };
  const scenario = scenarioSchema.parse(input);
  change?.(scenario);
  return scenario;
}

const microseconds = (): number => Number(process.hrtime.bigint()) / 1e3;

/** Best time of checking and designing, of the simulation itself, and of figures and verdicts, us. */
function best(scenario: Scenario, repeats = REPEATS): { prepare: number; simulate: number; figures: number } {
  const times = { prepare: Number.POSITIVE_INFINITY, simulate: Number.POSITIVE_INFINITY, figures: Number.POSITIVE_INFINITY };
  for (let i = 0; i < repeats; i++) {
    const a = microseconds();
    const prepared = prepareRun(scenario);
    if (!prepared.ok) throw new Error(JSON.stringify(prepared.issues));
    const b = microseconds();
    prepared.run.advance(Number.POSITIVE_INFINITY);
    const c = microseconds();
    prepared.run.result();
    const d = microseconds();
    times.prepare = Math.min(times.prepare, b - a);
    times.simulate = Math.min(times.simulate, c - b);
    times.figures = Math.min(times.figures, d - c);
  }
  return times;
}

/** Best time of the C program, us, after checking that both end in the same state; null without a compiler. */
function inC(scenario: Scenario): number | null {
  const outcome = simulate(scenario);
  const { design } = checkScenario(scenario);
  if (!outcome.ok || !design) throw new Error("the bench scenario does not run");
  const { rounds, series } = outcome.result;
  const folder = mkdtempSync(join(tmpdir(), "holdfast-bench-"));
  try {
    const program = join(folder, "loop");
    try {
      execFileSync("gcc", ["-O2", "-o", program, join(import.meta.dirname, "bench", "loop.c"), "-lm"], { stdio: "pipe" });
    } catch {
      return null;
    }
    const { phi, gamma } = design.model.period;
    const deliveries = Array.from(rounds.measurementDelivered, (delivered, k) => `${delivered} ${rounds.commandDelivered[k]}`);
    const input = [`${rounds.count} ${REPEATS}`, ...phi, ...gamma, ...GAIN, ...deliveries].join("\n");
    const [time = 0, ...state] = execFileSync(program, { input, encoding: "utf8" }).trim().split(" ").map(Number);
    state.forEach((value, i) => {
      const values = series.values[i] ?? new Float64Array();
      const largest = values.reduce((most, v) => Math.max(most, Math.abs(v)), 0);
      if (Math.abs(value - (values.at(-1) ?? 0)) > 1e-6 * largest)
        throw new Error(`the C program ends with ${SIGNALS[i]} ${value}, the engine with ${values.at(-1)}`);
    });
    return time;
  } finally {
    rmSync(folder, { recursive: true });
  }
}

// A reader such as head may close the pipe early.
process.stdout.on("error", () => process.exit());

const line = (what: string, time: number, base: number, of: string) =>
  console.log(`${what.padEnd(58)}${time.toFixed(0).padStart(7)} us   ${(time / base).toFixed(2).padStart(6)} x ${of}`);

const plain = pendulum();
const own = best(plain);
const c = inC(plain);
console.log("500 rounds of one pendulum loop at 20 ms, tolerance 1e-8, 10 % lost; best of", REPEATS);
if (c === null) console.log("no gcc here: without the yardstick in C");
else line("the same loop in C, without recording or figures", c, c, "C");
const yard = c ?? own.simulate;
const of = c === null ? "the plain run" : "C";
line("simulation, with 5 001 points of every signal recorded", own.simulate, yard, of);
line("figures and verdicts", own.figures, yard, of);
line("checking the scenario and designing the loop", own.prepare, yard, of);
const outcome = simulate(plain);
if (outcome.ok) {
  let digest = Number.POSITIVE_INFINITY;
  for (let i = 0; i < 60; i++) {
    const from = microseconds();
    digestRun(outcome.result);
    digest = Math.min(digest, microseconds() - from);
  }
  line("digest of the run", digest, yard, of);
}

console.log("\nwhat each addition makes of the simulation");
const variants: [string, (scenario: Scenario) => void][] = [
  [
    "sensor noise and 16-bit encoding",
    (s) => {
      for (const signal of s.loops[0].sensor.signals) Object.assign(signal, { noiseStd: 1e-3, encoding: { bits: 16, lo: -8, hi: 8 } });
    },
  ],
  ["plan of six commands", (s) => Object.assign(s.loops[0].actuator, { onLoss: { policy: "plan", length: 6, end: "zero" } })],
  [
    "losses in bursts (Gilbert-Elliott)",
    (s) =>
      Object.assign(s.losses, {
        process: { type: "gilbert-elliott-shared", channel: { goodToBad: 0.02, badToGood: 0.3, lossInGood: 0, lossInBad: 1 } },
      }),
  ],
  [
    "time-varying Kalman filter",
    (s) =>
      Object.assign(s.loops[0].controller, {
        estimator: { type: "kalman", update: "time-varying", processNoise: [1e-3, 1e-3, 1e-2, 1e-2], measurementNoise: [1e-3, 1e-3, 1e-2, 1e-2] },
      }),
  ],
  ["Coulomb friction", (s) => Object.assign(s.loops[0].plant, { coulombFrictionN: 0.3 })],
  ["first-order lag of the drive", (s) => Object.assign(s.loops[0].actuator, { lagS: 0.01 })],
  [
    "a sine push all along",
    (s) => s.pushes.push({ type: "sine", channel: "cart", fromS: 0, untilS: null, amplitude: 0.5, frequencyHz: 1, phaseRad: 0 }),
  ],
];
for (const [what, change] of variants) line(what, best(pendulum(change), 300).simulate, own.simulate, "the plain run");

/** 30 nodes in three rows, 10 slots of a round: beacon, measurement, command and seven other messages; three hops from end to end. */
function hall(change?: (scenario: Scenario) => void): Scenario {
  return pendulum((scenario) => {
    const floor = {
      widthM: 120,
      depthM: 40,
      nodes: Array.from({ length: 30 }, (_, i) => ({ id: i + 1, xM: 6 + 12 * (i % 10), yM: 8 + 12 * Math.floor(i / 10) })),
      links: { type: "budget", pathLoss: { type: "log-distance", exponent: 3.9 } },
    };
    scenario.floor = floorSchema.parse(floor);
    scenario.loops[0].nodes = { sensor: 1, controller: 15, actuator: 30 };
    const messages = Array.from({ length: 7 }, (_, i) => ({ id: `m${i}`, name: `Message ${i}`, from: 3 + 4 * i, payloadBytes: 12 }));
    scenario.round = roundSchema.parse({ ...scenario.round, hops: 4, transmissions: 2, wakeUpS: 1e-4, gapS: 1e-4, messages });
    scenario.radio.turnaroundS = 6e-5;
    change?.(scenario);
  });
}
const flooded = (change?: (scenario: Scenario) => void) =>
  hall((scenario) => {
    scenario.losses.process = { type: "flood" };
    change?.(scenario);
  });
const budget = (scenario: Scenario) => {
  if (scenario.floor?.links.type !== "budget") throw new Error("the bench floor has a link budget");
  return { floor: scenario.floor, links: scenario.floor.links };
};
const fade = (scenario: Scenario) => {
  budget(scenario).links.fading = { kDb: 3, coherence: { type: "speed", leastMPerS: 0.5 } };
};

const bernoulli = best(hall(), 300);
const wholeOf = ({ prepare, simulate }: ReturnType<typeof best>) => prepare + simulate;
console.log("\nfloods over 30 nodes, 10 slots a round, 500 rounds, with the closed loop; checking and preparing included");
line("10 % lost (Bernoulli)", wholeOf(bernoulli), wholeOf(bernoulli), "Bernoulli");
const waves: [string, (scenario: Scenario) => void][] = [
  ["flood waves, log-distance", () => undefined],
  [
    "with shadowing",
    (s) => {
      budget(s).links.shadowing.sigmaDb = 4;
    },
  ],
  [
    "with two interferers that come and go",
    (s) =>
      budget(s).floor.interferers.push(
        ...[20, 90].map((xM) =>
          interfererSchema.parse({
            xM,
            yM: 20,
            powerDbm: 15,
            centreMHz: 2472,
            bandwidthMHz: 20,
            activity: { type: "random", onShare: 0.3, meanOnS: 0.003 },
          }),
        ),
      ),
  ],
  ["with fading", fade],
  [
    "with fading and hopping over four channels",
    (s) => {
      fade(s);
      s.radio.channels.list = [2, 14, 26, 39];
    },
  ],
  [
    "with one node on its way past 20 blocks",
    (s) => {
      const { floor } = budget(s);
      floor.obstacles = Array.from({ length: 20 }, (_, i) => ({ type: "block", name: "", xM: 6 * i, yM: 13, widthM: 2, depthM: 2, lossDb: 3 }));
      floor.nodes[4]?.wayPoints.push({ atS: 10, xM: 110, yM: 30 });
    },
  ],
];
for (const [what, change] of waves) line(what, wholeOf(best(flooded(change), 20)), wholeOf(bernoulli), "Bernoulli");
