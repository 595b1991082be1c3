/** From a finished simulation to the result that people and programs read. */
import { profileAt } from "#shared/control/profile.ts";
import { nodeFigures } from "#shared/network/energy.ts";
import { toNs } from "#shared/network/schedule.ts";
import type { Output } from "#shared/plants/plant.ts";
import { messageFigures, signalFigures } from "./figures.ts";
import { judge, overallVerdict } from "./limits.ts";
import type { Column, RunEvent, RunResult } from "./result.ts";
import type { Raw } from "./run.ts";
import { limitLabel } from "./verdict-text.ts";
import { ENGINE_VERSION } from "./version.ts";

/** One signal over the run: on the grid, and at the events between grid points (rows of Raw.extra). */
export interface Trace {
  column: Column;
  grid: Float64Array;
  extra: Float64Array;
  /** Reference at a time in whole nanoseconds; null when the signal has none. */
  reference: ((tNs: number) => number) | null;
}

function traces(raw: Raw): Trace[] {
  const { plant, recorder, extra, scenario } = raw;
  const { n, m } = plant;
  const { count } = recorder;
  const references = new Map(scenario.loops[0].references.map(({ signal, profile }) => [signal, profileAt(profile)]));
  const ofOutput = (output: Output, i: number): Trace => {
    const own = i < n;
    const grid = own ? recorder.x[i].subarray(0, count) : new Float64Array(count);
    const off = new Float64Array(extra.count);
    for (let row = 0; row < extra.count; row++) for (let j = 0; j < n; j++) off[row] += output.c[j] * extra.at(row, 1 + j);
    for (let row = 0; row < extra.count; row++) for (let j = 0; j < m; j++) off[row] += output.d[j] * extra.at(row, 1 + n + j);
    if (!own) {
      for (let j = 0; j < n; j++) if (output.c[j] !== 0) for (let k = 0; k < count; k++) grid[k] += output.c[j] * recorder.x[j][k];
      for (let j = 0; j < m; j++) if (output.d[j] !== 0) for (let k = 0; k < count; k++) grid[k] += output.d[j] * recorder.u[j][k];
    }
    const { name, label, symbol, unit } = output;
    return { column: { name, label, symbol, unit, kind: own ? "state" : "output" }, grid, extra: off, reference: references.get(name) ?? null };
  };
  const ofInput = (j: number): Trace => ({
    column: { ...plant.inputs[j], kind: "input" },
    grid: recorder.u[j].subarray(0, count),
    extra: Float64Array.from({ length: extra.count }, (_, row) => extra.at(row, 1 + n + j)),
    reference: null,
  });
  return [...plant.outputs.map(ofOutput), ...plant.inputs.map((_, j) => ofInput(j))];
}

/** A view of part of a buffer as an array of its own, so that sending a result does not send what lies behind it. */
const whole = (view: Float64Array): Float64Array => (view.byteLength === view.buffer.byteLength ? view : view.slice());

/** Entries first, first + every, ... of values; 1 beyond their end, where a run has no such round any more. */
function everyNth(values: Uint8Array, first: number, every: number, count: number): Uint8Array {
  const picked = new Uint8Array(count).fill(1);
  for (let k = 0; k < count && first + k * every < values.length; k++) picked[k] = values[first + k * every];
  return picked;
}

