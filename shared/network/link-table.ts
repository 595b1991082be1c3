/** Every link of a floor in numbers, on average: for the page's table, hop counts and advice. */
import { fromDb, toDb } from "#shared/math/decibel.ts";
import { exp } from "#shared/math/elementary.ts";
import type { Floor, LinkBudgetSettings } from "#shared/scenario/floor-schema.ts";
import type { Radio } from "#shared/scenario/round-schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { channelsInUse } from "./channels.ts";
import { crosses, distance, placeAt, wayOf } from "./geometry.ts";
import { overlapProbability } from "./interference.ts";
import { interferenceShares, LinkBudget } from "./link-budget.ts";
import { phyTiming } from "./phy.ts";
import { type ReceptionCurve, ReceptionCurves } from "./reception.ts";

export interface LinkRow {
  /** Node numbers of sender and receiver. */
  from: number;
  to: number;
  /** Three-dimensional, m. */
  distanceM: number;
  /** Obstacles that the line crosses. */
  obstacles: number;
  /** Null where links are given as reception ratios. */
  budget: {
    pathLossDb: number;
    obstaclesDb: number;
    shadowingDb: number;
    /** Mean over fading. */
    signalDbm: number;
    snrDb: number;
    /** Signal over noise and the mean power of interferers, in time and over the channels in use. */
    sinrDb: number;
  } | null;
  /** Packet reception ratio: mean over fading, over interferers on and off, and over the channels in use. */
  prr: number;
}

/** Interferers that are followed on and off one by one; weaker ones count with their mean power. */
const MOST_INTERFERERS = 6;

/**
 * All ordered pairs, sender by sender in the floor's order, at an instant, for packets with so many bytes of payload (the
 * header comes on top). Empty without a floor; also for a floor that has not passed its checks.
 */
export function meanLinks(scenario: Scenario, atS: number, payloadBytes: number): LinkRow[] {
  const { floor, radio } = scenario;
  if (!floor) return [];
  const { nodes, links } = floor;
  const rows: LinkRow[] = [];
  if (links.type === "matrix") {
    const { prr } = links;
    forPairs(floor, atS, (from, to, geometry) => rows.push({ ...geometry, budget: null, prr: prr[from]?.[to] ?? 0 }));
    return rows;
  }
  const budget = new LinkBudget(floor, links, radio, nodes, atS);
  const curve = fadedCurve(new ReceptionCurves(radio.phy, radio.reception).of(radio.headerBytes + payloadBytes), links.fading);
  const noises = nodes.map((_, node) => noiseStates(floor, radio, budget, node, atS, payloadBytes));
  const noiseDb = toDb(budget.noiseMw);
  forPairs(floor, atS, (from, to, geometry) => {
    const power = budget.powerMw[to * nodes.length + from];
    const { states, meanMw } = noises[to];
    const signalDbm = toDb(power);
    let prr = 0;
    for (const { noiseMw, share } of states) prr += share * curve(power / noiseMw);
    rows.push({
      ...geometry,
      budget: {
        pathLossDb: budget.pathLossDb(from, to),
        obstaclesDb: budget.obstaclesDb(from, to),
        shadowingDb: budget.shadowingDb(from, to),
        signalDbm,
        snrDb: signalDbm - noiseDb,
        sinrDb: signalDbm - toDb(meanMw),
      },
      prr: Math.min(1, prr),
    });
  });
  return rows;
}

type Geometry = Pick<LinkRow, "from" | "to" | "distanceM" | "obstacles">;

function forPairs(floor: Floor, atS: number, visit: (from: number, to: number, geometry: Geometry) => void): void {
  const places = floor.nodes.map((node) => {
    const place = new Float64Array(3);
    placeAt(wayOf(node), atS, place);
    return { id: node.id, x: place[0], y: place[1], z: node.heightM };
  });
  places.forEach((a, from) => {
    places.forEach((b, to) => {
      if (from === to) return;
      const obstacles = floor.obstacles.filter((obstacle) => crosses(obstacle, a.x, a.y, b.x, b.y)).length;
      visit(from, to, { from: a.id, to: b.id, distanceM: distance(a.x - b.x, a.y - b.y, a.z - b.z), obstacles });
    });
  });
}

interface NoiseState {
  /** Noise and interference together, mW. */
  noiseMw: number;
  /** Probability of this state of interferers and channel. */
  share: number;
}

