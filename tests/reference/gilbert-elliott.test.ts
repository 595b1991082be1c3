/**
 * The Gilbert-Elliott process of the engine against its closed forms (Gilbert 1960, Elliott 1963; checks.md 5.1). Runs are seeded,
 * so the outcome is always the same; the tolerances are multiples of the standard error that the Markov chain itself implies.
 */
import { beforeAll, describe, expect, it, vi } from "vitest";
import type { ScenarioInput } from "#shared/scenario/schema.ts";
import { run } from "./plant-f.ts";

// long runs, on a machine that may be busy with other things
vi.setConfig({ testTimeout: 60_000, hookTimeout: 60_000 });

const ROUNDS = 100_000;
/** A right process passes a bound of 3.9 standard errors but once in ten thousand. */
const SE = 3.9;

type Process = ScenarioInput["losses"]["process"];

/** Nothing moves: only the losses matter here. */
const scenario = (process: Process, rounds: number, streams: "own" | "shared" = "own"): ScenarioInput => ({
  format: "holdfast-scenario",
  version: 1,
  name: "Losses only",
  run: { durationS: rounds * 0.02 },
  loops: [
    {
      name: "At rest",
      plant: { type: "state-space", a: [[-1]], b: [[1]] },
      sensor: { signals: [{ signal: "x1" }] },
      controller: { law: { type: "gain", gain: [[0]] } },
      actuator: { inputs: [{ lo: -1, hi: 1 }] },
    },
  ],
  radio: { phy: "le-2m" },
  round: { periodS: 0.02 },
  losses: { process, streams },
});
const losses = (process: Process, rounds = ROUNDS, seed = 1, streams: "own" | "shared" = "own") => {
  const { measurementDelivered, commandDelivered } = run(scenario(process, rounds, streams), seed).rounds;
  return { measurement: Array.from(measurementDelivered, (bit) => 1 - bit), command: Array.from(commandDelivered, (bit) => 1 - bit) };
};

const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
/** Lengths of the runs of losses that both begin and end within the sequence. */
function bursts(lost: number[]): number[] {
  const out: number[] = [];
  let length = 0;
  let whole = false;
  for (let k = 0; k < lost.length; k++) {
    if (lost[k] === 1) {
      if (length === 0) whole = k > 0;
      length++;
    } else {
      if (length > 0 && whole) out.push(length);
      length = 0;
    }
  }
  return out;
}
/** Share of losses h rounds after a loss, over starts at fixed places so far apart that they are as good as independent. */
function again(lost: number[], h: number, stride: number) {
  let [starts, hits] = [0, 0];
  for (let k = 0; k + h < lost.length; k += stride) {
    if (lost[k] !== 1) continue;
    starts++;
    hits += lost[k + h];
  }
  return { starts, share: hits / starts };
}

describe.each([
  [0.01, 0.25, { loss: 0.0384615384615, burst: 4, gap: 100, rho1: 0.74, rho5: 0.2219006624 }],
  [0.05, 0.5, { loss: 0.0909090909091, burst: 2, gap: 20, rho1: 0.45, rho5: 0.0184528125 }],
  [0.02, 0.98, { loss: 0.02, burst: 1.02040816327, gap: 50, rho1: 0, rho5: 0 }],
  [0.1, 0.3, { loss: 0.25, burst: 3.33333333333, gap: 10, rho1: 0.6, rho5: 0.07776 }],
])("lost if and only if bad, p = %d, r = %d", (p, r, closed) => {
  let sequences: Record<"measurement" | "command", number[]>;
  beforeAll(() => {
    const channel = { goodToBad: p, badToGood: r };
    sequences = losses({ type: "gilbert-elliott", measurement: channel, command: channel });
  });

  it.each(["measurement", "command"] as const)("%s: loss ratio, burst and gap lengths, correlation", (message) => {
    const lost = sequences[message];
    const lambda = 1 - p - r;
    expect(lost).toHaveLength(ROUNDS);
    // variance of the mean of a two-state chain: pi (1 - pi)/n (1 + lambda)/(1 - lambda)
    const ratio = p / (p + r);
    expect(ratio).toBeCloseTo(closed.loss, 12);
    expect(Math.abs(mean(lost) - ratio)).toBeLessThan(SE * Math.sqrt((ratio * (1 - ratio) * (1 + lambda)) / (1 - lambda) / ROUNDS));

    // bursts and gaps are geometric: mean 1/r and 1/p, variance (1 - r)/r^2 and (1 - p)/p^2
    const long = bursts(lost);
    expect(Math.abs(mean(long) - closed.burst)).toBeLessThan(SE * Math.sqrt((1 - r) / r ** 2 / long.length));
    const gaps = bursts(lost.map((bit) => 1 - bit));
    expect(Math.abs(mean(gaps) - closed.gap)).toBeLessThan(SE * Math.sqrt((1 - p) / p ** 2 / gaps.length));
    for (let l = 1; l <= 3; l++) {
      const law = r * (1 - r) ** (l - 1);
      const share = long.filter((length) => length === l).length / long.length;
      expect(Math.abs(share - law), `bursts of ${l}`).toBeLessThan(SE * Math.sqrt((law * (1 - law)) / long.length) + 1e-9);
    }

    // P(lost again after h rounds) = pi + (1 - pi) rho(h), rho(h) = lambda^h; independent starts: binomial
    for (const [h, rho] of [
      [1, closed.rho1],
      [5, closed.rho5],
    ] as const) {
      expect(lambda ** h).toBeCloseTo(rho, 9);
      const { starts, share } = again(lost, h, 25);
      const law = ratio + (1 - ratio) * lambda ** h;
      expect(Math.abs(share - law), `${h} rounds later, ${starts} starts`).toBeLessThan(SE * Math.sqrt((law * (1 - law)) / starts));
    }
  });

  it("has its two messages' losses unrelated", () => {
    const { measurement, command } = sequences;
    const ratio = p / (p + r);
    const both = mean(measurement.map((bit, k) => bit * command[k]));
    const lambda = (1 - p - r) ** 2;
    const spread = Math.sqrt((ratio ** 2 * (1 + lambda)) / (1 - lambda) / ROUNDS);
    expect(Math.abs(both - ratio ** 2)).toBeLessThan(SE * 1.5 * spread);
  });
});

