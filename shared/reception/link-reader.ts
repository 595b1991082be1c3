/**
 * One link's packets in the order of the file. Numbers that wrap, restart, come late, twice or not at all are told apart by
 * how they continue: a number that fits neither before nor soon after is held back until the next row of the link says
 * whether it was a stray or a new beginning. The time column, where there is one, decides between an outage and a restart.
 */
import { IntervalMeter } from "./interval-meter.ts";
import { type Fate, LOST, RECEIVED, ReceivedWindow, UNSEEN, WINDOW } from "./received-window.ts";
import { RssiMeter } from "./rssi-meter.ts";
import type { LinkTrace, TroubleKind } from "./types.ts";
import { counted, durationText } from "./words.ts";

export interface Packet {
  number: number;
  received: boolean;
  /** NaN: not known. */
  timeS: number;
  /** Hour of the day, -1: not known. */
  hour: number;
  /** NaN: not known. */
  rssiDbm: number;
  line: number;
  /** Number and time as they stand in the file. */
  text: string;
  timeText: string;
}

export type Report = (kind: TroubleKind, line: number, value: string, message: () => string) => void;

/** The counter that links share (kind "round") or have for themselves. */
export interface Counter {
  /** Numbers before it wraps; null: not known, or it never does. */
  wrapsAt: number | null;
  /** Said by the user, not found out. */
  fixed: boolean;
}

export interface LinkOptions {
  counter: Counter;
  /** false: no packet numbers, every row is the next packet. */
  numbered: boolean;
  intervalS: number | null;
  report: Report;
  /** Unwrapped number of the first packet, where other links of the same counter say so. */
  begin?: (number: number) => number;
}

/** A step forward up to here needs no second row. */
const SURE = 64;
/** A row that comes late by more than this, for a number that is already there, may be a restart. */
const RECENT = 8;
/** A restarted counter is first heard of at one of these numbers, unless its first packets were lost. */
const NEAR_ZERO = 16;
/** Missing numbers in a row that are reported as a gap, beside being counted as lost. */
export const GAP_PACKETS = 50;
/** More than this is a restart with another number, not a loss, when no time says otherwise. */
const MOST_LOST = 1_000_000;
/** Counters of 8, 16 and 32 bits, and how near to its ends a wrap is recognised. */
const COUNTERS = [
  { wrapsAt: 256, near: 32 },
  { wrapsAt: 65_536, near: 64 },
  { wrapsAt: 4_294_967_296, near: 64 },
] as const;
/** The clock jumped when it is off by so many intervals. */
const JUMP_BACK = 2;
const JUMP_AHEAD = 20;

export class LinkReader {
  private window = new ReceivedWindow();
  private interval = new IntervalMeter();
  private rssi = new RssiMeter();
  private hours: { packets: number; lost: number }[] | null = null;
  private held: (Packet & { step: number }) | null = null;
  private firstNumber = 0;
  /** Unwrapped, so that it only grows; also after a restart. */
  private last = 0;
  private lastRaw = -1;
  private largestRaw = 0;
  private timeS = Number.NaN;
  /** Number of the packet that timeS belongs to. */
  private timedAt = 0;
  private firstTimeS = Number.NaN;
  private started = false;
  /** Set by the first restart: numbers of other links no longer compare. */
  restarted = false;

  constructor(
    readonly source: string,
    readonly receiver: string,
    private options: LinkOptions,
  ) {}

  get lastNumber(): number {
    return this.last;
  }

  take(packet: Packet): void {
    if (this.held) this.settle(this.held, packet);
    this.place(packet);
  }

  // ------------------------------------------------------------ where a packet belongs

