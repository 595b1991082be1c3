/**
 * Shadowing: normal in dB, one value for every unordered pair of nodes, correlated along the way as exp(-d / D)
 * (Gudmundson, Electronics Letters 27(23), 1991). A pure function of seed, pair and way, so that neither other nodes nor the
 * instants at which it is asked for change it.
 */
import { exp } from "#shared/math/elementary.ts";
import { keyedNormalPair, type RandomKey, randomKey } from "#shared/math/keyed-random.ts";
import type { LinkBudgetSettings } from "#shared/scenario/floor-schema.ts";

/** Points per correlation distance; between them the value is interpolated. */
const POINTS = 8;
/** Terms of the moving average that makes one point: what is left out is exp(-6) of the memory. */
const TERMS = 6 * POINTS;

/** Node numbers are below 1024 (floor-schema). */
export const pairCode = (a: number, b: number): number => (a < b ? a * 1024 + b : b * 1024 + a);

/** Values at a point of the way and at the next. */
export interface ShadowPoints {
  point: number;
  here: number;
  next: number;
}

export class Shadowing {
  private readonly key: RandomKey;
  private readonly rho = exp(-1 / POINTS);
  private readonly scale: number;
  private readonly spacingM: number;
  private readonly words = new Int32Array(2);
  private readonly normals = new Float64Array(2);

  constructor(settings: LinkBudgetSettings["shadowing"]) {
    this.key = randomKey(settings.seed, "shadowing");
    this.spacingM = settings.correlationM / POINTS;
    let power = 0;
    let weight = 1;
    for (let i = 0; i < TERMS; i++) {
      power += weight * weight;
      weight *= this.rho;
    }
    this.scale = settings.sigmaDb / Math.sqrt(power);
  }

  /**
   * Loss in dB, positive or negative, of the pair of node numbers whose nodes have moved `coveredM` together since t = 0.
   * `last` keeps the two points around it for the next call: at first { point: NaN, here: 0, next: 0 }.
   */
  lossDb(a: number, b: number, coveredM: number, last: ShadowPoints): number {
    if (this.scale === 0) return 0;
    const pair = pairCode(a, b);
    const place = coveredM / this.spacingM;
    const point = Math.floor(place);
    const part = place - point;
    if (last.point !== point) {
      last.here = this.point(pair, point);
      last.next = Number.NaN;
      last.point = point;
    }
    // A node at rest needs no second point.
    if (part === 0) return last.here;
    if (Number.isNaN(last.next)) last.next = this.point(pair, point + 1);
    // Between two points of correlation rho a straight line would lose variance: divide by what is left of it.
    const rest = 1 - part;
    return (rest * last.here + part * last.next) / Math.sqrt(rest * rest + part * part + 2 * rest * part * this.rho);
  }

  private point(pair: number, index: number): number {
    let sum = 0;
    let weight = 1;
    let drawn = Number.NaN;
    for (let i = index; i > index - TERMS; i--) {
      if (i >> 1 !== drawn) {
        drawn = i >> 1;
        keyedNormalPair(this.key, drawn, pair, this.words, this.normals);
      }
      sum += weight * this.normals[i & 1];
      weight *= this.rho;
    }
    return this.scale * sum;
  }
}
