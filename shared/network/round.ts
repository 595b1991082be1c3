/** The timing of one round (model 1): slots, computing, acting, reserve, and what would help when it does not fit. */
import type { Issue } from "#shared/scenario/issues.ts";
import type { Encoding, Message, Scenario } from "#shared/scenario/schema.ts";
import { PHY_TIMINGS, type PhyTiming, phyTiming } from "./phy.ts";

/** All times in seconds from the start of the round. */
export interface Slot {
  message: "beacon" | Message;
  label: string;
  /** Without the header. */
  payloadBytes: number;
  airtimeS: number;
  /** Airtime + turnaround. */
  stepS: number;
  /** Steps of the flood, slack included. */
  steps: number;
  startS: number;
  /** End of the wake-up: the flood's first step begins. */
  floodStartS: number;
  floodEndS: number;
  /** Gap included. */
  endS: number;
}

export interface Saving {
  change: "transmissions" | "hops" | "bytes" | "phy" | "period";
  text: string;
  savesS: number;
}

export interface RoundTiming {
  periodS: number;
  /** Hop bound H. */
  hops: number;
  slots: Slot[];
  guardS: number;
  /** Period minus last slot's end minus guard; negative when the round does not fit. */
  reserveS: number;
  fits: boolean;
  shortestPeriodS: number;
  sampleAtS: number;
  computeFromS: number;
  computeUntilS: number;
  /** d: rounds between computing and travelling of a command. */
  commandDelay: 0 | 1;
  /** When command k acts, from the start of round k; may lie in a later round. */
  actAtS: number;
  /** Earliest and latest instant at which it could act. */
  earliestActS: number;
  latestActS: number;
  /** tau = actAtS - sampleAtS. */
  latencyS: number;
  /** The same instants as whole nanoseconds, for the engine. */
  ns: { period: number; sample: number; act: number; slots: { message: Slot["message"]; start: number; end: number }[] };
  /** Filled when the round does not fit; largest saving first. */
  savings: Saving[];
  issues: Issue[];
}

/** Steps of one flood, counted from 1 (Jacob et al., DATE 2018, for alternating relay): model 1. */
export function floodSteps(relay: "alternating" | "back-to-back", hops: number, transmissions: number): number {
  return relay === "alternating" ? hops + 2 * transmissions - 1 : hops + transmissions;
}

export const toNs = (seconds: number): number => Math.round(seconds * 1e9);

/** A value that is not encoded travels as a 32-bit number. */
const bitsOf = (encoding: Encoding | null): number => encoding?.bits ?? 32;
const ms = (ns: number): string => (Math.abs(ns) < 1e5 && ns !== 0 ? `${(ns / 1e3).toFixed(0)} µs` : `${(ns / 1e6).toFixed(2)} ms`);
/** Rounded up: who enters this period gets a round that fits. */
const msAtLeast = (ns: number): string => ms(Math.ceil(ns / 1e4) * 1e4);

/** Payload of each message of the loop, bytes, without the header; null where the placement needs no such message. */
export function payloadBytes(scenario: Scenario): { measurement: number | null; command: number | null } {
  const loop = scenario.loops[0];
  const { placement, acknowledgement } = loop.controller;
  const commandBits = loop.actuator.inputs.reduce((sum, input) => sum + bitsOf(input.encoding), 0);
  const reportBits = acknowledgement === "reported" ? commandBits : 0;
  const measurementBits = loop.sensor.signals.reduce((sum, signal) => sum + bitsOf(signal.encoding), reportBits);
  const length = loop.actuator.onLoss.policy === "plan" ? loop.actuator.onLoss.length : 1;
  return {
    measurement: placement === "sensor" ? null : Math.ceil(measurementBits / 8),
    command: placement === "actuator" ? null : Math.ceil((commandBits * length) / 8),
  };
}

interface Layout {
  slots: { message: Slot["message"]; label: string; payload: number; airtime: number; step: number; steps: number; start: number; end: number }[];
  computeFrom: number;
  computeUntil: number;
  end: number;
}