  private place(packet: Packet): void {
    if (!this.started) {
      this.started = true;
      this.last = this.options.begin?.(packet.number) ?? packet.number;
      this.firstNumber = this.last;
      this.begin(packet);
      return;
    }
    const step = this.options.numbered ? this.throughWraps(packet, this.step(packet.number)) : 1;
    if (step <= 0) {
      const back = -step;
      if (back > this.late || (back > RECENT && (this.window.isBefore(back) || this.window.fate(back) !== UNSEEN))) this.hold(packet, step);
      else this.comesLate(packet, back);
      return;
    }
    if (step <= SURE || this.timeAgrees(packet, step)) this.forward(packet, step);
    else this.hold(packet, step);
  }

  /** A row may come so many numbers late. */
  private get late(): number {
    const { wrapsAt } = this.options.counter;
    return wrapsAt ? Math.min(WINDOW - 1, Math.floor(wrapsAt / 4)) : WINDOW - 1;
  }

  /** From the last number to this one: forward above 0, late below. */
  private step(raw: number): number {
    const { counter } = this.options;
    if (counter.wrapsAt && raw >= counter.wrapsAt && !counter.fixed) counter.wrapsAt = null;
    if (!counter.wrapsAt) {
      const found = COUNTERS.find(({ wrapsAt, near }) => raw < near && this.lastRaw >= wrapsAt - near && this.largestRaw < wrapsAt);
      if (!found) return raw - this.lastRaw;
      counter.wrapsAt = found.wrapsAt;
    }
    const { wrapsAt } = counter;
    const ahead = (((raw - this.lastRaw) % wrapsAt) + wrapsAt) % wrapsAt;
    return ahead > 0 && wrapsAt - ahead <= this.late ? ahead - wrapsAt : ahead;
  }

  private hold(packet: Packet, step: number): void {
    this.held = { ...packet, step };
  }

  /** The next row of the link decides what the held one was. */
  private settle(held: Packet & { step: number }, next: Packet): void {
    this.held = null;
    const after = this.between(held.number, next.number);
    const fromLast = this.step(next.number);
    const back = -held.step;
    if (back >= 0 && back <= this.late) {
      const elapsed = held.timeS - this.timeS;
      const later = Number.isNaN(elapsed) ? held.number <= NEAR_ZERO : elapsed > 0;
      if (later && after > 0 && after <= RECENT) this.restart(held);
      else if (this.window.isBefore(back) && !(elapsed < 0)) this.stray(held, next);
      else this.comesLate(held, back);
      return;
    }
    const follows = after === 1 || !(fromLast >= -this.late && fromLast <= SURE);
    const goesOn = Math.abs(after) <= SURE || (held.step > 0 && fromLast > held.step);
    if (follows && goesOn) this.leap(held);
    else this.stray(held, next);
  }

  private between(from: number, to: number): number {
    const { wrapsAt } = this.options.counter;
    const difference = to - from;
    if (!wrapsAt) return difference;
    const ahead = ((difference % wrapsAt) + wrapsAt) % wrapsAt;
    return ahead > wrapsAt / 2 ? ahead - wrapsAt : ahead;
  }

  /** A confirmed jump: an outage, or a restart? */
  private leap(held: Packet & { step: number }): void {
    const expected = this.stepsByTime(held);
    const outage = held.step > 0 && (Number.isNaN(expected) ? !this.looksLikeRestart(held) : expected < 0 || expected >= held.step / 2);
    if (outage) this.forward(held, held.step);
    else this.restart(held);
  }

  /** Without a time: counters begin anew near 0, and hardly ever are so many packets lost in a row. */
  private looksLikeRestart(held: { number: number; step: number }): boolean {
    const { wrapsAt } = this.options.counter;
    if (held.step > MOST_LOST) return true;
    if (!wrapsAt) return false;
    const wrapped = held.number < this.lastRaw;
    return held.step > wrapsAt / 2 || (wrapped && (held.number <= NEAR_ZERO || held.step > wrapsAt / 4));
  }

  // ------------------------------------------------------------ what the clock says

  /** How many packets from the last one, by the clock; NaN: not known. */
  private stepsByTime(packet: Packet): number {
    const interval = this.options.intervalS ?? this.interval.known;
    return interval ? (packet.timeS - this.timeS) / interval - (this.last - this.timedAt) : Number.NaN;
  }

