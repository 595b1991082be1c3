import { describe, expect, it } from "vitest";
import { plotSignals, rangeOf, usualSignals } from "#src/components/plots/plot-signals.ts";
import { madeRun } from "../../helpers/made-run.ts";

describe("the range of a plot", () => {
  const limit = [{ lo: -12, hi: 12 }];
  it("shows both limits with rock beyond them", () => {
    const { domain, ticks, above, below } = rangeOf(limit, { min: -3, max: 5 });
    expect(domain.lo).toBeLessThan(-12);
    expect(domain.hi).toBeGreaterThan(12);
    expect(ticks).toEqual([-12, 0, 12]);
    expect([above, below]).toEqual([null, null]);
  });
  it("widens for a signal that leaves its limits", () => {
    expect(rangeOf(limit, { min: -3, max: 18 }).domain.hi).toBeGreaterThan(18);
  });
  it("keeps the limits readable when a run diverges, and tells how far it went", () => {
    const { domain, above, below } = rangeOf(limit, { min: -1e9, max: 1e300 });
    expect(domain).toEqual({ lo: -36, hi: 36 });
    expect([above, below]).toEqual([1e300, -1e9]);
  });
  it("ends on round numbers where nothing is watched", () => {
    expect(rangeOf([], { min: -0.013, max: 0.034 }).ticks).toEqual([-0.02, 0, 0.04]);
    const flat = rangeOf([], { min: 0, max: 0 }).domain;
    expect(flat.hi).toBeGreaterThan(flat.lo);
  });
});

describe("which signals of a run are plotted", () => {
  const { scenario, result } = madeRun();
  it("takes what a limit or a reference watches, banded ones first, then the inputs", () => {
    expect(usualSignals(scenario, result)).toEqual(["angle", "position", "force"]);
  });
  it("takes all states where nothing is watched", () => {
    const free = { ...scenario, limits: [], loops: [{ ...scenario.loops[0], references: [] }] };
    expect(usualSignals(free, result)).toEqual(["position", "angle", "velocity", "angularVelocity", "force"]);
  });
  it("shows radians as degrees with the decimals that the plot can tell apart", () => {
    const [angle, position] = plotSignals(scenario, result, ["angle", "position", "no such signal"]);
    expect([angle?.unit, angle?.decimals]).toEqual(["°", 2]);
    expect([position?.unit, position?.decimals]).toEqual(["m", 3]);
  });
  it("draws a settling band from its deadline to the next push or reference step", () => {
    const later = { ...result, events: [...result.events, { atS: 8, kind: "push" as const, text: "" }] };
    const [position] = plotSignals(scenario, later, ["position"]);
    expect(position?.limits.find(({ kind }) => kind === "settle")).toMatchObject({ fromS: 5.8, untilS: 8, lo: -0.03, hi: 0.03, ofError: true });
  });
  it("leaves out the range of an input that the run comes nowhere near", () => {
    const weak = { ...result, series: { ...result.series, values: result.series.values.map((v, i) => (i === 4 ? v.map((u) => u / 100) : v)) } };
    expect(plotSignals(scenario, weak, ["force"])[0]?.limits).toEqual([]);
    expect(plotSignals(scenario, result, ["force"])[0]?.limits).toHaveLength(1);
  });
  it("never gives a range that is not a number, whatever the run holds", () => {
    const broken = { ...result, series: { ...result.series, values: result.series.values.map((v) => v.map(() => Number.NaN)) } };
    for (const { domain, ticks } of plotSignals(scenario, broken, ["angle", "velocity", "force"])) {
      expect(Number.isFinite(domain.lo) && Number.isFinite(domain.hi) && domain.hi > domain.lo).toBe(true);
      expect(ticks.every(Number.isFinite)).toBe(true);
    }
  });
});
