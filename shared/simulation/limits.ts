/** Acceptance limits: decisive figure, first crossing, settling. */
import { toNs } from "#shared/network/schedule.ts";
import type { Limit, Scenario } from "#shared/scenario/schema.ts";
import type { Trace } from "./assemble.ts";
import type { LimitState, LimitVerdict, RunResult, Verdict } from "./result.ts";
import type { Raw } from "./run.ts";

const NEAR = 0.9;
/** Settling of a signal with bounds: within ± this share of the bounds' width around its target. */
const SETTLED_SHARE = 0.05;

const stateOf = (used: number): LimitState => (used > 1 ? "crosses" : used > NEAR ? "near" : "holds");

export function overallVerdict(limits: readonly LimitVerdict[], ended: RunResult["ended"]): Verdict {
  if (ended !== "complete") return "crosses";
  if (limits.length === 0) return "not-decided";
  if (limits.some(({ state }) => state === "crosses")) return "crosses";
  return limits.some(({ state }) => state === "near") ? "near" : "holds";
}

/** Times at which something new begins, s: pushes and steps of the reference. Settling is counted between them. */
function disturbances(scenario: Scenario): number[] {
  const times = scenario.pushes.map((push) => (push.type === "impulse" ? push.atS : push.fromS));
  for (const { profile } of scenario.loops[0].references) if (profile.type !== "sine") times.push(...profile.points.map((point) => point.atS));
  times.push(...scenario.changes.map((change) => change.atS));
  return times.sort((a, b) => a - b);
}

/** A signal, or its error against the reference, on grid and events; in no order between the two. */
interface Watched {
  t: Float64Array;
  values: Float64Array;
  eventT: Float64Array;
  eventValues: Float64Array;
}

function watch(raw: Raw, trace: Trace, error: boolean): Watched {
  const { recorder, extra } = raw;
  const t = recorder.t.subarray(0, recorder.count);
  const eventT = new Float64Array(extra.count);
  for (let row = 0; row < extra.count; row++) eventT[row] = extra.at(row, 0);
  const reference = error ? trace.reference : null;
  if (!reference) return { t, values: trace.grid, eventT, eventValues: trace.extra };
  const against = (times: Float64Array, values: Float64Array) => {
    const errors = new Float64Array(values.length);
    for (let i = 0; i < values.length; i++) errors[i] = values[i] - reference(toNs(times[i]));
    return errors;
  };
  return { t, values: against(t, trace.grid), eventT, eventValues: against(eventT, trace.extra) };
}

/** The last time in [from, until) at which |value| is above the band; from when there is none. */
function lastOutside({ t, values, eventT, eventValues }: Watched, band: number, from: number, until: number): number {
  let last = from;
  for (let i = values.length - 1; i >= 0 && t[i] >= from; i--) {
    if (t[i] >= until || Math.abs(values[i]) <= band) continue;
    last = t[i];
    break;
  }
  for (let i = eventValues.length - 1; i >= 0 && eventT[i] > last; i--) {
    if (eventT[i] < until && Math.abs(eventValues[i]) > band) return eventT[i];
  }
  return last;
}

/** Whether the last value in [from, until) is outside the band. */
function outsideAtEnd({ t, values, eventT, eventValues }: Watched, band: number, from: number, until: number): boolean {
  const grid = t.findLastIndex((time) => time < until);
  const event = eventT.findLastIndex((time) => time < until);
  const gridT = grid < 0 ? -1 : t[grid];
  const isEvent = event >= 0 && eventT[event] > gridT;
  if ((isEvent ? eventT[event] : gridT) < from) return false;
  return Math.abs(isEvent ? eventValues[event] : values[grid]) > band;
}