  private timeAgrees(packet: Packet, step: number): boolean {
    return Math.abs(this.stepsByTime(packet) - step) <= Math.max(3, 0.2 * step);
  }

  /** An outage may be longer than the counter's whole range. A step of 1 or 2 says that nothing is missing: then the clock jumped. */
  private throughWraps(packet: Packet, step: number): number {
    const { wrapsAt } = this.options.counter;
    if (!wrapsAt || step === 1 || step === 2) return step;
    const expected = this.stepsByTime(packet);
    if (!(expected > step + wrapsAt / 2 && expected <= MOST_LOST)) return step;
    return step + wrapsAt * Math.round((expected - step) / wrapsAt);
  }

  private checkClock(packet: Packet, step: number): void {
    const elapsed = packet.timeS - this.timeS;
    if (Number.isNaN(elapsed)) return;
    const span = this.last + step - this.timedAt;
    const interval = this.options.intervalS ?? this.interval.known;
    if (interval) {
      const off = elapsed - span * interval;
      const where = span === 1 ? "from one packet to the next" : `over ${span} packets`;
      if (elapsed < 0 && off < -JUMP_BACK * interval) {
        this.trouble("clock-jump", packet, packet.timeText, () => `The clock goes back by ${durationText(-elapsed)} ${where}; the numbers go on.`);
        return;
      }
      if (off > JUMP_AHEAD * interval + 0.5 * span * interval) {
        if (this.options.numbered) {
          this.trouble("clock-jump", packet, packet.timeText, () => {
            return `The clock goes ahead by ${durationText(elapsed)} ${where}, where ${durationText(span * interval)} is usual: it was set, or the sender paused.`;
          });
        } else {
          this.trouble("gap", packet, packet.timeText, () => {
            return `No row for ${durationText(elapsed)}, where one comes each ${durationText(interval)}; without packet numbers it is not known what was lost.`;
          });
        }
        return;
      }
    }
    if (span <= 16) this.interval.add(elapsed / span);
  }

  // ------------------------------------------------------------ taking it in

  private forward(packet: Packet, step: number): void {
    const { options } = this;
    if (packet.number < this.lastRaw && options.numbered) {
      this.trouble(
        "wrapped",
        packet,
        packet.text,
        () => `The number wraps from ${this.lastRaw} to ${packet.number}; read on as ${this.last + step}.`,
      );
    }
    const missing = step - 1;
    if (missing >= GAP_PACKETS) {
      const elapsed = packet.timeS - this.timeS;
      this.trouble("gap", packet, packet.text, () => {
        const over = elapsed > 0 ? `, ${durationText(elapsed)} long` : "";
        return `${counted(missing, "number is", "numbers are")} missing between ${this.lastRaw} and ${packet.number}${over}; they count as lost.`;
      });
    }
    if (missing > 0) this.countMissing(packet, missing);
    this.checkClock(packet, step);
    this.window.advance(step, fate(packet));
    this.last += step;
    this.moveTo(packet);
  }

  private begin(packet: Packet): void {
    this.window.advance(1, fate(packet));
    this.moveTo(packet);
  }

  private moveTo(packet: Packet): void {
    this.lastRaw = packet.number;
    this.largestRaw = Math.max(this.largestRaw, packet.number);
    if (!Number.isNaN(packet.timeS)) {
      this.timeS = packet.timeS;
      this.timedAt = this.last;
      if (Number.isNaN(this.firstTimeS)) this.firstTimeS = packet.timeS;
    }
    this.countOne(packet);
  }

  private restart(packet: Packet): void {
    const before = this.lastRaw;
    const elapsed = packet.timeS - this.timeS;
    this.trouble("reset", packet, packet.text, () => {
      const after = elapsed > 0 ? ` after ${durationText(elapsed)}` : "";
      return `The number goes from ${before} to ${packet.number}${after} and counts on from there: a restart. What was sent between is not known and not counted.`;
    });
    this.restarted = true;
    this.window.flush();
    this.last++;
    this.begin(packet);
  }