interface Variation {
  timing: PhyTiming;
  hops: number;
  transmissions: number;
  /** Taken off every payload. */
  fewerBytes: number;
}

function layOut(scenario: Scenario, { timing, hops, transmissions, fewerBytes }: Variation): Layout {
  const { round, radio } = scenario;
  const loop = scenario.loops[0];
  const payload = payloadBytes(scenario);
  const turnaround = radio.turnaroundS === null ? timing.turnaroundNs : toNs(radio.turnaroundS);
  const steps = floodSteps(round.relay, hops, transmissions) + round.slackSteps;
  const sampled = toNs(loop.timing.sampleAtS) + toNs(loop.sensor.busTransferS);
  const slots: Layout["slots"] = [];
  let end = 0;
  const add = (message: Slot["message"], label: string, bytes: number, notBefore: number) => {
    const kept = Math.max(0, bytes - fewerBytes);
    const airtime = timing.airtimeNs(radio.headerBytes + kept);
    const start = Math.max(end, notBefore);
    const step = airtime + turnaround;
    end = start + toNs(round.wakeUpS) + steps * step + toNs(round.gapS);
    slots.push({ message, label, payload: kept, airtime, step, steps, start, end });
    return end;
  };
  const planned = loop.actuator.onLoss.policy === "plan" ? `Command, plan of ${loop.actuator.onLoss.length}` : "Command";
  const later = loop.timing.commandTravels === "next-round";
  if (round.beacon) add("beacon", "Beacon", round.beacon.payloadBytes, 0);
  if (later && payload.command !== null) add("command", planned, payload.command, 0);
  let computeFrom = sampled;
  if (payload.measurement !== null) computeFrom = add("measurement", "Measurement", payload.measurement, sampled);
  const computeUntil = computeFrom + toNs(loop.controller.computeS);
  if (!later && payload.command !== null) add("command", planned, payload.command, computeUntil);
  return { slots, computeFrom, computeUntil, end };
}

/**
 * Slot table, latency and reserve of the scenario's round. Never throws: what is wrong is in `issues`, and the timing is
 * given as far as it can be computed (a picture can show what does not fit).
 */
