/** What a stack of plots shows of a run: which columns, their limits, and the range and ticks of each. SI units inside. */
import type { Limit, Scenario } from "#shared/scenario/schema.ts";
import type { Column, RunResult } from "#shared/simulation/result.ts";
import { shownUnit } from "#src/lib/format.ts";
import { type Extremes, extremes, valueAt } from "./series-points.ts";
import { decimalsFor, niceStep } from "./units.ts";

export interface PlotLimit {
  kind: "limit" | "saturates" | "settle";
  lo: number | null;
  hi: number | null;
  fromS: number;
  untilS: number;
  /** lo and hi are counted from the reference. */
  ofError: boolean;
}

export interface PlotSignal {
  name: string;
  label: string;
  symbol: string;
  /** Shown unit, and factor from SI to it. */
  unit: string;
  factor: number;
  /** A command is an ink line, a signal is tide. */
  command: boolean;
  stair: boolean;
  values: Float64Array;
  reference: { values: Float64Array; stair: boolean } | null;
  /** Second run, on its own times. */
  second: { t: Float64Array; values: Float64Array } | null;
  limits: PlotLimit[];
  domain: { lo: number; hi: number };
  ticks: number[];
  decimals: number;
  /** Largest and lowest value where the line leaves the picture; null where it stays inside. */
  above: number | null;
  below: number | null;
  crossings: { atS: number; value: number }[];
}

const drivenBySteps = (scenario: Scenario, signal: string): boolean =>
  scenario.loops[0].references.some((reference) => reference.signal === signal && reference.profile.type === "steps");

/** Columns that can be plotted, in the order of the run. */
export const plottable = (result: RunResult): Column[] => result.series.columns.filter((column) => column.kind !== "reference");

/** What has a limit or a reference, then the inputs; all states where nothing is watched. At most `most` signals before the inputs. */
export function usualSignals(scenario: Scenario, result: RunResult, most = 4): string[] {
  const columns = plottable(result);
  const watched = (name: string) =>
    scenario.limits.some((limit) => "signal" in limit && limit.signal === name) || scenario.loops[0].references.some(({ signal }) => signal === name);
  const signals = columns.filter((column) => column.kind !== "input");
  const chosen = signals.filter(({ name }) => watched(name));
  // What has a band to stay in comes first: it decides.
  const banded = (name: string) => Number(!scenario.limits.some((limit) => limit.type === "within" && limit.signal === name));
  const first = (name: string) => scenario.limits.findIndex((limit) => "signal" in limit && limit.signal === name) >>> 0;
  chosen.sort((a, b) => banded(a.name) - banded(b.name) || first(a.name) - first(b.name));
  const shown = chosen.length > 0 ? chosen : signals;
  const inputs = columns.filter((column) => column.kind === "input").slice(0, 2);
  return [...shown.slice(0, most), ...inputs].map(({ name }) => name);
}

/** From afterS + withinS until the next push or reference step (or the end). */
function settleWindow(limit: Extract<Limit, { type: "settle" }>, result: RunResult): { fromS: number; untilS: number } {
  const next = result.events.find((event) => (event.kind === "push" || event.kind === "reference") && event.atS > limit.afterS + 1e-9);
  return { fromS: limit.afterS + limit.withinS, untilS: next?.atS ?? result.durationS };
}

function limitsOf(scenario: Scenario, result: RunResult, column: Column): PlotLimit[] {
  if (column.kind === "input") {
    const index = result.series.columns.filter(({ kind }) => kind === "input").findIndex(({ name }) => name === column.name);
    const input = scenario.loops[0].actuator.inputs[index];
    return input ? [{ kind: "saturates", lo: input.lo, hi: input.hi, fromS: 0, untilS: result.durationS, ofError: false }] : [];
  }
  const limits: PlotLimit[] = [];
  for (const limit of scenario.limits) {
    if (!("signal" in limit) || limit.signal !== column.name) continue;
    if (limit.type === "within") {
      const untilS = limit.untilS ?? result.durationS;
      limits.push({ kind: "limit", lo: limit.lo, hi: limit.hi, fromS: limit.fromS, untilS, ofError: limit.of === "error" });
    } else if (limit.type === "settle") {
      const window = settleWindow(limit, result);
      if (window.untilS > window.fromS) limits.push({ kind: "settle", lo: -limit.band, hi: limit.band, ofError: true, ...window });
    }
  }
  return limits;
}

const union = (a: Extremes | null, b: Extremes | null): Extremes | null =>
  a && b ? { min: Math.min(a.min, b.min), max: Math.max(a.max, b.max) } : (a ?? b);

interface Range {
  domain: { lo: number; hi: number };
  ticks: number[];
  above: number | null;
  below: number | null;
}