  private comesLate(packet: Packet, back: number): void {
    const { window } = this;
    const before = window.fate(back);
    if (before === UNSEEN) {
      if (window.isBefore(back) && !this.restarted) this.firstNumber = this.last - back;
      window.set(back, fate(packet));
      this.trouble("out-of-order", packet, packet.text, () => `Number ${packet.number} comes after ${this.lastRaw}; put in its place.`);
      if (packet.received && this.hours && packet.hour >= 0) this.hours[packet.hour].lost--;
      if (packet.received && !Number.isNaN(packet.rssiDbm)) this.rssi.add(packet.rssiDbm);
      return;
    }
    const better = before === LOST && packet.received;
    if (better) window.set(back, RECEIVED);
    this.trouble("duplicate", packet, packet.text, () =>
      better
        ? `Number ${packet.number} is there twice, first as lost, then as received; it counts as received.`
        : `Number ${packet.number} is there already; this row does not count.`,
    );
  }

  private stray(held: Packet, next: Packet): void {
    this.trouble("bad-row", held, held.text, () => {
      return `Number ${held.number} fits neither ${this.lastRaw} before it nor ${next.number} after it; the row is left out.`;
    });
  }

  private trouble(kind: TroubleKind, packet: Packet, value: string, message: () => string): void {
    this.options.report(kind, packet.line, value, message);
  }

  // ------------------------------------------------------------ counting

  private countOne(packet: Packet): void {
    if (packet.received && !Number.isNaN(packet.rssiDbm)) this.rssi.add(packet.rssiDbm);
    if (packet.hour >= 0) this.countHour(packet.hour, 1, packet.received ? 0 : 1);
  }

  /** Missing packets belong to the hours over which they were missed. */
  private countMissing(packet: Packet, missing: number): void {
    if (packet.hour < 0) return;
    const elapsed = packet.timeS - this.timeS;
    const whole = elapsed > 3600 ? Math.min(24 * 366, Math.ceil(elapsed / 3600)) : 1;
    let counted = 0;
    for (let k = whole - 1; k >= 0; k--) {
      const until = Math.round((missing * (whole - k)) / whole);
      this.countHour((((packet.hour - k) % 24) + 24) % 24, until - counted, until - counted);
      counted = until;
    }
  }

  private countHour(hour: number, packets: number, lost: number): void {
    this.hours ??= Array.from({ length: 24 }, () => ({ packets: 0, lost: 0 }));
    this.hours[hour].packets += packets;
    this.hours[hour].lost += lost;
  }

  // ------------------------------------------------------------ the end

  finish(): LinkTrace {
    const { held } = this;
    if (held) {
      this.held = null;
      const back = -held.step;
      if (back >= 0 && back <= this.late && !this.window.isBefore(back)) this.comesLate(held, back);
      else {
        this.trouble("bad-row", held, held.text, () => {
          return `Number ${held.number} does not follow ${this.lastRaw}, and no later row confirms it; the row is left out.`;
        });
      }
    }
    this.window.flush();
    const { runs } = this.window;
    let packets = 0;
    let lost = 0;
    for (let i = 0; i < runs.length; i++) {
      packets += runs[i];
      if (i % 2 === 1) lost += runs[i];
    }
    return {
      source: this.source,
      receiver: this.receiver,
      firstNumber: this.options.numbered ? this.firstNumber : 0,
      runs,
      packets,
      lost,
      lostBefore: 0,
      lostAfter: 0,
      intervalS: this.interval.usual() ?? this.options.intervalS,
      firstTimeS: known(this.firstTimeS),
      lastTimeS: known(this.timeS),
      hours: this.hours,
      rssi: this.rssi.summary(),
    };
  }
}

const fate = (packet: Packet): Fate => (packet.received ? RECEIVED : LOST);
const known = (value: number): number | null => (Number.isNaN(value) ? null : value);