export function roundTiming(scenario: Scenario): RoundTiming {
  const { round, radio } = scenario;
  const loop = scenario.loops[0];
  const issues: Issue[] = [];
  const timing = phyTiming(radio.phy);
  const asIs: Variation = { timing, hops: round.hops, transmissions: round.transmissions, fewerBytes: 0 };
  const layout = layOut(scenario, asIs);
  const period = toNs(round.periodS);
  const drift = 2 * round.clockPpm * 1e-6;
  const guard = Math.ceil(drift * period);

  for (const slot of layout.slots) {
    const over = radio.headerBytes + slot.payload - timing.maxBytes;
    if (over > 0) {
      issues.push({
        code: "payload-too-long",
        path: "radio.phy",
        message: `${slot.label}: ${radio.headerBytes} B header and ${slot.payload} B payload are ${over} B more than one ${timing.label} packet carries (at most ${timing.maxBytes} B).`,
      });
    }
  }

  const needed = (end: number) => Math.ceil(end / (1 - drift));
  const shortest = needed(layout.end);
  const reserve = period - layout.end - guard;
  const savings: Saving[] = [];
  if (reserve < 0) {
    const offer = (change: Saving["change"], text: string, variation: Variation) => {
      const saves = layout.end - layOut(scenario, variation).end;
      if (saves > 0) savings.push({ change, text, savesS: saves / 1e9 });
    };
    if (round.transmissions > 1)
      offer("transmissions", `${round.transmissions - 1} instead of ${round.transmissions} transmissions per node`, {
        ...asIs,
        transmissions: round.transmissions - 1,
      });
    if (round.hops > 1) offer("hops", `${round.hops - 1} instead of ${round.hops} hops`, { ...asIs, hops: round.hops - 1 });
    offer("bytes", "one byte less in every message", { ...asIs, fewerBytes: 1 });
    const faster = PHY_TIMINGS[PHY_TIMINGS.indexOf(timing) + 1];
    if (faster) offer("phy", faster.label, { ...asIs, timing: faster });
    savings.push({ change: "period", text: `a period of ${msAtLeast(shortest)}`, savesS: (shortest - period) / 1e9 });
    savings.sort((a, b) => b.savesS - a.savesS);
    issues.push({
      code: "round-does-not-fit",
      path: "round.periodS",
      message: `The round does not fit: its slots end at ${ms(layout.end)} and ${ms(guard)} of guard follow, ${ms(-reserve)} more than the period of ${ms(period)}. The shortest period that fits is ${msAtLeast(shortest)}.`,
      help: savings.map((saving) => `${saving.text}: saves ${ms(toNs(saving.savesS))}`),
    });
  }

  const sample = toNs(loop.timing.sampleAtS);
  if (sample >= period) {
    issues.push({
      code: "out-of-range",
      path: "loops[0].timing.sampleAtS",
      message: `Sampling at ${ms(sample)} lies outside the round; permitted 0 to just under ${ms(period)}.`,
    });
  }
  const delay: 0 | 1 = loop.timing.commandTravels === "same-round" ? 0 : 1;
  const commandSlot = layout.slots.find((slot) => slot.message === "command");
  const bus = toNs(loop.actuator.busTransferS);
  const latest = (1 + delay) * period;
  if (delay === 1 && layout.computeUntil > period + (commandSlot?.start ?? period)) {
    issues.push({
      code: "computing-too-long",
      path: "loops[0].controller.computeS",
      message: `Computing ends ${ms(layout.computeUntil)} after the round began, later than the command's slot of the next round (${ms(period + (commandSlot?.start ?? period))}).`,
    });
  }
  const earliest = commandSlot ? delay * period + commandSlot.end + bus : layout.computeUntil + bus;
  const wanted = loop.timing.actAfterSampleS === null ? latest : sample + toNs(loop.timing.actAfterSampleS);
  if (reserve >= 0 && earliest > latest) {
    issues.push({
      code: "acts-too-late",
      path: commandSlot ? "loops[0].actuator.busTransferS" : "loops[0].controller.computeS",
      message: `The command reaches the drive ${ms(earliest)} after the round began, later than the boundary at ${ms(latest)} at which it has to act.`,
    });
  } else if (wanted < earliest || wanted > latest) {
    if (reserve >= 0) {
      issues.push({
        code: "out-of-range",
        path: "loops[0].timing.actAfterSampleS",
        message: `A latency of ${ms(wanted - sample)} is not possible: the command can act ${ms(earliest - sample)} to ${ms(latest - sample)} after sampling.`,
      });
    }
  }

  const s = (ns: number) => ns / 1e9;
  return {
    periodS: s(period),
    hops: round.hops,
    slots: layout.slots.map((slot) => ({
      message: slot.message,
      label: slot.label,
      payloadBytes: slot.payload,
      airtimeS: s(slot.airtime),
      stepS: s(slot.step),
      steps: slot.steps,
      startS: s(slot.start),
      floodStartS: s(slot.start + toNs(round.wakeUpS)),
      floodEndS: s(slot.end - toNs(round.gapS)),
      endS: s(slot.end),
    })),
    guardS: s(guard),
    reserveS: s(reserve),
    fits: reserve >= 0,
    shortestPeriodS: s(shortest),
    sampleAtS: s(sample),
    computeFromS: s(layout.computeFrom),
    computeUntilS: s(layout.computeUntil),
    commandDelay: delay,
    actAtS: s(wanted),
    earliestActS: s(earliest),
    latestActS: s(latest),
    latencyS: s(wanted - sample),
    ns: { period, sample, act: wanted, slots: layout.slots.map(({ message, start, end }) => ({ message, start, end })) },
    savings,
    issues,
  };
}
