/** Every link of a floor in numbers, on average: for the page's table, hop counts and advice. */
import { fromDb, toDb } from "#shared/math/decibel.ts";
import { ln, sincos } from "#shared/math/elementary.ts";
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
const MOST_INTERFERERS = 8;

/**
 * All ordered pairs, sender by sender in the floor's order, at an instant, for packets with so many bytes of payload (the
 * header comes on top). Empty without a floor.
 */
export function meanLinks(scenario: Scenario, atS: number, payloadBytes: number): LinkRow[] {
  const { floor, radio } = scenario;
  if (!floor) return [];
  const { nodes, links } = floor;
  const rows: LinkRow[] = [];
  if (links.type === "matrix") {
    const { prr } = links;
    forPairs(floor, atS, (from, to, geometry) => rows.push({ ...geometry, budget: null, prr: prr[from][to] }));
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

/** Radii and angles of the scattered part of the fading over which reception is averaged, all equally likely. */
const RADII = 48;
const ANGLES = 12;
const LOWEST_DB = -50;
const HIGHEST_DB = 80;
const PER_DB = 8;

/** Equally likely power gains of Rician fading of unit mean power, from the middle of each cell of radius and angle. */
export function ricianGains(kDb: number): Float64Array {
  const k = fromDb(kDb);
  const direct = Math.sqrt(k / (k + 1));
  const angle = new Float64Array(2);
  const gains = new Float64Array(RADII * ANGLES);
  for (let r = 0; r < RADII; r++) {
    const scattered = Math.sqrt(-ln(1 - (r + 0.5) / RADII) / (k + 1));
    for (let a = 0; a < ANGLES; a++) {
      sincos((Math.PI * (a + 0.5)) / ANGLES, angle, 1, 0);
      const re = direct + scattered * angle[1];
      const im = scattered * angle[0];
      gains[r * ANGLES + a] = re * re + im * im;
    }
  }
  return gains;
}

/** Mean of a curve over the fading, at every 1/8 dB from -50 to 80 dB; the curve itself without fading. */
function fadedCurve(curve: ReceptionCurve, fading: LinkBudgetSettings["fading"]): ReceptionCurve {
  if (!fading) return curve;
  const gains = ricianGains(fading.kDb);
  const levels = (HIGHEST_DB - LOWEST_DB) * PER_DB + 1;
  const values = Float64Array.from({ length: levels }, (_, i) => {
    const mean = fromDb(LOWEST_DB + i / PER_DB);
    let sum = 0;
    for (const gain of gains) sum += curve(mean * gain);
    return sum / gains.length;
  });
  return (sinr) => {
    const place = Math.min(levels - 1, Math.max(0, (toDb(sinr) - LOWEST_DB) * PER_DB));
    const i = Math.min(levels - 2, Math.floor(place));
    return values[i] + (place - i) * (values[i + 1] - values[i]);
  };
}
