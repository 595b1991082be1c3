/**
 * Whole runs against an independent simulator: SciPy's DOP853 at 1e-12 between events, and the loop's rules written a second
 * time from the model (scripts/fixtures/independent_loop.py). Every signal has to agree to 1e-6 of its largest magnitude in
 * the run; encoded signals up to the first differing code.
 */
import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import type { ScenarioInput } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { simulate } from "#shared/simulation/simulate.ts";

/** One array per component. */
type Columns = number[][];
interface Fixture {
  scenario: ScenarioInput;
  ended: RunResult["ended"];
  endedAtS: number;
  /** Indices of the series' grid (10 a round) at which states and inputs are given. */
  grid: number[];
  states: Columns;
  inputs: Columns;
  measurementDelivered: number[];
  commandDelivered: number[];
  measurement: Columns;
  estimate: Columns;
  command: Columns;
  /** Per state over the whole run: smallest and largest value on the grid, root of the mean square (an integral). */
  extremes: [number, number][];
  rms: number[];
  cost: number | null;
  longestLoss: { measurement: number | null; command: number | null };
}

const PERMITTED = 1e-6;
const folder = new URL("../fixtures/loops/", import.meta.url);
const names = readdirSync(folder)
  .filter((file) => file.endsWith(".json"))
  .map((file) => file.slice(0, -".json".length));
const fixture = (name: string) => JSON.parse(readFileSync(new URL(`${name}.json`, folder), "utf8")) as Fixture;

/** Column i of a row-major array with that many columns, in the first `count` rows. */
const column = (values: Float64Array, columns: number, i: number, count: number) => Array.from({ length: count }, (_, k) => values[k * columns + i]);

/** Where two runs may first differ by a code of an encoded signal: round index, or null. */
function firstDifferingCode(data: Fixture, result: RunResult): number | null {
  const loop = data.scenario.loops[0];
  const count = data.command[0].length;
  let first: number | null = null;
  const look = (wanted: number[], found: number[], encoding: { bits: number; lo: number; hi: number } | null | undefined) => {
    if (!encoding) return;
    const half = (encoding.hi - encoding.lo) / 2 ** encoding.bits / 2;
    const k = wanted.findIndex((value, i) => Math.abs(value - found[i]) > half);
    if (k >= 0) first = Math.min(first ?? k, k);
  };
  loop.sensor.signals.forEach((signal, i) => {
    look(data.measurement[i], column(result.rounds.measurement, loop.sensor.signals.length, i, count), signal.encoding);
  });
  loop.actuator.inputs.forEach((input, i) => {
    look(data.command[i], column(result.rounds.command, loop.actuator.inputs.length, i, count), input.encoding);
  });
  return first;
}

function compare(data: Fixture, result: RunResult) {
  const rounds = data.command[0].length;
  const differing = firstDifferingCode(data, result);
  const comparedRounds = differing ?? rounds;
  const comparedGrid = data.grid.filter((g) => g < comparedRounds * 10);
  const ratios: { signal: string; ratio: number }[] = [];
  const add = (signal: string, wanted: number[], found: number[]) => {
    const largest = Math.max(...wanted.map(Math.abs), ...found.map(Math.abs), 0);
    const difference = Math.max(...wanted.map((value, i) => Math.abs(value - found[i])), 0);
    ratios.push({ signal, ratio: largest === 0 ? 0 : difference / largest });
  };
  const at = (wanted: Columns, columns: Float64Array[], name: string) => {
    wanted.forEach((values, i) => {
      add(
        `${name} ${i + 1}`,
        values.slice(0, comparedGrid.length),
        comparedGrid.map((g) => columns[i][g]),
      );
    });
  };
  const columns = (kind: string) => result.series.values.filter((_, i) => result.series.columns[i].kind === kind);
  at(data.states, columns("state"), "state");
  at(data.inputs, columns("input"), "input");
  for (const key of ["measurement", "estimate", "command"] as const) {
    data[key].forEach((values, i) => {
      add(`${key} ${i + 1}`, values.slice(0, comparedRounds), column(result.rounds[key], data[key].length, i, comparedRounds));
    });
  }
  return { worst: ratios.reduce((a, b) => (b.ratio > a.ratio ? b : a)), differing };
}

describe("a run agrees with the independent simulator", () => {
  it("on some thirty scenarios", () => {
    expect(names.length).toBeGreaterThan(25);
  });

  it.each(names)("%s", (name) => {
    const data = fixture(name);
    const outcome = simulate(data.scenario);
    if (!outcome.ok) throw new Error(outcome.issues.map(({ path, message }) => `${path}: ${message}`).join("\n"));
    const { result } = outcome;
    const rounds = data.command[0].length;
    expect(result.ended).toBe(data.ended);
    expect(Math.abs(result.endedAtS - data.endedAtS)).toBeLessThan(1e-6);
    expect(result.rounds.count).toBe(rounds);
    expect(Array.from(result.rounds.measurementDelivered)).toEqual(data.measurementDelivered);
    expect(Array.from(result.rounds.commandDelivered)).toEqual(data.commandDelivered);
    const { worst, differing } = compare(data, result);
    expect(worst.ratio, `${name}: worst is ${worst.signal}, ${worst.ratio.toExponential(2)} of its largest magnitude`).toBeLessThan(PERMITTED);
    // a code differs only where a value lies on the edge between two: never in the first half of these runs
    if (differing !== null) expect(differing, `${name}: first differing code`).toBeGreaterThan(rounds / 2);
  });

  it.each(names.filter((name) => fixture(name).ended === "complete"))("in its figures: %s", (name) => {
    const data = fixture(name);
    const outcome = simulate(data.scenario);
    if (!outcome.ok) throw new Error(outcome.issues[0].message);
    const { figures, series } = outcome.result;
    data.rms.forEach((rms, i) => {
      const figure = figures.signals.find((signal) => signal.name === series.columns[i].name);
      if (!figure) throw new Error(`no figures of ${series.columns[i].name}`);
      const [min, max] = data.extremes[i];
      const scale = Math.max(-min, max);
      expect(Math.abs(figure.rms - rms) / rms, `RMS of ${figure.name}`).toBeLessThan(5e-3);
      // besides the grid's points the engine looks at the instants of events, so its extremes may lie a little further out
      expect((figure.max - max) / scale, `largest ${figure.name}`).toBeGreaterThan(-1e-6);
      expect((figure.max - max) / scale, `largest ${figure.name}`).toBeLessThan(1e-2);
      expect((min - figure.min) / scale, `smallest ${figure.name}`).toBeGreaterThan(-1e-6);
      expect((min - figure.min) / scale, `smallest ${figure.name}`).toBeLessThan(1e-2);
    });
    if (data.cost === null) expect(figures.cost).toBeNull();
    else expect(Math.abs((figures.cost as number) - data.cost) / data.cost).toBeLessThan(1e-5);
    for (const message of ["measurement", "command"] as const) {
      const found = figures.messages.find((entry) => entry.message === message)?.longestLoss ?? null;
      expect(found, `longest loss of the ${message}`).toBe(data.longestLoss[message]);
    }
  });
});
