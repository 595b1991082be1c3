/**
 * Link budget: received mean power of every ordered pair of nodes and of every interferer, by transmit power - path loss -
 * obstacles - shadowing, at an instant. When the instant moves on, only what moved is computed again.
 */
import { fromDb } from "#shared/math/decibel.ts";
import { log10 } from "#shared/math/elementary.ts";
import type { Floor, FloorNode, LinkBudgetSettings } from "#shared/scenario/floor-schema.ts";
import type { Radio } from "#shared/scenario/round-schema.ts";
import { channelBand, receiverBandwidthMHz, shareInBand } from "./channels.ts";
import { distance, obstacleLossDb, placeAt, speedAt, type Way, wayOf } from "./geometry.ts";
import { pathLoss } from "./path-loss.ts";
import { Shadowing, type ShadowPoints } from "./shadowing.ts";

/** Path loss and Doppler are computed in the middle of the band; over its 80 MHz free space differs by 0.15 dB from that. */
export const MID_BAND_MHZ = 2440;

/** Thermal noise at 290 K in the receiver's bandwidth, with its noise figure, dBm: -174 + 10 log10 B_Hz + NF. */
export const noiseDbm = (bandwidthMHz: number, noiseFigureDb: number): number => -174 + 10 * log10(bandwidthMHz * 1e6) + noiseFigureDb;

export class LinkBudget {
  readonly noiseMw: number;
  /** nodes x nodes, row = receiver, column = sender: received mean power, mW. The diagonal is 0. */
  readonly powerMw: Float64Array;
  /** interferers x nodes: received mean power over the interferer's whole band, mW. */
  readonly interferenceMw: Float64Array;
  private readonly ways: Way[];
  private readonly transmitDbm: Float64Array;
  private readonly lossAt: (distanceM: number) => number;
  private readonly shadowing: Shadowing;
  private readonly x: Float64Array;
  private readonly y: Float64Array;
  private readonly covered: Float64Array;
  private readonly moving: number[] = [];
  private readonly moved: Uint8Array;
  private readonly shadowPoints: ShadowPoints[] = [];
  private readonly place = new Float64Array(3);

  /** `nodes`: in the order of rows and columns. */
  constructor(
    private readonly floor: Floor,
    settings: LinkBudgetSettings,
    radio: Radio,
    private readonly nodes: readonly FloorNode[],
    atS: number,
  ) {
    const n = nodes.length;
    this.noiseMw = fromDb(noiseDbm(receiverBandwidthMHz(radio.phy), settings.noiseFigureDb));
    this.powerMw = new Float64Array(n * n);
    this.interferenceMw = new Float64Array(floor.interferers.length * n);
    this.ways = nodes.map(wayOf);
    this.transmitDbm = Float64Array.from(nodes, (node) => node.txPowerDbm ?? radio.txPowerDbm);
    this.lossAt = pathLoss(settings.pathLoss, MID_BAND_MHZ);
    this.shadowing = new Shadowing(settings.shadowing);
    this.x = new Float64Array(n).fill(Number.NaN);
    this.y = new Float64Array(n).fill(Number.NaN);
    this.covered = new Float64Array(n);
    this.moved = new Uint8Array(n);
    for (let pair = (n * (n - 1)) / 2; pair > 0; pair--) this.shadowPoints.push({ point: Number.NaN, here: 0, next: 0 });
    this.ways.forEach((way, i) => {
      if (way.moves) this.moving.push(i);
    });
    this.compute(atS, true);
  }

  /** Brings powers to an instant. */
  moveTo(atS: number): void {
    if (this.moving.length > 0) this.compute(atS, false);
  }

  /** Speed of a node, m/s. */
  speed(node: number, atS: number): number {
    return speedAt(this.ways[node], atS);
  }

  private compute(atS: number, all: boolean): void {
    const n = this.nodes.length;
    let any = false;
    for (let i = 0; i < n; i++) {
      this.moved[i] = 0;
      if (!all && !this.ways[i].moves) continue;
      placeAt(this.ways[i], atS, this.place);
      if (this.place[0] === this.x[i] && this.place[1] === this.y[i]) continue;
      this.x[i] = this.place[0];
      this.y[i] = this.place[1];
      this.covered[i] = this.place[2];
      this.moved[i] = 1;
      any = true;
    }
    if (!any) return;
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < i; j++) if (this.moved[i] || this.moved[j]) this.computePair(i, j);
      if (this.moved[i]) this.computeInterference(i);
    }
  }

  private computePair(i: number, j: number): void {
    const n = this.nodes.length;
    const loss = this.pathLossDb(i, j) + this.obstaclesDb(i, j) + this.shadowingDb(i, j);
    this.powerMw[i * n + j] = fromDb(this.transmitDbm[j] - loss);
    this.powerMw[j * n + i] = fromDb(this.transmitDbm[i] - loss);
  }

  private computeInterference(i: number): void {
    const { interferers, obstacles } = this.floor;
    for (let k = 0; k < interferers.length; k++) {
      const { xM, yM, heightM, powerDbm } = interferers[k];
      const d = distance(this.x[i] - xM, this.y[i] - yM, this.nodes[i].heightM - heightM);
      const loss = this.lossAt(d) + obstacleLossDb(obstacles, xM, yM, this.x[i], this.y[i]);
      this.interferenceMw[k * this.nodes.length + i] = fromDb(powerDbm - loss);
    }
  }

  distanceM(i: number, j: number): number {
    return distance(this.x[i] - this.x[j], this.y[i] - this.y[j], this.nodes[i].heightM - this.nodes[j].heightM);
  }
  pathLossDb(i: number, j: number): number {
    return this.lossAt(this.distanceM(i, j));
  }
  obstaclesDb(i: number, j: number): number {
    return obstacleLossDb(this.floor.obstacles, this.x[i], this.y[i], this.x[j], this.y[j]);
  }
  shadowingDb(i: number, j: number): number {
    const last = this.shadowPoints[i > j ? (i * (i - 1)) / 2 + j : (j * (j - 1)) / 2 + i];
    return this.shadowing.lossDb(this.nodes[i].id, this.nodes[j].id, this.covered[i] + this.covered[j], last);
  }
}

/** interferers x channels: share of each interferer's power that falls into each channel of the list. */
export function interferenceShares(floor: Floor, radio: Radio, channels: readonly number[]): Float64Array {
  const bands = channels.map((channel) => channelBand(radio.phy, channel));
  return Float64Array.from(floor.interferers.flatMap((interferer) => bands.map((band) => shareInBand(interferer, band))));
}