export function assemble(raw: Raw): RunResult {
  const { plant, recorder, scenario, timing, seed, deliveries, design } = raw;
  const loop = scenario.loops[0];
  const all = traces(raw);
  const t = recorder.t.subarray(0, recorder.count);
  const referenced = all.filter((trace) => trace.reference);
  const columns: Column[] = [
    ...all.map((trace) => trace.column),
    ...referenced.map(({ column }) => ({
      ...column,
      name: `reference:${column.name}`,
      label: `${column.label}, reference`,
      kind: "reference" as const,
    })),
  ];
  const values = [...all.map((trace) => trace.grid), ...referenced.map(({ reference }) => Float64Array.from(t, (at) => reference?.(toNs(at)) ?? 0))];
  const { m } = plant;
  const sampled = raw.sampled;
  const estimateWidth = raw.samplings > 0 ? raw.estimate.length / raw.samplings : 0;
  const [own] = timing.loops;
  // A loop that runs every round counts its commands by the round in which they travel; a slower one by the round in which they were computed.
  const commandDelay = own.everyRounds === 1 ? own.commandDelay : 0;
  const delivered = {
    measurement: everyNth(deliveries.measurement, own.firstRound, own.everyRounds, sampled),
    command: everyNth(deliveries.command, own.firstRound + own.commandDelay - commandDelay, own.everyRounds, sampled),
  };
  const events = [...raw.events, ...scriptedEvents(raw)];
  const limits = scenario.limits.map((limit, index) => judge(limit, index, raw, all));
  for (const verdict of limits) {
    if (verdict.crossedAtS !== null)
      events.push({ atS: verdict.crossedAtS, kind: "limit-crossed", text: `${limitLabel(scenario.limits[verdict.index], scenario)}: crossed` });
  }
  events.sort((a, b) => a.atS - b.atS);
  const hasSlot = (message: "measurement" | "command") => timing.slots.some((slot) => slot.message === message && slot.loop === loop.id);
  return {
    engine: ENGINE_VERSION,
    seed,
    durationS: scenario.run.durationS,
    endedAtS: raw.endedNs / 1e9,
    ended: raw.ended,
    series: { t: whole(t), columns, values: values.map(whole) },
    rounds: {
      count: sampled,
      periodS: own.periodS,
      sampleAtS: own.firstRound * timing.periodS + own.sampleAtS,
      latencyS: own.latencyS,
      commandDelay,
      measured: loop.sensor.signals.map(({ signal }) => {
        const output = plant.outputs.find(({ name }) => name === signal);
        return { name: signal, unit: output?.unit ?? "", symbol: output?.symbol ?? signal, label: output?.label ?? signal };
      }),
      measurementDelivered: delivered.measurement,
      commandDelivered: delivered.command,
      hasMeasurementSlot: hasSlot("measurement"),
      hasCommandSlot: hasSlot("command"),
      measurement: raw.measurement.slice(0, sampled * design.p),
      noise: raw.noise.slice(0, sampled * design.p),
      estimate: raw.estimate.slice(0, sampled * estimateWidth),
      command: raw.command.slice(0, sampled * m),
    },
    events,
    // With a delay of one round, round 0 carries no command.
    figures: {
      signals: all.map((trace) => signalFigures(trace, t)),
      messages: (["measurement", "command"] as const)
        .filter(hasSlot)
        .map((message) => messageFigures(message, delivered[message].subarray(message === "command" ? commandDelay : 0, sampled))),
      saturatedShare: raw.endedNs > 0 ? raw.saturatedNs / raw.endedNs : 0,
      silentReactions: raw.silentReactions,
      nodes: deliveries.floods ? nodeFigures(scenario, timing, deliveries.floods) : [],
      cost: loop.controller.law.type === "lqr" && sampled > 0 ? raw.costSum / sampled : null,
    },
    limits,
    verdict: overallVerdict(limits, raw.ended),
  };
}

/** What the scenario itself makes happen, for the top edge of the plots. */
function scriptedEvents(raw: Raw): RunEvent[] {
  const { scenario, plant } = raw;
  const end = raw.endedNs / 1e9;
  const events: RunEvent[] = [];
  const channel = (name: string) => plant.channels.find((candidate) => candidate.name === name) ?? { label: name, unit: "" };
  for (const push of scenario.pushes) {
    const { label, unit } = channel(push.channel);
    if (push.type === "impulse") {
      events.push({ atS: push.atS, kind: "push", text: `${push.size} ${unit ? `${unit} s` : ""} ${label}`.replace(/\s+/g, " ") });
      continue;
    }
    const size = push.type === "sine" ? push.amplitude : push.type === "noise" ? push.std : push.type === "given" ? null : push.size;
    events.push({ atS: push.fromS, kind: "push", text: `${push.type}${size === null ? "" : ` ${size} ${unit}`} ${label}`.replace(/\s+/g, " ") });
    const until = push.type === "given" ? push.fromS + push.values.length * push.intervalS : push.type === "ramp" ? null : push.untilS;
    if (until !== null) events.push({ atS: until, kind: "push-ends", text: `${push.type} ends` });
  }
  for (const change of scenario.changes) events.push({ atS: change.atS, kind: "change", text: `${change.parameter} becomes ${change.value}` });
  for (const { signal, profile } of scenario.loops[0].references) {
    if (profile.type === "sine") continue;
    profile.points.forEach((point, i) => {
      const before = i > 0 ? profile.points[i - 1].value : 0;
      if (point.atS > 0 && (profile.type === "ramps" || point.value !== before))
        events.push({ atS: point.atS, kind: "reference", text: `${signal} to ${point.value}` });
    });
  }
  for (const outage of scenario.losses.outages) {
    events.push({ atS: outage.fromS, kind: "outage", text: outage.lossProbability < 1 ? "jamming" : "outage" });
    events.push({ atS: outage.untilS, kind: "outage-ends", text: "ends" });
  }
  for (const { id, name, outages } of scenario.floor?.nodes ?? []) {
    for (const { fromS, untilS } of outages) {
      const who = `node ${id}${name && ` ${name}`}`;
      events.push({ atS: fromS, kind: "outage", text: `${who} out` });
      if (untilS !== null) events.push({ atS: untilS, kind: "outage-ends", text: `${who} back` });
    }
  }
  return events.filter((event) => event.atS < end || (event.kind.endsWith("-ends") && event.atS <= end));
}
