/**
 * The slot table (model 1) by list scheduling: beacon, commands that travel a round later, measurements in the order in which
 * they are ready, commands in the order in which computing ends, then other messages; each at the earliest time at which no
 * slot of a common round is in its way. A slot keeps its place in every round in which it occurs, so latency is constant, and
 * slots whose rounds never meet may share a place. All times in whole nanoseconds from the start of a round.
 */
import type { Scenario } from "#shared/scenario/schema.ts";
import { type LoopDemand, loopDemands } from "./demand.ts";
import type { PhyTiming } from "./phy.ts";

export type SlotMessage = "beacon" | "measurement" | "command" | "other";

export interface PlacedSlot {
  /** Names the slot whatever else is in the round: "beacon", "main/measurement", "main/measurement/2", "other/heartbeat". */
  id: string;
  message: SlotMessage;
  loop: string | null;
  label: string;
  copy: number;
  everyRounds: number;
  /** First round, below everyRounds, in which it occurs. */
  firstRound: number;
  from: number | null;
  to: number[] | null;
  payload: number;
  airtime: number;
  step: number;
  steps: number;
  start: number;
  floodStart: number;
  floodEnd: number;
  end: number;
}

export interface PlacedLoop {
  demand: LoopDemand;
  computeFrom: number;
  computeUntil: number;
  /** End of the last slot of its command; null when it needs none. */
  commandStart: number | null;
  commandEnd: number | null;
}

export interface Layout {
  slots: PlacedSlot[];
  loops: PlacedLoop[];
  /** End of the last slot. */
  end: number;
}

/** Steps of one flood, counted from 1 (Jacob et al., DATE 2018, for alternating relay): model 1. */
export function floodSteps(relay: "alternating" | "back-to-back", hops: number, transmissions: number): number {
  return relay === "alternating" ? hops + 2 * transmissions - 1 : hops + transmissions;
}

export const toNs = (seconds: number): number => Math.round(seconds * 1e9);

const gcd = (a: number, b: number): number => (b === 0 ? a : gcd(b, a % b));
type Rhythm = { everyRounds: number; firstRound: number };
/** Is there a round in which both occur? */
export const meet = (a: Rhythm, b: Rhythm): boolean => (a.firstRound - b.firstRound) % gcd(a.everyRounds, b.everyRounds) === 0;

/** fewerBytes: taken off every payload, to see what that would save. */
export function layOut(scenario: Scenario, timing: PhyTiming, fewerBytes = 0): Layout {
  const { round, radio, floor } = scenario;
  const turnaround = radio.turnaroundS === null ? timing.turnaroundNs : toNs(radio.turnaroundS);
  const steps = floodSteps(round.relay, round.hops, round.transmissions) + round.slackSteps;
  const wakeUp = toNs(round.wakeUpS);
  const gap = toNs(round.gapS);
  const slots: PlacedSlot[] = [];

  function place(
    slot: Pick<PlacedSlot, "id" | "message" | "loop" | "label" | "copy" | "from" | "to"> & Rhythm,
    bytes: number,
    notBefore: number,
  ): PlacedSlot {
    const payload = Math.max(0, bytes - fewerBytes);
    const airtime = timing.airtimeNs(radio.headerBytes + payload);
    const step = airtime + turnaround;
    const length = wakeUp + steps * step + gap;
    let start = notBefore;
    const inTheWay = slots.filter((other) => meet(other, slot)).sort((a, b) => a.start - b.start);
    for (const other of inTheWay) if (other.end > start && other.start < start + length) start = other.end;
    const floodStart = start + wakeUp;
    const floodEnd = floodStart + steps * step;
    const placed = { ...slot, payload, airtime, step, steps, start, floodStart, floodEnd, end: start + length };
    slots.push(placed);
    return placed;
  }

  const demands = loopDemands(scenario);
  const loops = demands.map((demand): PlacedLoop => {
    const sampled = toNs(demand.sampleAtS) + toNs(demand.sensorBusS);
    return { demand, computeFrom: sampled, computeUntil: sampled + toNs(demand.computeS), commandStart: null, commandEnd: null };
  });
  const copyId = (id: string, copy: number) => (copy === 1 ? id : `${id}/${copy}`);

  if (round.beacon) {
    const host = floor?.beaconNode ?? demands[0].nodes?.controller ?? null;
    place(
      { id: "beacon", message: "beacon", loop: null, label: "Beacon", copy: 1, everyRounds: 1, firstRound: 0, from: host, to: null },
      round.beacon.payloadBytes,
      0,
    );
  }
  const command = (loop: PlacedLoop, copy: number, notBefore: number) => {
    const { demand } = loop;
    if (demand.commandBytes === null || copy > demand.commandCopies) return;
    const delay = demand.commandTravels === "next-round" ? 1 : 0;
    const label = demand.planLength > 1 ? `Command, plan of ${demand.planLength}` : "Command";
    const placed = place(
      {
        id: copyId(`${demand.id}/command`, copy),
        message: "command",
        loop: demand.id,
        label,
        copy,
        everyRounds: demand.everyRounds,
        firstRound: (demand.firstRound + delay) % demand.everyRounds,
        from: demand.nodes?.controller ?? null,
        to: demand.nodes ? [demand.nodes.actuator] : null,
      },
      demand.commandBytes,
      notBefore,
    );
    loop.commandStart = Math.min(loop.commandStart ?? placed.start, placed.start);
    loop.commandEnd = Math.max(loop.commandEnd ?? 0, placed.end);
  };
  const later = loops.filter(({ demand }) => demand.commandTravels === "next-round");
  const same = loops.filter(({ demand }) => demand.commandTravels === "same-round");
  for (const copy of [1, 2]) for (const loop of later) command(loop, copy, 0);

  const bySampling = [...loops].sort((a, b) => a.computeFrom - b.computeFrom);
  for (const copy of [1, 2]) {
    for (const loop of bySampling) {
      const { demand } = loop;
      if (demand.measurementBytes === null || copy > demand.measurementCopies) continue;
      const { end } = place(
        {
          id: copyId(`${demand.id}/measurement`, copy),
          message: "measurement",
          loop: demand.id,
          label: "Measurement",
          copy,
          everyRounds: demand.everyRounds,
          firstRound: demand.firstRound,
          from: demand.nodes?.sensor ?? null,
          to: demand.nodes ? [demand.nodes.controller] : null,
        },
        demand.measurementBytes,
        loop.computeFrom,
      );
      loop.computeFrom = Math.max(loop.computeFrom, end);
      loop.computeUntil = loop.computeFrom + toNs(demand.computeS);
    }
  }
  const byComputing = [...same].sort((a, b) => a.computeUntil - b.computeUntil);
  for (const copy of [1, 2]) for (const loop of byComputing) command(loop, copy, loop.computeUntil);

  for (const copy of [1, 2]) {
    for (const message of round.messages) {
      if (copy > message.copies) continue;
      const { everyRounds, firstRound, from } = message;
      const to = message.to.length > 0 ? message.to : null;
      place(
        { id: copyId(`other/${message.id}`, copy), message: "other", loop: null, label: message.name, copy, everyRounds, firstRound, from, to },
        message.payloadBytes,
        0,
      );
    }
  }
  slots.sort((a, b) => a.start - b.start || a.firstRound - b.firstRound);
  return { slots, loops, end: slots.reduce((end, slot) => Math.max(end, slot.end), 0) };
}
