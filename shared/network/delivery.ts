/**
 * What decides delivery (model 3): for each round and message, delivered or lost. One uniform number per stream and round is
 * always drawn, even when the outcome is overridden, so that raising a probability only adds losses and nothing that is
 * added to a scenario changes the losses of another message.
 */
import { type Uniform, uniformStream } from "#shared/math/random.ts";
import type { LossProcess, Message, Scenario } from "#shared/scenario/schema.ts";
import { MESSAGES } from "#shared/scenario/schema.ts";
import { type RoundTiming, toNs } from "./round.ts";

export interface Deliveries {
  /** 1 = delivered; one entry per round. All 1 for a message that the placement does not need. */
  measurement: Uint8Array;
  command: Uint8Array;
}

type GilbertElliott = Extract<LossProcess, { type: "gilbert-elliott-shared" }>["channel"];

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

/** Draws every delivery of a run. Streams carry the loop's id and the message's name. */
export function drawDeliveries(scenario: Scenario, timing: RoundTiming, rounds: number, seed: number): Deliveries {
  const loop = scenario.loops[0];
  const { process, streams, outages } = scenario.losses;
  const result: Deliveries = { measurement: new Uint8Array(rounds).fill(1), command: new Uint8Array(rounds).fill(1) };
  const sharedBad = process.type === "gilbert-elliott-shared" ? channelStates(process.channel, uniformStream(seed, "channel/shared"), rounds) : null;

  for (const message of MESSAGES) {
    const slot = timing.ns.slots.find((candidate) => candidate.message === message);
    if (!slot) continue;
    const delivered = result[message];
    const uniform = uniformStream(seed, streams === "shared" ? "loss/shared" : `loss/${loop.id}/${message}`);
    const own = process.type === "gilbert-elliott" ? process[message] : null;
    const bad = own ? channelStates(own, uniformStream(seed, `channel/${loop.id}/${message}`), rounds) : sharedBad;
    const channel = own ?? (process.type === "gilbert-elliott-shared" ? process.channel : null);
    const forced = overlays(message, slot, timing.ns.period, rounds, outages, toNs(loop.start.networkJoinsAtS));
    for (let k = 0; k < rounds; k++) {
      const u = uniform();
      let p = 0;
      if (process.type === "given") p = 1 - given(process[message], process.then, k);
      else if (channel && bad) p = bad[k] ? channel.lossInBad : channel.lossInGood;
      else if (process.type === "bernoulli") p = process[message];
      if (u < either(p, forced[k])) delivered[k] = 0;
    }
  }
  return result;
}

/** Probability that at least one of two independent causes loses a message. */
const either = (p: number, q: number): number => p + (1 - p) * q;

function given(sequence: readonly (0 | 1)[], then: "error" | "delivered" | "repeat", k: number): 0 | 1 {
  if (k < sequence.length) return sequence[k];
  return then === "repeat" && sequence.length > 0 ? sequence[k % sequence.length] : 1;
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
