/**
 * Many simulated floods, counted (model 6): how often and in which step each node received each message, what that means for
 * the loops, and how long radios were on. Advances in chunks, so that a worker can yield and cancel; memory does not grow.
 */
import { randomKey } from "#shared/math/keyed-random.ts";
import { roundsOf } from "#shared/scenario/rounds.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { received } from "./flood.ts";
import { FloodProcess } from "./floods.ts";
import { type LoopTiming, occurs, type RoundTiming } from "./round.ts";

export interface TallyOptions {
  rounds: number;
  seed: number;
}

/** Pieces into which the floods are cut, to see whether they vary more than independent floods would. */
export const BATCHES = 20;
/** Most times that the run's time is gone through again. */
const MOST_REPEATS = 25;
/** Where fewer rounds than a run has are asked for: at most so many stretches, spread evenly over it ... */
const STRETCHES = 16;
/** ... and none so short that a slot of every 64th round does not occur in it. */
const SHORTEST_STRETCH = 64;

/** Counts of one slot. */
export interface SlotTally {
  /** Floods, one each time the slot occurs. */
  floods: number;
  /** Floods that reached every node that needs the message. */
  delivered: number;
  /** Floods of each batch, and those that reached everybody in need. */
  batchFloods: Uint32Array;
  batchDelivered: Uint32Array;
  /** Places, in the floor's order, of the nodes that need it; without its source. */
  needed: number[];
  /** Place of the node that starts the flood. */
  source: number;
  steps: number;
  /** nodes x (steps + 1): floods that the node first received in that step; 0: it started them. */
  firstStep: Uint32Array;
}

/** Counts of one message, whether it has one slot of a round or two: one that arrives suffices. */
export interface MessageTally {
  /** Indices of its slots. */
  slots: number[];
  /** Rounds in which it was sent. */
  sent: number;
  /** Sent and received by every node that needs it. */
  delivered: number;
  /** Per node. */
  received: Uint32Array;
  needed: number[];
}

/** Counts of one loop, once for every sampling. */
export interface LoopTally {
  samplings: number;
  measurementLost: number;
  commandLost: number;
  bothLost: number;
}

interface CountedLoop {
  timing: LoopTiming;
  /** Index of its message; -1: it needs none. */
  measurement: number;
  command: number;
  counts: LoopTally;
  /** The command travels a round after its measurement: was that one lost? Null: there was none. */
  pending: boolean | null;
}

/** Does anything on the floor depend on the time of the run? */
function timeMatters({ floor }: Scenario): boolean {
  if (!floor) return false;
  const windows = floor.interferers.some(({ fromS, untilS }) => fromS > 0 || untilS !== null);
  return (
    windows || floor.nodes.some(({ wayPoints, outages }) => wayPoints.length > 0 || outages.some(({ fromS, untilS }) => fromS > 0 || untilS !== null))
  );
}

export class FloodTally {
  /** Node numbers, in the floor's order. */
  readonly nodes: number[];
  readonly slots: SlotTally[];
  readonly messages: MessageTally[];
  readonly loops: { timing: LoopTiming; counts: LoopTally }[];
  /** Per node over all rounds, ns; wake-ups count as listening. */
  readonly txNs: Float64Array;
  readonly rxNs: Float64Array;
  /** Rounds drawn. */
  done = 0;
  readonly rounds: number;
  private readonly countedLoops: CountedLoop[];
  /** Of each message: was it lost when it was last sent? */
  private readonly lastLost: Uint8Array;
  private readonly span: number;
  private process: FloodProcess;
  private repeat = 0;
  private repeatLength: number;
  private inRepeat = 0;

