/**
 * What decides delivery (model 3): for each round and message, delivered or lost. One uniform number per stream and round is
 * always drawn, even when the outcome is overridden, so that raising a probability only adds losses and nothing that is
 * added to a scenario changes the losses of another message.
 */
import { type Uniform, uniformStream } from "#shared/math/random.ts";
import type { LossProcess, Message, Scenario } from "#shared/scenario/schema.ts";
import { MESSAGES } from "#shared/scenario/schema.ts";
import { type LoopDemand, loopDemands } from "./demand.ts";
import { NO_SLOT } from "./flood.ts";
import { drawFloods, type FloodRecord } from "./floods.ts";
import { Outages } from "./outages.ts";
import type { RoundTiming } from "./round.ts";
import { toNs } from "./schedule.ts";

export interface Deliveries {
  /** 1 = delivered; one entry per round of the network, whether the loop's message has a slot in it or not. */
  measurement: Uint8Array;
  command: Uint8Array;
  /** The floods, when they decided. */
  floods: FloodRecord | null;
}

type GilbertElliott = Extract<LossProcess, { type: "gilbert-elliott-shared" }>["channel"];
type Replay = Extract<LossProcess, { type: "replay" }>;

/** Stationary probability of the bad state, goodToBad / (goodToBad + badToGood); 0 for a channel that never moves. */
function badShare({ goodToBad, badToGood }: GilbertElliott): number {
  return goodToBad + badToGood > 0 ? goodToBad / (goodToBad + badToGood) : 0;
}

/** 1 = bad. The state of round k decides round k, then it moves. Starts stationary. */
function channelStates(channel: GilbertElliott, uniform: Uniform, rounds: number): Uint8Array {
  const bad = new Uint8Array(rounds);
  let state = uniform() < badShare(channel) ? 1 : 0;
  for (let k = 0; k < rounds; k++) {
    bad[k] = state;
    const u = uniform();
    state = state ? (u < channel.badToGood ? 0 : 1) : u < channel.goodToBad ? 1 : 0;
  }
  return bad;
}

/** Probability that the process loses the message in round k, before outages and jamming. */
type LossOf = (k: number) => number;

function processOf(message: Message, loopId: string, scenario: Scenario, rounds: number, seed: number, sharedBad: Uint8Array | null): LossOf {
  const { process } = scenario.losses;
  switch (process.type) {
    case "none":
    case "flood":
      return () => 0;
    case "bernoulli":
      return () => process[message];
    case "given":
      return (k) => 1 - given(process[message], process.then, k);
    case "replay": {
      const bits = replayed(process, message, rounds);
      return (k) => 1 - bits[k];
    }
    case "gilbert-elliott":
    case "gilbert-elliott-shared": {
      const channel = process.type === "gilbert-elliott" ? process[message] : process.channel;
      const bad = sharedBad ?? channelStates(channel, uniformStream(seed, `channel/${loopId}/${message}`), rounds);
      return (k) => (bad[k] ? channel.lossInBad : channel.lossInGood);
    }
  }
}

