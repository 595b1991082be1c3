/**
 * Floods of a run, round after round: who received in which step, and how long radios were on. The random numbers of a slot are
 * named by the slot, so that another message changes nothing; those of a node by its number, so that neither order nor other
 * nodes do.
 */
import { type RandomKey, randomKey } from "#shared/math/keyed-random.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { hopOffset } from "./channels.ts";
import { FloodWave, NO_SLOT, RADIO_OFF, type Relay, radioOnTime, received, type SlotTimes, sendsIn, type WaveLinks } from "./flood.ts";
import { Outages } from "./outages.ts";
import { occurs, type RoundTiming, type Slot } from "./round.ts";
import { toNs } from "./schedule.ts";
import { waveLinks } from "./wave-links.ts";

export interface FloodRecord {
  /** Node numbers, in the floor's order. */
  nodes: number[];
  slots: number;
  rounds: number;
  /** rounds x slots x nodes: step of first reception, 0 at the source; NOT_RECEIVED, RADIO_OFF, NO_SLOT (flood.ts). */
  firstStep: Uint8Array;
  /** Per node, over all rounds, ns: radio on and sending. */
  txNs: Float64Array;
  /** Radio on and listening, wake-ups included. */
  rxNs: Float64Array;
}

interface PreparedSlot extends SlotTimes {
  /** Occurrence in rounds, and where it lies in them, ns. */
  rhythm: { everyRounds: number; firstRound: number };
  index: number;
  start: number;
  floodStart: number;
  end: number;
  /** Place of the node that starts the flood; -1: there is none. */
  source: number;
  isBeacon: boolean;
  key: RandomKey;
}

export class FloodProcess {
  /** Node numbers, in the floor's order. */
  readonly nodes: number[];
  /** Slots of a round. */
  readonly slots: number;
  /** The round that `next` draws. */
  round = 0;
  /** slots x nodes: what the last round drew. */
  readonly firstStep: Uint8Array;
  readonly txNs: Float64Array;
  readonly rxNs: Float64Array;
  private readonly relay: Relay;
  private readonly period: number;
  private readonly links: WaveLinks;
  private readonly wave: FloodWave;
  /** The beacon's slot first. */
  private readonly prepared: PreparedSlot[];
  /** Of each place, its index in the floor's list. Places go by node number, so that sums do not depend on the list's order. */
  private readonly places: number[];
  private readonly outages: Outages;
  private readonly first: Uint8Array;
  private readonly silent: Uint8Array;
  private readonly beaconNeeded: boolean;

  /** Throws a RangeError without a floor. */
  constructor(scenario: Scenario, timing: RoundTiming, seed: number) {
    const floor = floorOf(scenario);
    const n = floor.nodes.length;
    this.nodes = floor.nodes.map(({ id }) => id);
    this.places = this.nodes.map((_, i) => i).sort((a, b) => this.nodes[a] - this.nodes[b]);
    this.slots = timing.slots.length;
    this.relay = { relay: scenario.round.relay, transmissions: scenario.round.transmissions };
    this.period = timing.ns.period;
    this.beaconNeeded = scenario.round.beacon?.needed ?? false;
    this.firstStep = new Uint8Array(this.slots * n).fill(NO_SLOT);
    this.txNs = new Float64Array(n);
    this.rxNs = new Float64Array(n);
    this.first = new Uint8Array(n);
    this.silent = new Uint8Array(n);
    this.outages = new Outages(scenario, timing);
    this.wave = new FloodWave(
      Int32Array.from(this.places, (index) => this.nodes[index]),
      this.relay,
    );
    const slots = timing.slots.map((slot, i) => this.prepare(slot, timing.ns.slots[i], i, seed));
    this.prepared = [...slots].sort((a, b) => Number(b.isBeacon) - Number(a.isBeacon));
    const linkSlots = slots.map(({ floodStart, rhythm }, i) => ({
      bytes: scenario.radio.headerBytes + timing.slots[i].payloadBytes,
      floodStart,
      hopOffset: hopOffset(timing.slots[i].id),
      ...rhythm,
    }));
    this.links = waveLinks(floor, scenario.radio, this.places, linkSlots, this.period, seed);
  }

