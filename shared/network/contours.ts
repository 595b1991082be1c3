/**
 * The wave of one slot over the whole plan: the step by which half of its floods have arrived at a point. Points are listeners
 * without shadowing and fading of their own that neither relay nor miss beacons; who sends in which step is drawn flood by flood, and the
 * probability that a point has received is computed, not drawn, so that few floods give smooth lines.
 */
import { fromDb } from "#shared/math/decibel.ts";
import type { Floor, LinkBudgetSettings } from "#shared/scenario/floor-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { channelsInUse, hopOffset, hopPlace } from "./channels.ts";
import { received, sendsIn } from "./flood.ts";
import { FloodProcess } from "./floods.ts";
import { distance, obstacleLossDb, placeAt, wayOf } from "./geometry.ts";
import { type Activity, activitiesOf } from "./interference.ts";
import { type Grid, gridX, gridY, type Isoline, isolines } from "./isolines.ts";
import { interferenceShares, LinkBudget, MID_BAND_MHZ } from "./link-budget.ts";
import { pathLoss } from "./path-loss.ts";
import { type ReceptionCurve, ReceptionCurves } from "./reception.ts";
import type { RoundTiming } from "./round.ts";
import { combinedPower } from "./wave-links.ts";

export interface ContourOptions {
  seed: number;
  /** Instant at which nodes are where they are; floods are those from then on. */
  atS?: number;
  /** Of so many floods. */
  floods?: number;
  /** Distance of the grid's points, m; chosen by the size of the plan unless given. */
  cellM?: number;
  /** Height of the listeners, m. */
  heightM?: number;
}

export interface FloodContours {
  slot: string;
  floods: number;
  grid: Grid;
  /** At each point: the step by which half of the floods have arrived; 0: less than half ever do. */
  step: Uint8Array;
  /** The water reached in half of the floods by a step's end, and its shores; steps after which it stays as it was are left out. */
  steps: ({ step: number } & Isoline)[];
  /** Where, on the channels that they reach and while they send, interferers cost more than half of the receptions; null: none reaches a channel in use. */
  fouled: Isoline | null;
}

const FLOODS = 40;
/** About so many points. */
const POINTS = 2600;
const HEIGHT_M = 1;
/** Below this mean reception ratio there is little to lose. */
const LEAST = 0.05;
/** Probability of having missed so far, below which later steps no longer matter. */
const DONE = 1e-9;

/** Null where it cannot be said: without a floor, with links given as ratios, or for a slot that is not there. */
export function floodContours(scenario: Scenario, timing: RoundTiming, slotId: string, options: ContourOptions): FloodContours | null {
  const { floor } = scenario;
  const slot = timing.slots.findIndex(({ id }) => id === slotId);
  if (floor?.links.type !== "budget" || floor.nodes.length === 0 || slot < 0) return null;
  const floods = options.floods ?? FLOODS;
  const { widthM, depthM } = floor;
  const cellM = options.cellM ?? Math.sqrt((widthM * depthM) / POINTS);
  const grid: Grid = { columns: Math.ceil(widthM / cellM) + 1, rows: Math.ceil(depthM / cellM) + 1, widthM, depthM };
  const field = new Field(scenario, floor, floor.links, timing, slot, grid, options);
  field.draw(floods);
  const { steps } = timing.slots[slot];
  const points = grid.columns * grid.rows;
  const step = new Uint8Array(points);
  for (let s = steps; s >= 1; s--) {
    const arrived = field.arrived[s - 1];
    for (let p = 0; p < points; p++) if (arrived[p] >= 0.5 * floods) step[p] = s;
  }
  const lines = field.arrived.map((arrived, i) => ({ step: i + 1, ...isolines(grid, arrived, 0.5 * floods) }));
  // Once the water stands still, another shore in the same place says nothing.
  const shown = lines.filter(({ rings }, i) => rings.length > 0 && (i === 0 || !sameWater(field.arrived[i - 1], field.arrived[i], floods)));
  return { slot: slotId, floods, grid, step, steps: shown, fouled: field.fouled() };
}

/** Do the same points have it in half of the floods? */
function sameWater(before: Float64Array, after: Float64Array, floods: number): boolean {
  for (let p = 0; p < after.length; p++) if (before[p] >= 0.5 * floods !== after[p] >= 0.5 * floods) return false;
  return true;
}

class Field {
  /** Per step: sum over floods of the probability that a point has it by the end of that step. */
  readonly arrived: Float64Array[];
  /** Sums of reception ratios over the steps on channels that interferers reach: without them, and with all of them sending. */
  private readonly clean: Float64Array;
  private readonly disturbed: Float64Array;
  private disturbedSteps = 0;
  private readonly process: FloodProcess;
  private readonly curve: ReceptionCurve;
  private readonly noiseMw: number;
  /** points x nodes: received mean power, mW. */
  private readonly powerMw: Float64Array;
  /** interferers x points, over the whole band. */
  private readonly interferenceMw: Float64Array;
  private readonly shares: Float64Array;
  private readonly channels: number[];
  private readonly activities: Activity[];
  private readonly points: number;
  private readonly captureRatio: number;
  private readonly penaltyRatio: number;

