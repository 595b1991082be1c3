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