  /** The scenario has to have a floor with the nodes that it speaks of (prepareFloor); else a RangeError. */
  constructor(
    private readonly scenario: Scenario,
    private readonly timing: RoundTiming,
    private readonly options: TallyOptions,
  ) {
    const { rounds } = options;
    this.rounds = rounds;
    // The instants of a run, again and again with other random numbers; where nothing changes with time, one long run is the same and cheaper.
    this.span = timeMatters(scenario) ? Math.max(roundsOf(scenario), Math.ceil(rounds / MOST_REPEATS)) : Math.max(1, rounds);
    this.repeatLength = Math.min(this.span, rounds);
    this.process = new FloodProcess(scenario, timing, options.seed);
    this.nodes = this.process.nodes;
    const n = this.nodes.length;
    this.txNs = new Float64Array(n);
    this.rxNs = new Float64Array(n);
    this.slots = timing.slots.map(({ from, to, steps }): SlotTally => {
      const source = this.nodes.indexOf(from ?? -1);
      const needed = this.nodes.flatMap((id, place) => ((to === null || to.includes(id)) && place !== source ? [place] : []));
      return {
        floods: 0,
        delivered: 0,
        batchFloods: new Uint32Array(BATCHES),
        batchDelivered: new Uint32Array(BATCHES),
        needed,
        source,
        steps,
        firstStep: new Uint32Array(n * (steps + 1)),
      };
    });
    this.messages = timing.slots.flatMap((slot, i): MessageTally[] => {
      if (slot.copy > 1) return [];
      const second = timing.slots.findIndex(({ id }) => id === `${slot.id}/2`);
      const slots = second < 0 ? [i] : [i, second];
      return [{ slots, sent: 0, delivered: 0, received: new Uint32Array(n), needed: this.slots[i].needed }];
    });
    this.lastLost = new Uint8Array(this.messages.length);
    this.countedLoops = timing.loops.map((loop): CountedLoop => {
      const of = (message: string) =>
        this.messages.findIndex(({ slots: [slot] }) => timing.slots[slot].loop === loop.loop && timing.slots[slot].message === message);
      return {
        timing: loop,
        measurement: of("measurement"),
        command: of("command"),
        counts: { samplings: 0, measurementLost: 0, commandLost: 0, bothLost: 0 },
        pending: null,
      };
    });
    this.loops = this.countedLoops;
  }

  get finished(): boolean {
    return this.done >= this.rounds;
  }

  /** Draws at most so many more rounds. */
  advance(rounds: number): void {
    const until = Math.min(this.rounds, this.done + rounds);
    while (this.done < until) this.round();
  }

  private round(): void {
    if (this.inRepeat >= this.repeatLength) this.again();
    const { process, repeatLength, span, inRepeat } = this;
    const stretch = Math.max(SHORTEST_STRETCH, Math.ceil(repeatLength / STRETCHES));
    if (repeatLength < span && inRepeat % stretch === 0) this.jump(Math.floor((inRepeat / repeatLength) * span));
    const round = process.round;
    process.next();
    for (let i = 0; i < this.slots.length; i++) if (occurs(this.timing.slots[i], round)) this.countSlot(i);
    for (let i = 0; i < this.messages.length; i++) if (occurs(this.timing.slots[this.messages[i].slots[0]], round)) this.countMessage(i);
    for (const loop of this.countedLoops) this.countLoop(loop, round);
    this.inRepeat++;
    this.done++;
    if (this.done >= this.rounds) this.addRadioTimes();
  }

  private jump(round: number): void {
    this.process.round = Math.max(this.process.round, round);
    for (const loop of this.countedLoops) loop.pending = null;
  }

  private again(): void {
    this.addRadioTimes();
    this.repeat++;
    // Unsigned, as seeds are.
    const seed = randomKey(this.options.seed, `floods/${this.repeat}`).a >>> 0;
    this.process = new FloodProcess(this.scenario, this.timing, seed);
    this.repeatLength = Math.min(this.span, this.rounds - this.done);
    this.inRepeat = 0;
    for (const loop of this.countedLoops) loop.pending = null;
  }

  private addRadioTimes(): void {
    for (let i = 0; i < this.nodes.length; i++) {
      this.txNs[i] += this.process.txNs[i];
      this.rxNs[i] += this.process.rxNs[i];
    }
  }