  constructor(
    private readonly scenario: Scenario,
    floor: Floor,
    settings: LinkBudgetSettings,
    private readonly timing: RoundTiming,
    private readonly slot: number,
    private readonly grid: Grid,
    { seed, atS = 0, heightM = HEIGHT_M }: ContourOptions,
  ) {
    const { radio } = scenario;
    const { nodes, interferers, obstacles } = floor;
    this.points = grid.columns * grid.rows;
    this.process = new FloodProcess(scenario, timing, seed);
    this.process.round = Math.floor((atS * 1e9) / timing.ns.period);
    this.curve = new ReceptionCurves(radio.phy, radio.reception).of(radio.headerBytes + timing.slots[slot].payloadBytes);
    this.noiseMw = new LinkBudget(floor, settings, radio, [], 0).noiseMw;
    this.captureRatio = fromDb(settings.captureDb);
    this.penaltyRatio = fromDb(-settings.concurrencyPenaltyDb);
    this.channels = channelsInUse(radio);
    this.shares = interferenceShares(floor, radio, this.channels);
    this.activities = activitiesOf(interferers, seed);
    this.arrived = Array.from({ length: timing.slots[slot].steps }, () => new Float64Array(this.points));
    this.clean = new Float64Array(this.points);
    this.disturbed = new Float64Array(this.points);
    const lossAt = pathLoss(settings.pathLoss, MID_BAND_MHZ);
    const place = new Float64Array(3);
    const lossTo = (x: number, y: number, z: number, p: number): number => {
      const px = gridX(grid, p % grid.columns);
      const py = gridY(grid, Math.floor(p / grid.columns));
      return lossAt(distance(x - px, y - py, z - heightM)) + obstacleLossDb(obstacles, x, y, px, py);
    };
    this.powerMw = new Float64Array(this.points * nodes.length);
    nodes.forEach((node, i) => {
      placeAt(wayOf(node), atS, place);
      const dbm = node.txPowerDbm ?? radio.txPowerDbm;
      for (let p = 0; p < this.points; p++) this.powerMw[p * nodes.length + i] = fromDb(dbm - lossTo(place[0], place[1], node.heightM, p));
    });
    this.interferenceMw = new Float64Array(this.points * interferers.length);
    interferers.forEach(({ xM, yM, heightM: z, powerDbm }, k) => {
      for (let p = 0; p < this.points; p++) this.interferenceMw[k * this.points + p] = fromDb(powerDbm - lossTo(xM, yM, z, p));
    });
  }

  /** Adds so many floods of the slot. */
  draw(floods: number): void {
    const { process, timing, slot } = this;
    const { everyRounds, firstRound, steps } = timing.slots[slot];
    const { period, slots } = timing.ns;
    const n = process.nodes.length;
    for (let flood = 0; flood < floods; flood++) {
      const past = (process.round - firstRound) % everyRounds;
      if (past !== 0) process.round += past < 0 ? -past : everyRounds - past;
      const { round } = process;
      process.next();
      const first = process.firstStep.subarray(slot * n, (slot + 1) * n);
      this.add(first, (round - firstRound) / everyRounds, round * period + slots[slot].floodStart, slots[slot].step, steps);
    }
  }

  private add(first: Uint8Array, occurrence: number, start: number, stepNs: number, steps: number): void {
    const { points, powerMw, curve, channels, shares, activities, interferenceMw, noiseMw } = this;
    const { round: relay, radio } = this.scenario;
    const n = first.length;
    const missed = new Float64Array(points).fill(1);
    const senders: number[] = [];
    const sending = new Float64Array(activities.length);
    const offset = hopOffset(this.timing.slots[this.slot].id);
    for (let step = 1; step <= steps; step++) {
      senders.length = 0;
      for (let i = 0; i < n; i++) if (received(first[i]) && sendsIn(relay, first[i], step)) senders.push(i);
      const hop = hopPlace(radio.channels.hopping, channels.length, occurrence, offset, step);
      const begin = start + (step - 1) * stepNs;
      let inBand = false;
      for (let k = 0; k < activities.length; k++) {
        const inChannel = shares[k * channels.length + hop];
        if (inChannel > 0) inBand = true;
        sending[k] = inChannel > 0 && activities[k].sendsIn(begin, begin + stepNs) ? 1 : 0;
      }
      if (inBand && senders.length > 0) this.disturbedSteps++;
      const arrived = this.arrived[step - 1];
      for (let p = 0; p < points; p++) {
        if (senders.length > 0 && (inBand || missed[p] > DONE)) {
          let sum = 0;
          let strongest = 0;
          for (let s = 0; s < senders.length; s++) {
            const power = powerMw[p * n + senders[s]];
            sum += power;
            if (power > strongest) strongest = power;
          }
          const signal = combinedPower(sum, strongest, this.captureRatio, this.penaltyRatio);
          let ratio = curve(signal / noiseMw);
          if (inBand && ratio > 0) {
            let now = noiseMw;
            let worst = noiseMw;
            for (let k = 0; k < activities.length; k++) {
              const level = interferenceMw[k * points + p] * shares[k * channels.length + hop];
              worst += level;
              if (sending[k] === 1) now += level;
            }
            const least = curve(signal / worst);
            this.clean[p] += ratio;
            this.disturbed[p] += least;
            if (now > noiseMw) ratio = now === worst ? least : curve(signal / now);
          }
          missed[p] *= 1 - ratio;
        }
        arrived[p] += 1 - missed[p];
      }
    }
  }

  fouled(): Isoline | null {
    if (!this.shares.some((share) => share > 0)) return null;
    // Positive where more than half is lost of what would arrive.
    const excess = Float64Array.from(this.clean, (clean, p) => (clean >= LEAST * this.disturbedSteps ? 0.5 - this.disturbed[p] / clean : -0.5));
    return isolines(this.grid, excess, 0);
  }
}
