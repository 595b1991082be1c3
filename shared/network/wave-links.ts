/** The two kinds of links that a wave runs over: a link budget, or measured packet reception ratios. */
import { fromDb } from "#shared/math/decibel.ts";
import type { Floor, FloorNode, LinkBudgetSettings } from "#shared/scenario/floor-schema.ts";
import type { Radio } from "#shared/scenario/round-schema.ts";
import { channelsInUse, hopPlace } from "./channels.ts";
import { blockS, Fading, roundCorrelation } from "./fading.ts";
import type { WaveLinks } from "./flood.ts";
import { type Activity, activitiesOf } from "./interference.ts";
import { interferenceShares, LinkBudget, MID_BAND_MHZ } from "./link-budget.ts";
import { type ReceptionCurve, ReceptionCurves } from "./reception.ts";

/** What the links have to know of a slot. `floodStart` in ns from the start of its round; `bytes`: header and payload. */
export interface LinkSlot {
  bytes: number;
  floodStart: number;
  /** Where it begins in the list of channels (channels.ts). */
  hopOffset: number;
  everyRounds: number;
  firstRound: number;
}

/**
 * Power of the nodes that send at once, as the receiver sees it: the sum, less the penalty unless the strongest is at least the
 * capture ratio above the sum of the others. All linear.
 */
export function combinedPower(sum: number, strongest: number, captureRatio: number, penaltyRatio: number): number {
  return strongest >= captureRatio * (sum - strongest) ? sum : sum * penaltyRatio;
}

/** Links by budget; `nodes` in the order of places. */
export class BudgetLinks implements WaveLinks {
  private readonly budget: LinkBudget;
  private readonly captureRatio: number;
  private readonly penaltyRatio: number;
  private readonly channels: number[];
  private readonly curves: ReceptionCurve[];
  private readonly activities: Activity[];
  private readonly shares: Float64Array;
  private readonly sending: Int32Array;
  private sendingCount = 0;
  private readonly fading: Fading | null;
  private readonly blocks: number[];
  /** slots x channels, as they are asked for. */
  private readonly planes: ReturnType<Fading["plane"]>[] = [];
  private plane: ReturnType<Fading["plane"]> | null = null;
  private round = 0;
  private slot = 0;
  private occurrence = 0;
  private hop = 0;
  private curve: ReceptionCurve;

  constructor(
    floor: Floor,
    settings: LinkBudgetSettings,
    private readonly radio: Radio,
    private readonly nodes: readonly FloorNode[],
    private readonly slots: readonly LinkSlot[],
    periodNs: number,
    seed: number,
  ) {
    this.budget = new LinkBudget(floor, settings, radio, nodes, 0);
    this.captureRatio = fromDb(settings.captureDb);
    this.penaltyRatio = fromDb(-settings.concurrencyPenaltyDb);
    this.channels = channelsInUse(radio);
    const curves = new ReceptionCurves(radio.phy, radio.reception);
    this.curves = slots.map(({ bytes }) => curves.of(bytes));
    this.curve = this.curves[0];
    this.shares = interferenceShares(floor, radio, this.channels);
    this.activities = activitiesOf(floor.interferers, seed);
    this.sending = new Int32Array(floor.interferers.length);
    const { fading } = settings;
    const block = fading ? blockS(fading, MID_BAND_MHZ) * 1e9 : Number.POSITIVE_INFINITY;
    this.blocks = slots.map(({ floodStart }) => Math.floor(floodStart / block));
    this.fading = fading ? this.fadingOf(fading, periodNs, seed) : null;
  }

  private fadingOf(settings: NonNullable<LinkBudgetSettings["fading"]>, periodNs: number, seed: number): Fading {
    const correlation = roundCorrelation(settings, MID_BAND_MHZ, periodNs / 1e9);
    const { budget, nodes } = this;
    const atRest = correlation(0);
    const moves = nodes.map((node) => node.wayPoints.length > 0);
    const rho = (a: number, b: number, round: number): number => {
      if (!moves[a] && !moves[b]) return atRest;
      const atS = (round * periodNs) / 1e9;
      return correlation(Math.max(budget.speed(a, atS), budget.speed(b, atS)));
    };
    return new Fading(
      settings,
      seed,
      nodes.map(({ id }) => id),
      rho,
    );
  }

  beginSlot(round: number, slot: number, start: number): void {
    const { everyRounds, firstRound } = this.slots[slot];
    this.round = round;
    this.slot = slot;
    this.occurrence = (round - firstRound) / everyRounds;
    this.curve = this.curves[slot];
    this.budget.moveTo(start / 1e9);
  }

  beginStep(step: number, start: number, end: number): void {
    const { channels, fading, activities } = this;
    this.hop = hopPlace(this.radio.channels.hopping, channels.length, this.occurrence, this.slots[this.slot].hopOffset, step);
    if (fading) {
      const at = this.slot * channels.length + this.hop;
      this.planes[at] ??= fading.plane(this.blocks[this.slot], channels[this.hop]);
      this.plane = this.planes[at];
    }
    this.sendingCount = 0;
    for (let k = 0; k < activities.length; k++) {
      if (this.shares[k * channels.length + this.hop] > 0 && activities[k].sendsIn(start, end)) this.sending[this.sendingCount++] = k;
    }
  }

  reception(node: number, senders: Int32Array, count: number): number {
    const { budget, fading, plane, round } = this;
    const { powerMw, interferenceMw } = budget;
    const n = this.nodes.length;
    const row = node * n;
    let sum = 0;
    let strongest = 0;
    for (let s = 0; s < count; s++) {
      const sender = senders[s];
      let power = powerMw[row + sender];
      if (fading !== null && plane !== null) power *= fading.gain(plane, node, sender, round);
      sum += power;
      if (power > strongest) strongest = power;
    }
    const signal = combinedPower(sum, strongest, this.captureRatio, this.penaltyRatio);
    let noise = budget.noiseMw;
    for (let s = 0; s < this.sendingCount; s++) {
      const k = this.sending[s];
      noise += interferenceMw[k * n + node] * this.shares[k * this.channels.length + this.hop];
    }
    return this.curve(signal / noise);
  }
}

/** Measured ratios; several senders are independent tries, neither positions nor interferers matter. Row = sender, column = receiver. */
export class MatrixLinks implements WaveLinks {
  private readonly loss: Float64Array;
  private readonly n: number;

  /** `places`: of each place, its row and column in the matrix. */
  constructor(prr: readonly (readonly number[])[], places: readonly number[]) {
    this.n = places.length;
    this.loss = new Float64Array(this.n * this.n);
    for (let receiver = 0; receiver < this.n; receiver++) {
      for (let sender = 0; sender < this.n; sender++) this.loss[receiver * this.n + sender] = 1 - prr[places[sender]][places[receiver]];
    }
  }

  beginSlot(): void {}
  beginStep(): void {}

  reception(node: number, senders: Int32Array, count: number): number {
    let lost = 1;
    for (let s = 0; s < count; s++) lost *= this.loss[node * this.n + senders[s]];
    return 1 - lost;
  }
}

/** Links of a floor; `places`: of each place, its index in the floor's list of nodes. */
export function waveLinks(
  floor: Floor,
  radio: Radio,
  places: readonly number[],
  slots: readonly LinkSlot[],
  periodNs: number,
  seed: number,
): WaveLinks {
  const { links } = floor;
  if (links.type === "matrix") return new MatrixLinks(links.prr, places);
  const nodes = places.map((index) => floor.nodes[index]);
  return new BudgetLinks(floor, links, radio, nodes, slots, periodNs, seed);
}