/** Nothing watched: from the lowest to the highest value, on round numbers. */
function openRange(data: Extremes): Range {
  const extent = Math.max(data.max - data.min, Math.abs(data.max) * 1e-6, Math.abs(data.min) * 1e-6, 1e-9);
  const step = niceStep(extent / 4);
  let lo = Math.floor(data.min / step + 1e-6) * step;
  let hi = Math.ceil(data.max / step - 1e-6) * step;
  if (data.min === data.max) {
    const reach = data.max === 0 ? 1 : Math.abs(data.max);
    lo = Math.min(0, data.min - reach / 2);
    hi = Math.max(0, data.max + reach / 2);
  }
  const pad = (hi - lo) * 0.06;
  const ticks = lo < 0 && hi > 0 ? [lo, 0, hi] : [lo, hi];
  return { domain: { lo: lo - pad, hi: hi + pad }, ticks, above: null, below: null };
}

/**
 * With limits: the band, and rock beyond it. A signal that leaves the band widens the picture up to three times; beyond that the line
 * leaves the picture and the largest value is told in words.
 */
export function rangeOf(limits: readonly { lo: number | null; hi: number | null }[], data: Extremes): Range {
  const los = limits.flatMap(({ lo }) => (lo === null ? [] : [lo]));
  const his = limits.flatMap(({ hi }) => (hi === null ? [] : [hi]));
  if (los.length === 0 && his.length === 0) return openRange(data);
  const lowest = los.length > 0 ? Math.min(...los) : Math.min(data.min, ...his);
  const highest = his.length > 0 ? Math.max(...his) : Math.max(data.max, ...los);
  const span = highest - lowest || Math.abs(highest) || 1;
  const pad = span * 0.12;
  const needLo = data.min - span * 0.06;
  const needHi = data.max + span * 0.06;
  const lo = Math.max(Math.min(lowest - pad, needLo), lowest - span);
  const hi = Math.min(Math.max(highest + pad, needHi), highest + span);
  const ticks = [...new Set([...los, ...his])];
  if (los.length === 0) ticks.push(lowest);
  if (his.length === 0) ticks.push(highest);
  if (lo < 0 && hi > 0) ticks.push(0);
  return {
    domain: { lo, hi },
    ticks: [...new Set(ticks)].sort((a, b) => a - b),
    above: data.max > hi ? data.max : null,
    below: data.min < lo ? data.min : null,
  };
}

/** One entry per name; names that the run does not have are left out. */
export function plotSignals(scenario: Scenario, result: RunResult, names: readonly string[], second?: RunResult): PlotSignal[] {
  const { columns, values, t } = result.series;
  return names.flatMap((name): PlotSignal[] => {
    const index = columns.findIndex((column) => column.name === name && column.kind !== "reference");
    const column = columns[index];
    const own = values[index];
    if (!column || !own) return [];
    const referenceValues = values[columns.findIndex((other) => other.kind === "reference" && other.name === `reference:${name}`)];
    const reference = referenceValues ? { values: referenceValues, stair: drivenBySteps(scenario, name) } : null;
    const secondIndex = second?.series.columns.findIndex((other) => other.name === name) ?? -1;
    const secondValues = second?.series.values[secondIndex];
    const command = column.kind === "input";
    let limits = limitsOf(scenario, result, column);
    let data = extremes(own) ?? { min: 0, max: 0 };
    if (secondValues) data = union(data, extremes(secondValues)) ?? data;
    const referenceRange = reference ? extremes(reference.values) : null;
    if (referenceRange) data = union(data, referenceRange) ?? data;
    // An input that stays far below its largest value would be a flat line between two rocks.
    if (command && (data.min !== 0 || data.max !== 0))
      limits = limits.filter(({ lo, hi }) => Math.max(-(lo ?? 0), hi ?? 0) <= 10 * Math.max(data.max, -data.min));
    const bands = limits
      .filter(({ kind }) => kind !== "settle")
      .map(({ lo, hi, ofError }) => {
        const shift = ofError && referenceRange ? referenceRange : { min: 0, max: 0 };
        return { lo: lo === null ? null : lo + shift.min, hi: hi === null ? null : hi + shift.max };
      });
    const range = rangeOf(bands, data);
    const { unit, factor } = shownUnit(column.unit);
    const reach = Math.max(Math.abs(range.domain.lo), Math.abs(range.domain.hi)) * factor;
    const crossings = result.limits.flatMap(({ index: at, crossedAtS }) => {
      const limit = scenario.limits[at];
      if (crossedAtS === null || limit?.type !== "within" || limit.signal !== name) return [];
      return [{ atS: crossedAtS, value: valueAt(t, own, crossedAtS) }];
    });
    return [
      {
        name,
        label: column.label,
        symbol: column.symbol,
        unit,
        factor,
        command,
        stair: command && scenario.loops[0].actuator.lagS === 0,
        values: own,
        reference,
        second: second && secondValues ? { t: second.series.t, values: secondValues } : null,
        limits,
        ...range,
        decimals: decimalsFor(reach),
        crossings,
      },
    ];
  });
}
