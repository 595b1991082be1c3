/**
 * Rician block fading with unit mean power. One complex Gauss-Markov process for every unordered pair of nodes and channel
 * goes on from round to round: h = sqrt(K/(K+1)) + z / sqrt(K+1), z' = rho z + sqrt(1 - rho^2) w, E|z|^2 = E|w|^2 = 1, with
 * rho = J0(2 pi f_d T) (Clarke, Bell Syst. Tech. J. 47, 1968) or exp(-T/Tc). Within a round the channel is taken in blocks of
 * one coherence time, 0.423/f_d (Rappaport, Wireless Communications, 2nd ed., 5.40c) or Tc: slots that begin in the same block meet
 * the same fading, blocks are independent. All numbers are pure functions of seed, pair, channel, block and round, so they do
 * not depend on who used the channel before.
 */
import { fromDb } from "#shared/math/decibel.ts";
import { besselj0, exp } from "#shared/math/elementary.ts";
import { keyedNormalPair, type RandomKey, randomKey } from "#shared/math/keyed-random.ts";
import type { LinkBudgetSettings } from "#shared/scenario/floor-schema.ts";
import { pairCode } from "./shadowing.ts";

export type FadingSettings = NonNullable<LinkBudgetSettings["fading"]>;

/** Below this, what is left of an old value no longer matters, and the process begins anew. */
const FORGOTTEN = 1e-10;

/** Doppler frequency in Hz at a speed: v f / c. */
export const dopplerHz = (speedMPerS: number, frequencyMHz: number): number => (speedMPerS * frequencyMHz * 1e6) / 299_792_458;

/** Correlation over a time at a Doppler frequency: J0(2 pi f_d t). */
export const clarke = (doppler: number, timeS: number): number => besselj0(2 * Math.PI * doppler * timeS);

/** Length of a block within the round, s; Infinity when nothing moves. */
export function blockS(settings: FadingSettings, frequencyMHz: number): number {
  if (settings.coherence.type === "time") return settings.coherence.coherenceS;
  const doppler = dopplerHz(settings.coherence.leastMPerS, frequencyMHz);
  return doppler > 0 ? 0.423 / doppler : Number.POSITIVE_INFINITY;
}

/** State of all pairs on one channel in one block of the round. */
interface Plane {
  key: RandomKey;
  channel: number;
  re: Float64Array;
  im: Float64Array;
  gain: Float64Array;
  /** Last round computed; -1: none yet. */
  round: Int32Array;
}

export class Fading {
  private readonly direct: number;
  private readonly scattered: number;
  private readonly planes = new Map<string, Plane>();
  private readonly words = new Int32Array(2);
  private readonly normals = new Float64Array(2);

  /**
   * @param ids node numbers; pairs are places in this list.
   * @param rho correlation of a pair of places from round k - 1 to round k.
   */
  constructor(
    settings: FadingSettings,
    private readonly seed: number,
    private readonly ids: readonly number[],
    private readonly rho: (a: number, b: number, round: number) => number,
  ) {
    const k = fromDb(settings.kDb);
    this.direct = Math.sqrt(k / (k + 1));
    // |w|^2 is the sum of two squared normals: half of each.
    this.scattered = Math.sqrt(0.5 / (k + 1));
  }

  plane(block: number, channel: number): Plane {
    const name = `${block}/${channel}`;
    let plane = this.planes.get(name);
    if (!plane) {
      const pairs = (this.ids.length * (this.ids.length - 1)) / 2;
      plane = {
        key: randomKey(this.seed, `fading/${block}`),
        channel,
        re: new Float64Array(pairs),
        im: new Float64Array(pairs),
        gain: new Float64Array(pairs),
        round: new Int32Array(pairs).fill(-1),
      };
      this.planes.set(name, plane);
    }
    return plane;
  }

  /** Power gain of the pair of places a and b in a round; rounds are asked for in ascending order. */
  gain(plane: Plane, a: number, b: number, round: number): number {
    const pair = a > b ? (a * (a - 1)) / 2 + b : (b * (b - 1)) / 2 + a;
    if (plane.round[pair] !== round) this.advance(plane, pair, a, b, round);
    return plane.gain[pair];
  }

  private advance(plane: Plane, pair: number, a: number, b: number, round: number): void {
    const counter = plane.channel * 1048576 + pairCode(this.ids[a], this.ids[b]);
    let last = plane.round[pair];
    let { re, im } = { re: plane.re[pair], im: plane.im[pair] };
    // Go back only as far as the process remembers.
    let from = round;
    let left = 1;
    while (from > last + 1) {
      left *= this.rho(a, b, from);
      if (left < FORGOTTEN && left > -FORGOTTEN) {
        last = -1;
        break;
      }
      from--;
    }
    for (let k = from; k <= round; k++) {
      keyedNormalPair(plane.key, k, counter, this.words, this.normals);
      const rho = last < 0 ? 0 : this.rho(a, b, k);
      const fresh = this.scattered * Math.sqrt(1 - rho * rho);
      re = rho * re + fresh * this.normals[0];
      im = rho * im + fresh * this.normals[1];
      last = k;
    }
    plane.round[pair] = round;
    plane.re[pair] = re;
    plane.im[pair] = im;
    plane.gain[pair] = (this.direct + re) * (this.direct + re) + im * im;
  }
}

/** Correlation from one round to the next, by the settings; speed is the faster of the two nodes', m/s. */
export function roundCorrelation(settings: FadingSettings, frequencyMHz: number, periodS: number): (speedMPerS: number) => number {
  const { coherence } = settings;
  if (coherence.type === "time") {
    const rho = exp(-periodS / coherence.coherenceS);
    return () => rho;
  }
  return (speed) => clarke(dopplerHz(Math.max(speed, coherence.leastMPerS), frequencyMHz), periodS);
}
