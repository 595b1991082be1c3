/**
 * The wave of one flood (model 2; timing as in Ferrari et al., IPSN 2011, and Jacob et al., DATE 2018). Steps count from 1. The
 * source sends in step 1. After its first reception in step s a node sends in steps s+1, s+3, ... (alternating) or s+1, s+2, ...
 * (back-to-back), whatever it hears in between, N times in all, the source as if s = 0. No step begins after the slot's last.
 */
import { keyedUniform, type RandomKey } from "#shared/math/keyed-random.ts";
import type { RoundSettings } from "#shared/scenario/round-schema.ts";

/** Instead of a step of first reception (0: the source): listened in vain. */
export const NOT_RECEIVED = 255;
/** The radio was off (down, or silent after a missed beacon), or the source did not send. */
export const RADIO_OFF = 254;
/** The slot does not occur in this round. */
export const NO_SLOT = 253;
const LAST_STEP = 252;

export const received = (first: number): boolean => first <= LAST_STEP;

/** How nodes pass a flood on. */
export type Relay = Pick<RoundSettings, "relay" | "transmissions">;

/** Does a node of this first reception send in this step? */
export function sendsIn({ relay, transmissions }: Relay, first: number, step: number): boolean {
  const later = step - first - 1;
  if (!received(first) || later < 0) return false;
  return relay === "alternating" ? later % 2 === 0 && later < 2 * transmissions : later < transmissions;
}

/** Step of the n-th transmission. */
const stepOfTransmission = ({ relay }: Relay, first: number, n: number): number => (relay === "alternating" ? first + 2 * n - 1 : first + n);

/** How often a node of this first reception sends until the slot's last step. */
export function transmissionsOf(relay: Relay, first: number, steps: number): number {
  if (!received(first) || first >= steps) return 0;
  const possible = relay.relay === "alternating" ? Math.floor((steps - first + 1) / 2) : steps - first;
  return Math.min(relay.transmissions, possible);
}

/** The same unit for all: ns, s or whatever. */
export interface SlotTimes {
  wakeUp: number;
  airtime: number;
  step: number;
  steps: number;
}

/** Radio-on time of a node whose radio is on: sleeping begins with the end of its N-th transmission, or with the slot's end. Wake-up counts as listening. */
export function radioOnTime(relay: Relay, first: number, { wakeUp, airtime, step, steps }: SlotTimes): { send: number; listen: number } {
  const sent = transmissionsOf(relay, first, steps);
  const send = sent * airtime;
  const awake = sent === relay.transmissions ? (stepOfTransmission(relay, first, sent) - 1) * step + airtime : steps * step;
  return { send, listen: wakeUp + awake - send };
}

/** What the wave needs to know of links. Nodes are places 0..n-1. */
export interface WaveLinks {
  /** A slot's flood begins; `start` in ns from the start of the run. */
  beginSlot(round: number, slot: number, start: number): void;
  /** The step lasts over [start, end), ns. */
  beginStep(step: number, start: number, end: number): void;
  /** Probability that a listening node receives when the first `count` of `senders` send at once. */
  reception(node: number, senders: Int32Array, count: number): number;
}

export class FloodWave {
  private readonly senders: Int32Array;
  private readonly waiting: Int32Array;
  private readonly words = new Int32Array(2);

  /** @param ids node numbers by place: they name the random numbers, so that neither order nor other nodes matter. */
  constructor(
    private readonly ids: Int32Array,
    private readonly relay: Relay,
  ) {
    this.senders = new Int32Array(ids.length);
    this.waiting = new Int32Array(ids.length);
  }

  /**
   * Draws one flood into `first`: on entry RADIO_OFF for nodes that are off and anything else for the others, on return steps of
   * first reception. The uniform number of a node and step is a function of key, round, node and step alone and decides
   * `received iff u < reception`: better links only add receptions in the first step in which they matter.
   */
  draw(
    links: WaveLinks,
    source: number,
    key: RandomKey,
    round: number,
    slot: { start: number; step: number; steps: number },
    first: Uint8Array,
  ): void {
    const { ids, relay, senders, waiting, words } = this;
    const { steps } = slot;
    let left = 0;
    for (let i = 0; i < ids.length; i++) {
      if (i === source || first[i] === RADIO_OFF) continue;
      first[i] = NOT_RECEIVED;
      waiting[left++] = i;
    }
    first[source] = 0;
    let lastSend = stepOfTransmission(relay, 0, relay.transmissions);
    for (let step = 1; step <= steps && step <= lastSend && left > 0; step++) {
      let count = 0;
      for (let i = 0; i < ids.length; i++) if (sendsIn(relay, first[i], step)) senders[count++] = i;
      // With alternating relay and a gap in the wave nobody may send in this step, but later.
      if (count === 0) continue;
      const start = slot.start + (step - 1) * slot.step;
      links.beginStep(step, start, start + slot.step);
      let still = 0;
      for (let w = 0; w < left; w++) {
        const node = waiting[w];
        const probability = links.reception(node, senders, count);
        const here = probability > 0 && (probability >= 1 || keyedUniform(key, round, step * 1024 + ids[node], words) < probability);
        if (here) {
          first[node] = step;
          lastSend = Math.max(lastSend, stepOfTransmission(relay, step, relay.transmissions));
        } else waiting[still++] = node;
      }
      left = still;
    }
  }
}