describe("with losses in both states", () => {
  // loss = pi_G e_G + pi_B e_B; rho(h) = pi_G pi_B (e_B - e_G)^2 lambda^h / (mu (1 - mu))
  const [p, r, good, bad] = [0.03, 0.2, 0.02, 0.7];
  const [piBad, lambda] = [p / (p + r), 1 - p - r];
  const mu = (1 - piBad) * good + piBad * bad;

  it("the loss ratio and its correlation are those of the closed forms", () => {
    const channel = { goodToBad: p, badToGood: r, lossInGood: good, lossInBad: bad };
    const lost = losses({ type: "gilbert-elliott", measurement: channel, command: channel }).measurement;
    const rho = (h: number) => (piBad * (1 - piBad) * (bad - good) ** 2 * lambda ** h) / (mu * (1 - mu));
    const inflation = 1 + (2 * rho(1)) / (1 - lambda);
    expect(Math.abs(mean(lost) - mu)).toBeLessThan(SE * Math.sqrt((mu * (1 - mu) * inflation) / ROUNDS));
    for (const h of [1, 2, 5]) {
      const { starts, share } = again(lost, h, 25);
      const law = mu + (1 - mu) * rho(h);
      expect(Math.abs(share - law), `${h} rounds later`).toBeLessThan(SE * Math.sqrt((law * (1 - law)) / starts));
    }
  });

  it("one channel state for all messages makes them be lost together more often", () => {
    const channel = { goodToBad: p, badToGood: r, lossInGood: good, lossInBad: bad };
    const { measurement, command } = losses({ type: "gilbert-elliott-shared", channel });
    const both = (1 - piBad) * good ** 2 + piBad * bad ** 2;
    const found = mean(measurement.map((bit, k) => bit * command[k]));
    const inflation = (1 + lambda) / (1 - lambda);
    expect(Math.abs(found - both)).toBeLessThan(SE * Math.sqrt((both * (1 - both) * inflation) / ROUNDS));
    for (const lost of [measurement, command]) {
      expect(Math.abs(mean(lost) - mu)).toBeLessThan(SE * Math.sqrt((mu * (1 - mu) * inflation) / ROUNDS));
    }
  });
});

it("starts stationary: the first round of 1500 seeds is lost as often as any", () => {
  const channel = { goodToBad: 0.1, badToGood: 0.3 };
  const first = Array.from(
    { length: 1500 },
    (_, seed) => losses({ type: "gilbert-elliott", measurement: channel, command: channel }, 1, seed).measurement[0],
  );
  expect(Math.abs(mean(first) - 0.25)).toBeLessThan(SE * Math.sqrt((0.25 * 0.75) / first.length));
});

it("Bernoulli losses are as frequent as said and unrelated from round to round", () => {
  const { measurement, command } = losses({ type: "bernoulli", measurement: 0.1, command: 0.35 });
  for (const [lost, p] of [
    [measurement, 0.1],
    [command, 0.35],
  ] as const) {
    expect(Math.abs(mean(lost) - p)).toBeLessThan(SE * Math.sqrt((p * (1 - p)) / ROUNDS));
    const pairs = mean(lost.slice(1).map((bit, k) => (bit - p) * (lost[k] - p)));
    expect(Math.abs(pairs)).toBeLessThan((SE * p * (1 - p)) / Math.sqrt(ROUNDS));
  }
  const cross = mean(measurement.map((bit, k) => (bit - 0.1) * (command[k] - 0.35)));
  expect(Math.abs(cross)).toBeLessThan(SE * Math.sqrt((0.1 * 0.9 * 0.35 * 0.65) / ROUNDS));
});

it("jamming loses by itself, on top of what the process loses: 1 - (1 - p)(1 - q), and never less", () => {
  const process = { type: "bernoulli", measurement: 0.2, command: 0.2 } as const;
  const jammed = scenario(process, 20_000);
  jammed.losses.outages = [{ fromS: 0, untilS: 400, messages: ["command"], lossProbability: 0.3 }];
  const { measurementDelivered, commandDelivered } = run(jammed, 1).rounds;
  const before = losses(process, 20_000);
  const law = 1 - 0.8 * 0.7;
  const lost = Array.from(commandDelivered, (bit) => 1 - bit);
  expect(Math.abs(mean(lost) - law)).toBeLessThan(SE * Math.sqrt((law * (1 - law)) / lost.length));
  expect(before.command.every((bit, k) => bit <= lost[k])).toBe(true);
  expect(Array.from(measurementDelivered, (bit) => 1 - bit)).toEqual(before.measurement);
});

it("one shared stream of random numbers loses the likelier message whenever it loses the other", () => {
  const { measurement, command } = losses({ type: "bernoulli", measurement: 0.1, command: 0.35 }, 5000, 3, "shared");
  expect(measurement.some((bit) => bit === 1)).toBe(true);
  measurement.forEach((bit, k) => {
    if (bit === 1) expect(command[k]).toBe(1);
  });
});