/** Draws every delivery of the scenario's own loop. Streams carry the loop's id and the message's name. */
export function drawDeliveries(scenario: Scenario, timing: RoundTiming, rounds: number, seed: number): Deliveries {
  const loop = scenario.loops[0];
  const [demand] = loopDemands(scenario);
  const { process, streams } = scenario.losses;
  const result: Deliveries = {
    measurement: new Uint8Array(rounds).fill(1),
    command: new Uint8Array(rounds).fill(1),
    floods: process.type === "flood" && scenario.floor ? drawFloods(scenario, timing, rounds, seed) : null,
  };
  const sharedBad = process.type === "gilbert-elliott-shared" ? channelStates(process.channel, uniformStream(seed, "channel/shared"), rounds) : null;
  const outages = new Outages(scenario, timing);

  for (const message of MESSAGES) {
    const delivered = result[message];
    const slots = timing.slots.map((slot, index) => ({ slot, index })).filter(({ slot }) => slot.message === message && slot.loop === loop.id);
    if (slots.length === 0) {
      withoutSlot(message, delivered, demand, timing, outages);
      continue;
    }
    const lossOf = processOf(message, loop.id, scenario, rounds, seed, sharedBad);
    delivered.fill(0);
    for (const { slot, index } of slots) {
      const ns = timing.ns.slots[index];
      const copy = slot.copy > 1 ? `/${slot.copy}` : "";
      const uniform = uniformStream(seed, streams === "shared" ? "loss/shared" : `loss/${loop.id}/${message}${copy}`);
      const forced = overlays(message, ns, timing.ns.period, rounds, scenario.losses.outages, toNs(loop.start.networkJoinsAtS));
      const target = message === "measurement" ? demand.nodes?.controller : demand.nodes?.actuator;
      const column = result.floods?.nodes.indexOf(target ?? -1) ?? -1;
      for (let k = 0; k < rounds; k++) {
        const u = uniform();
        const arrives = result.floods ? received(result.floods, k, index, column) : outages.travels(slot, ns, k);
        if (arrives && u >= either(lossOf(k), forced[k])) delivered[k] = 1;
      }
    }
  }
  return result;
}

/** A controller in the same node hears and is heard without radio, unless that node is down. */
function withoutSlot(message: Message, delivered: Uint8Array, demand: LoopDemand, timing: RoundTiming, outages: Outages): void {
  if (!demand.nodes) return;
  const { sampleAtS, actAtS, commandDelay } = timing.loops[0];
  // The command of the round before, or of this one, acts commandDelay rounds before actAtS is counted from.
  const at = message === "measurement" ? toNs(sampleAtS) : toNs(actAtS) - commandDelay * timing.ns.period;
  const node = message === "measurement" ? demand.nodes.sensor : demand.nodes.actuator;
  for (let k = 0; k < delivered.length; k++) if (outages.down(node, k * timing.ns.period + at, k * timing.ns.period + at)) delivered[k] = 0;
}

/** Did the flood of this slot reach the node of that column? A round without the slot has nothing to lose. */
const received = ({ firstStep, slots, nodes }: FloodRecord, k: number, slot: number, column: number): boolean =>
  firstStep[(k * slots + slot) * nodes.length + column] <= NO_SLOT;

/** Probability that at least one of two independent causes loses a message. */
const either = (p: number, q: number): number => p + (1 - p) * q;

function given(sequence: readonly (0 | 1)[], then: "error" | "delivered" | "repeat", k: number): 0 | 1 {
  if (k < sequence.length) return sequence[k];
  return then === "repeat" && sequence.length > 0 ? sequence[k % sequence.length] : 1;
}

/** Run lengths (delivered, lost, delivered, ...) as one entry per round, 1 = delivered. */
export function replayed({ then, ...process }: Pick<Replay, "measurement" | "command" | "then">, message: Message, rounds: number): Uint8Array {
  const bits = new Uint8Array(rounds).fill(1);
  const { runs } = process[message];
  let k = 0;
  do {
    let value = 1;
    const before = k;
    for (const run of runs) {
      const until = Math.min(rounds, k + run);
      if (value === 0) bits.fill(0, k, until);
      k = until;
      value = 1 - value;
    }
    if (k === before) break;
  } while (then === "repeat" && k < rounds);
  return bits;
}

/** Probability with which outages and a late network lose the message in each round, whatever the process says. */
function overlays(
  message: Message,
  slot: { start: number; end: number },
  period: number,
  rounds: number,
  outages: Scenario["losses"]["outages"],
  joins: number,
): Float64Array {
  const forced = new Float64Array(rounds);
  for (let k = 0; k < rounds && k * period + slot.start < joins; k++) forced[k] = 1;
  for (const outage of outages) {
    if (!outage.messages.includes(message)) continue;
    const from = toNs(outage.fromS);
    const until = toNs(outage.untilS);
    if (until <= from) continue;
    const first = Math.max(0, Math.floor((from - slot.end) / period));
    for (let k = first; k < rounds && k * period + slot.start < until; k++) {
      if (k * period + slot.end > from) forced[k] = either(forced[k], outage.lossProbability);
    }
  }
  return forced;
}
