/** Nodes out of service (model 2): a radio that is off neither sends, relays nor hears. */
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RoundTiming, Slot } from "./round.ts";
import { toNs } from "./schedule.ts";

const NEVER = Number.POSITIVE_INFINITY;

/** Of a slot, ns from the start of its round. */
interface Span {
  start: number;
  end: number;
}

export class Outages {
  readonly #spans: Map<number, { from: number; until: number }[]>;
  /** The slot whose loss silences everybody, and its sender; null: no beacon is needed. */
  readonly #beacon: { host: number; start: number; end: number } | null;
  readonly #period: number;

  constructor(scenario: Scenario, timing: RoundTiming) {
    this.#period = timing.ns.period;
    this.#spans = new Map();
    for (const { id, outages } of scenario.floor?.nodes ?? []) {
      const spans = outages.map(({ fromS, untilS }) => ({ from: toNs(fromS), until: untilS === null ? NEVER : toNs(untilS) }));
      if (spans.length > 0) this.#spans.set(id, spans);
    }
    const index = timing.slots.findIndex(({ message }) => message === "beacon");
    const host = index < 0 ? null : timing.slots[index].from;
    this.#beacon = scenario.round.beacon?.needed && host !== null ? { host, ...timing.ns.slots[index] } : null;
  }

  /** Is the node down at any instant of [fromNs, untilNs)? An instant alone: fromNs = untilNs. */
  down(node: number | null | undefined, fromNs: number, untilNs: number): boolean {
    const spans = this.#spans.get(node ?? -1);
    if (!spans) return false;
    return spans.some(({ from, until }) => from < until && until > fromNs && (from < untilNs || from === fromNs));
  }

  /** For processes that know no floods: are sender and receivers of the slot in service in round k, and were they and its host for the beacon when that is needed? */
  travels(slot: Slot, ns: Span, k: number): boolean {
    if (this.#spans.size === 0) return true;
    const begin = k * this.#period;
    if (this.#beacon && this.#off(this.#beacon.host, begin, this.#beacon)) return false;
    if (this.#silent(slot.from, begin, ns)) return false;
    return !slot.to?.some((node) => this.#silent(node, begin, ns));
  }

  #silent(node: number | null, begin: number, ns: Span): boolean {
    return this.#off(node, begin, ns) || (this.#beacon !== null && this.#off(node, begin, this.#beacon));
  }

  #off(node: number | null, begin: number, { start, end }: Span): boolean {
    return this.down(node, begin + start, begin + end);
  }
}