  private countSlot(index: number): void {
    const slot = this.slots[index];
    const { firstStep } = this.process;
    const n = this.nodes.length;
    const row = index * n;
    const width = slot.steps + 1;
    for (let i = 0; i < n; i++) {
      const first = firstStep[row + i];
      if (received(first)) slot.firstStep[i * width + first]++;
    }
    const batch = Math.floor((this.done * BATCHES) / this.rounds);
    slot.floods++;
    slot.batchFloods[batch]++;
    if (this.reached(index)) {
      slot.delivered++;
      slot.batchDelivered[batch]++;
    }
  }

  /** Did the last flood of the slot reach every node in need? */
  private reached(index: number): boolean {
    const row = index * this.nodes.length;
    for (const place of this.slots[index].needed) if (!received(this.process.firstStep[row + place])) return false;
    return true;
  }

  private countMessage(index: number): void {
    const message = this.messages[index];
    const { firstStep } = this.process;
    const n = this.nodes.length;
    const [one] = message.slots;
    const other = message.slots[1] ?? one;
    const has = (place: number) => received(firstStep[one * n + place]) || received(firstStep[other * n + place]);
    for (let i = 0; i < n; i++) if (has(i)) message.received[i]++;
    const lost = message.needed.some((place) => !has(place));
    message.sent++;
    if (!lost) message.delivered++;
    this.lastLost[index] = lost ? 1 : 0;
  }

  private lost(message: number): boolean {
    return message >= 0 && this.lastLost[message] === 1;
  }

  private countLoop(loop: CountedLoop, round: number): void {
    const { timing, counts } = loop;
    if (timing.commandDelay === 1 && loop.pending !== null) {
      tally(counts, loop.pending, this.lost(loop.command));
      loop.pending = null;
    }
    if (!occurs(timing, round)) return;
    const lost = this.lost(loop.measurement);
    if (timing.commandDelay === 0) tally(counts, lost, this.lost(loop.command));
    else loop.pending = lost;
  }
}

function tally(counts: LoopTally, measurementLost: boolean, commandLost: boolean): void {
  counts.samplings++;
  if (measurementLost) counts.measurementLost++;
  if (commandLost) counts.commandLost++;
  if (measurementLost && commandLost) counts.bothLost++;
}

/** Floods of the slot that a node had, as receiver or as their sender. */
export function receivedBy({ firstStep, steps }: SlotTally, place: number): number {
  let sum = 0;
  for (let step = 0; step <= steps; step++) sum += firstStep[place * (steps + 1) + step];
  return sum;
}

/** Step by which half of all floods have arrived at a node; null: less than half ever do. */
export function medianStep({ firstStep, steps, floods }: Pick<SlotTally, "firstStep" | "steps" | "floods">, place: number): number | null {
  let sum = 0;
  for (let step = 0; step <= steps; step++) {
    sum += firstStep[place * (steps + 1) + step];
    if (floods > 0 && 2 * sum >= floods) return step;
  }
  return null;
}

/** Sum over batches of (delivered - n p)^2 / (n p (1 - p)), over its expectation for independent floods (index of dispersion; Cochran, 1954). */
export function spreadOf({ floods, delivered, batchFloods, batchDelivered }: SlotTally): number {
  const p = floods > 0 ? delivered / floods : 0;
  if (p <= 0 || p >= 1) return 1;
  let sum = 0;
  let batches = 0;
  for (let i = 0; i < BATCHES; i++) {
    const n = batchFloods[i];
    if (n === 0) continue;
    const excess = batchDelivered[i] - n * p;
    sum += (excess * excess) / (n * p * (1 - p));
    batches++;
  }
  return batches > 1 ? sum / (batches - 1) : 1;
}

export const withoutOutages = (scenario: Scenario): Scenario =>
  scenario.floor ? { ...scenario, floor: { ...scenario.floor, nodes: scenario.floor.nodes.map((node) => ({ ...node, outages: [] })) } } : scenario;