  private prepare(slot: Slot, ns: RoundTiming["ns"]["slots"][number], index: number, seed: number): PreparedSlot {
    return {
      index,
      rhythm: { everyRounds: slot.everyRounds, firstRound: slot.firstRound },
      start: ns.start,
      floodStart: ns.floodStart,
      end: ns.end,
      wakeUp: ns.floodStart - ns.start,
      airtime: toNs(slot.airtimeS),
      step: ns.step,
      steps: slot.steps,
      source: this.places.findIndex((place) => this.nodes[place] === slot.from),
      isBeacon: slot.message === "beacon",
      key: randomKey(seed, `flood/${slot.id}`),
    };
  }

  /** Draws the next round into `firstStep`, and adds its radio-on times. */
  next(): void {
    const { round, prepared } = this;
    this.silent.fill(0);
    for (let i = 0; i < prepared.length; i++) {
      const slot = prepared[i];
      if (occurs(slot.rhythm, round)) this.draw(slot, round);
      else this.firstStep.fill(NO_SLOT, slot.index * this.nodes.length, (slot.index + 1) * this.nodes.length);
    }
    this.round++;
  }

  private draw(slot: PreparedSlot, round: number): void {
    const { first, silent, places } = this;
    const { source } = slot;
    const n = places.length;
    const begin = round * this.period;
    for (let i = 0; i < n; i++)
      first[i] = silent[i] === 1 || this.outages.down(this.nodes[places[i]], begin + slot.start, begin + slot.end) ? RADIO_OFF : 0;
    const sent = source >= 0 && first[source] !== RADIO_OFF;
    if (sent) {
      const start = begin + slot.floodStart;
      this.links.beginSlot(round, slot.index, start);
      this.wave.draw(this.links, source, slot.key, round, { start, step: slot.step, steps: slot.steps }, first);
    }
    const row = slot.index * n;
    for (let i = 0; i < n; i++) {
      const index = places[i];
      const off = first[i] === RADIO_OFF;
      if (!sent) first[i] = RADIO_OFF;
      if (slot.isBeacon && this.beaconNeeded && !received(first[i])) silent[i] = 1;
      this.firstStep[row + index] = first[i];
      if (off) continue;
      const { send, listen } = radioOnTime(this.relay, first[i], slot);
      this.txNs[index] += send;
      this.rxNs[index] += listen;
    }
  }
}

function floorOf(scenario: Scenario): Floor {
  if (!scenario.floor) throw new RangeError("floods need a floor");
  return scenario.floor;
}

/** Keeps every round that a process draws; in pieces, so that a worker can look around in between. */
export class FloodRecorder {
  readonly #process: FloodProcess;
  readonly #rounds: number;
  readonly #firstStep: Uint8Array;

  constructor(scenario: Scenario, timing: RoundTiming, rounds: number, seed: number) {
    this.#process = new FloodProcess(scenario, timing, seed);
    this.#rounds = rounds;
    this.#firstStep = new Uint8Array(rounds * this.#process.firstStep.length);
  }

  /** Rounds drawn. */
  get done(): number {
    return this.#process.round;
  }

  /** Draws at most so many more rounds; true when it has them all. */
  advance(rounds: number): boolean {
    const process = this.#process;
    const until = Math.min(this.#rounds, process.round + rounds);
    while (process.round < until) {
      const at = process.round * process.firstStep.length;
      process.next();
      this.#firstStep.set(process.firstStep, at);
    }
    return process.round >= this.#rounds;
  }

  record(): FloodRecord {
    const { nodes, slots, txNs, rxNs } = this.#process;
    return { nodes, slots, rounds: this.#rounds, firstStep: this.#firstStep, txNs, rxNs };
  }
}

/** Draws the floods of all rounds. Same scenario, timing and seed: the same record, bit for bit. */
export function drawFloods(scenario: Scenario, timing: RoundTiming, rounds: number, seed: number): FloodRecord {
  const recorder = new FloodRecorder(scenario, timing, rounds, seed);
  recorder.advance(rounds);
  return recorder.record();
}

/**
 * Who sends in which step of one flood: entry s - 1 holds the places, in the order of `firstSteps` (one node's first reception
 * each, a row of a record), of the nodes that send in step s. For drawing the wave.
 */
export function senders(scenario: Scenario, timing: RoundTiming, slot: number, firstSteps: ArrayLike<number>): number[][] {
  const relay = { relay: scenario.round.relay, transmissions: scenario.round.transmissions };
  return Array.from({ length: timing.slots[slot]?.steps ?? 0 }, (_, i) =>
    Array.from(firstSteps, (first, node) => (sendsIn(relay, first, i + 1) ? node : -1)).filter((node) => node >= 0),
  );
}