export function judge(limit: Limit, index: number, raw: Raw, traces: readonly Trace[]): LimitVerdict {
  const endedS = raw.endedNs / 1e9;
  const failed = raw.ended === "diverged";
  const base = { index, atS: null, crossedAtS: null, crossedBound: null, settlingS: null };
  // A diverged run crosses every limit and enters quantiles as the largest value.
  const diverged = (unit: string): LimitVerdict => ({
    ...base,
    state: "crosses",
    value: Number.MAX_VALUE,
    unit,
    used: Number.MAX_VALUE,
    crossedAtS: endedS,
  });
  if (limit.type === "saturation") {
    const value = endedS > 0 ? raw.saturatedNs / raw.endedNs : 0;
    if (failed) return diverged("");
    const used = value / limit.below;
    return { ...base, state: stateOf(used), value, unit: "", used };
  }
  const trace = traces.find(({ column }) => column.name === limit.signal);
  if (!trace) throw new RangeError(`limit on unknown signal ${limit.signal}`);
  const { unit } = trace.column;
  switch (limit.type) {
    case "within": {
      const verdict = within(limit, index, raw, trace);
      return failed ? { ...diverged(unit), crossedAtS: verdict.crossedAtS ?? endedS } : verdict;
    }
    case "rms": {
      if (failed) return diverged(unit);
      let squares = 0;
      let count = 0;
      const { t, values } = watch(raw, trace, limit.of === "error");
      const untilS = limit.untilS ?? endedS;
      for (let i = 0; i < values.length; i++) {
        if (t[i] < limit.fromS || t[i] > untilS) continue;
        squares += values[i] * values[i];
        count++;
      }
      const value = count > 0 ? Math.sqrt(squares / count) : 0;
      const used = value / limit.below;
      return { ...base, state: stateOf(used), value, unit, used };
    }
    case "settle": {
      if (failed) return diverged("s");
      const next = disturbances(raw.scenario).find((t) => t > limit.afterS) ?? Number.POSITIVE_INFINITY;
      const watched = watch(raw, trace, true);
      const last = lastOutside(watched, limit.band, limit.afterS, next);
      // Ended too early, or outside at the last instant that counts: it has not settled, however short the time was.
      if (endedS < Math.min(next, limit.afterS + limit.withinS) || outsideAtEnd(watched, limit.band, limit.afterS, next)) {
        const value = Math.max(0, Math.min(next, endedS) - limit.afterS);
        return {
          ...base,
          state: "crosses",
          value,
          unit: "s",
          used: Number.MAX_VALUE,
          atS: last,
          crossedAtS: limit.afterS + Math.min(value, limit.withinS),
        };
      }
      const value = last - limit.afterS;
      const used = limit.withinS > 0 ? value / limit.withinS : value > 0 ? Number.MAX_VALUE : 0;
      const state = stateOf(used);
      return {
        ...base,
        state,
        value,
        unit: "s",
        used,
        atS: last,
        crossedAtS: state === "crosses" ? limit.afterS + limit.withinS : null,
        settlingS: value,
      };
    }
  }
}

function within(limit: Extract<Limit, { type: "within" }>, index: number, raw: Raw, trace: Trace): LimitVerdict {
  const endedS = raw.endedNs / 1e9;
  const lo = limit.lo ?? Number.NEGATIVE_INFINITY;
  const hi = limit.hi ?? Number.POSITIVE_INFINITY;
  // Rest uses nothing: room is counted from zero where zero is allowed, otherwise from the middle.
  const centre = Number.isFinite(lo) && Number.isFinite(hi) && (lo >= 0 || hi <= 0) ? (lo + hi) / 2 : 0;
  const shareOf = (value: number): number => {
    if (value > hi || value < lo) {
      const room = value > hi ? hi - centre : centre - lo;
      const over = value > hi ? value - centre : centre - value;
      return room > 0 ? over / room : 1 + Math.abs(value > hi ? value - hi : lo - value);
    }
    const up = Number.isFinite(hi) && hi > centre ? (value - centre) / (hi - centre) : 0;
    const down = Number.isFinite(lo) && lo < centre ? (centre - value) / (centre - lo) : 0;
    return Math.max(0, up, down);
  };
  let used = 0;
  let value = 0;
  let atS: number | null = null;
  let crossedAtS: number | null = null;
  let crossedBound: LimitVerdict["crossedBound"] = null;
  const untilS = limit.untilS ?? endedS;
  const watched = watch(raw, trace, limit.of === "error");
  const scan = (t: Float64Array, values: Float64Array) => {
    for (let i = 0; i < values.length; i++) {
      if (t[i] < limit.fromS || t[i] > untilS) continue;
      const found = values[i];
      const share = shareOf(found);
      if (atS === null || share > used || (share === used && t[i] < atS)) {
        used = share;
        value = found;
        atS = t[i];
      }
      if ((found > hi || found < lo) && (crossedAtS === null || t[i] < crossedAtS)) {
        crossedAtS = t[i];
        crossedBound = found > hi ? "hi" : "lo";
      }
    }
  };
  scan(watched.t, watched.values);
  scan(watched.eventT, watched.eventValues);
  const state = crossedAtS === null ? (used > NEAR ? "near" : "holds") : "crosses";
  return { index, state, value, unit: trace.column.unit, used, atS, crossedAtS, crossedBound, settlingS: settling(limit, raw, trace) };
}

/** Last time outside ± 5 % of the bounds' width around the reference (or zero), from the last disturbance on, s. */
function settling(limit: Extract<Limit, { type: "within" }>, raw: Raw, trace: Trace): number | null {
  if (limit.lo === null || limit.hi === null) return null;
  const endedS = raw.endedNs / 1e9;
  const from = disturbances(raw.scenario).findLast((t) => t < endedS) ?? 0;
  return lastOutside(watch(raw, trace, true), SETTLED_SHARE * (limit.hi - limit.lo), from, Number.POSITIVE_INFINITY) - from;
}