/** What a node hears beside the signal: every combination of channel and interferers on or off during a step, with its probability. */
function noiseStates(
  floor: Floor,
  radio: Radio,
  budget: LinkBudget,
  node: number,
  atS: number,
  payloadBytes: number,
): { states: NoiseState[]; meanMw: number } {
  const list = channelsInUse(radio);
  const channels = radio.channels.hopping === "none" ? list.slice(0, 1) : list;
  const shares = interferenceShares(floor, radio, channels);
  const timing = phyTiming(radio.phy);
  const stepS = timing.airtimeNs(radio.headerBytes + payloadBytes) / 1e9 + (radio.turnaroundS ?? timing.turnaroundNs / 1e9);
  const states = new Map<number, number>();
  let meanMw = 0;
  channels.forEach((_, channel) => {
    const heard = floor.interferers.flatMap(({ activity, fromS, untilS }, k) => {
      const present = atS >= fromS && (untilS === null || atS < untilS);
      const powerMw = budget.interferenceMw[k * floor.nodes.length + node] * shares[k * channels.length + channel];
      return present && powerMw > 0 ? [{ powerMw, probability: overlapProbability(activity, stepS) }] : [];
    });
    heard.sort((a, b) => b.powerMw - a.powerMw);
    const mean = (some: typeof heard) => some.reduce((sum, { powerMw, probability }) => sum + probability * powerMw, 0);
    meanMw += (budget.noiseMw + mean(heard)) / channels.length;
    let combined: NoiseState[] = [{ noiseMw: budget.noiseMw + mean(heard.slice(MOST_INTERFERERS)), share: 1 / channels.length }];
    for (const { powerMw, probability } of heard.slice(0, MOST_INTERFERERS)) {
      combined = combined.flatMap(({ noiseMw, share }) => [
        { noiseMw, share: share * (1 - probability) },
        { noiseMw: noiseMw + powerMw, share: share * probability },
      ]);
    }
    for (const { noiseMw, share } of combined) if (share > 0) states.set(noiseMw, (states.get(noiseMw) ?? 0) + share);
  });
  return { states: Array.from(states, ([noiseMw, share]) => ({ noiseMw, share })), meanMw };
}

/** Grid of levels and of fading, dB. */
const PER_DB = 8;
const LOWEST_DB = -50;
const HIGHEST_DB = 80;
const DEEPEST_FADE_DB = -70;
const HIGHEST_FADE_DB = 14;

/** exp(-x) I0(x), x >= 0, to 2e-7 (Abramowitz and Stegun, 9.8.1 and 9.8.2). */
function scaledBesselI0(x: number): number {
  if (x < 3.75) {
    const t = (x / 3.75) * (x / 3.75);
    const i0 = 1 + t * (3.5156229 + t * (3.0899424 + t * (1.2067492 + t * (0.2659732 + t * (0.0360768 + t * 0.0045813)))));
    return i0 * exp(-x);
  }
  const t = 3.75 / x;
  const tail = 0.00916281 + t * (-0.02057706 + t * (0.02635537 + t * (-0.01647633 + t * 0.00392377)));
  return (0.39894228 + t * (0.01328592 + t * (0.00225319 + t * (-0.00157565 + t * tail)))) / Math.sqrt(x);
}

/**
 * Probabilities of power gains of Rician fading with unit mean power at every 1/8 dB from -70 to 14 dB, by its density
 * (1+K) exp(-K - (1+K) g) I0(2 sqrt(K (1+K) g)) (Simon and Alouini, Digital Communication over Fading Channels, 2.16).
 */
export function ricianWeights(kDb: number): Float64Array {
  const k = fromDb(kDb);
  const weights = Float64Array.from({ length: (HIGHEST_FADE_DB - DEEPEST_FADE_DB) * PER_DB + 1 }, (_, i) => {
    const g = fromDb(DEEPEST_FADE_DB + i / PER_DB);
    const apart = Math.sqrt(k) - Math.sqrt((1 + k) * g);
    return g * exp(-apart * apart) * scaledBesselI0(2 * Math.sqrt(k * (1 + k) * g));
  });
  let sum = 0;
  for (const weight of weights) sum += weight;
  return weights.map((weight) => weight / sum);
}

/** Mean of a curve over the fading, at every 1/8 dB from -50 to 80 dB; the curve itself without fading. */
function fadedCurve(curve: ReceptionCurve, fading: LinkBudgetSettings["fading"]): ReceptionCurve {
  if (!fading) return curve;
  const weights = ricianWeights(fading.kDb);
  const levels = (HIGHEST_DB - LOWEST_DB) * PER_DB + 1;
  const plain = Float64Array.from({ length: levels + weights.length - 1 }, (_, i) => curve(fromDb(LOWEST_DB + DEEPEST_FADE_DB + i / PER_DB)));
  const values = Float64Array.from({ length: levels }, (_, i) => {
    let mean = 0;
    for (let j = 0; j < weights.length; j++) mean += weights[j] * plain[i + j];
    return mean;
  });
  return (sinr) => {
    const place = Math.min(levels - 1, Math.max(0, (toDb(sinr) - LOWEST_DB) * PER_DB));
    const i = Math.min(levels - 2, Math.floor(place));
    return values[i] + (place - i) * (values[i + 1] - values[i]);
  };
}
