/** The timing of one round (model 1): slots, computing, acting, reserve, and what would help when it does not fit. */
import type { Issue } from "#shared/scenario/issues.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { LoopDemand } from "./demand.ts";
import { phyTiming } from "./phy.ts";
import { type Saving, savingsOf } from "./savings.ts";
import { layOut, type PlacedLoop, type SlotMessage, toNs } from "./schedule.ts";
import { ms, msAtLeast } from "./words.ts";

/** All times in seconds from the start of the round. */
export interface Slot {
  /** Names the slot whatever else is in the round: "beacon", "main/measurement", "main/measurement/2", "other/heartbeat". */
  id: string;
  message: SlotMessage;
  /** Id of its loop; null: beacon and other messages. */
  loop: string | null;
  label: string;
  /** 1 or 2: a message may have two slots of a round. */
  copy: number;
  /** It occurs in round firstRound (below everyRounds) and in every everyRounds-th after it. */
  everyRounds: number;
  firstRound: number;
  /** Node that starts the flood; null: no floor. */
  from: number | null;
  /** Nodes that need the message; null: all. */
  to: number[] | null;
  /** Without the header. */
  payloadBytes: number;
  airtimeS: number;
  /** Airtime + turnaround. */
  stepS: number;
  /** Steps of the flood, slack included. */
  steps: number;
  startS: number;
  /** End of the wake-up: the flood's first step begins. */
  floodStartS: number;
  floodEndS: number;
  /** Gap included. */
  endS: number;
}

/** One loop in the round: times in seconds from the start of a round in which it samples. */
export interface LoopTiming {
  loop: string;
  name: string;
  /** It samples in round firstRound and in every everyRounds-th after it. */
  everyRounds: number;
  firstRound: number;
  /** Its sampling period: everyRounds times the round's. */
  periodS: number;
  sampleAtS: number;
  computeFromS: number;
  computeUntilS: number;
  /** d: rounds between computing and travelling of a command. */
  commandDelay: 0 | 1;
  /** When the command acts; may lie in a later round. */
  actAtS: number;
  /** Earliest and latest instant at which it could act. */
  earliestActS: number;
  latestActS: number;
  /** tau = actAtS - sampleAtS. */
  latencyS: number;
}

/** Whole nanoseconds, for the engine. period: the round's. */
export interface RoundNs {
  period: number;
  slots: { id: string; message: SlotMessage; start: number; floodStart: number; step: number; end: number }[];
  /** Of each loop: its sampling period, and sampling and acting instant of its first command, from t = 0. */
  loops: { period: number; sample: number; act: number }[];
}

export interface RoundTiming {
  periodS: number;
  /** Hop bound H. */
  hops: number;
  slots: Slot[];
  /** The scenario's own loop first. */
  loops: LoopTiming[];
  guardS: number;
  /** Period minus last slot's end minus guard; negative when the round does not fit. */
  reserveS: number;
  fits: boolean;
  shortestPeriodS: number;
  ns: RoundNs;
  /** Filled when the round does not fit; largest saving first. */
  savings: Saving[];
  issues: Issue[];
}

/** Does the slot occur in round r (from 0)? */
export const occurs = ({ everyRounds, firstRound }: { everyRounds: number; firstRound: number }, r: number): boolean =>
  r >= firstRound && (r - firstRound) % everyRounds === 0;

const s = (ns: number): number => ns / 1e9;

function loopTiming(
  { demand, computeFrom, computeUntil, commandStart, commandEnd }: PlacedLoop,
  period: number,
  fits: boolean,
  issues: Issue[],
): LoopTiming {
  const sample = toNs(demand.sampleAtS);
  const named = (what: string) => `${demand.name}: ${what}`;
  if (sample >= period) {
    issues.push({
      code: "out-of-range",
      path: `${demand.at.timing}.sampleAtS`,
      message: named(`sampling at ${ms(sample)} lies outside the round; permitted 0 to just under ${ms(period)}.`),
    });
  }
  const delay: 0 | 1 = demand.commandTravels === "same-round" ? 0 : 1;
  const bus = toNs(demand.actuatorBusS);
  const latest = (1 + delay) * period;
  if (delay === 1 && computeUntil > period + (commandStart ?? period)) {
    issues.push({
      code: "computing-too-long",
      path: demand.at.compute,
      message: named(
        `computing ends ${ms(computeUntil)} after the round began, later than the command's slot of the next round (${ms(period + (commandStart ?? period))}).`,
      ),
    });
  }
  const earliest = commandEnd !== null ? delay * period + commandEnd + bus : computeUntil + bus;
  const wanted = demand.actAfterSampleS === null ? latest : sample + toNs(demand.actAfterSampleS);
  if (fits && earliest > latest) {
    issues.push({
      code: "acts-too-late",
      path: demand.at.bus,
      message: named(
        `the command reaches the drive ${ms(earliest)} after the round began, later than the boundary at ${ms(latest)} at which it has to act.`,
      ),
    });
  } else if (fits && (wanted < earliest || wanted > latest)) {
    issues.push({
      code: "out-of-range",
      path: demand.at.actAfter,
      message: named(
        `a latency of ${ms(wanted - sample)} is not possible: the command can act ${ms(earliest - sample)} to ${ms(latest - sample)} after sampling.`,
      ),
    });
  }
  return {
    loop: demand.id,
    name: demand.name,
    everyRounds: demand.everyRounds,
    firstRound: demand.firstRound,
    periodS: s(demand.everyRounds * period),
    sampleAtS: s(sample),
    computeFromS: s(computeFrom),
    computeUntilS: s(computeUntil),
    commandDelay: delay,
    actAtS: s(wanted),
    earliestActS: s(earliest),
    latestActS: s(latest),
    latencyS: s(wanted - sample),
  };
}

/**
 * Slot table, latencies and reserve of the scenario's round. Never throws: what is wrong is in `issues`, and the timing is
 * given as far as it can be computed (a picture can show what does not fit).
 */
export function roundTiming(scenario: Scenario): RoundTiming {
  const { round, radio } = scenario;
  const issues: Issue[] = [];
  const timing = phyTiming(radio.phy);
  const layout = layOut(scenario, timing);
  const period = toNs(round.periodS);
  const drift = 2 * round.clockPpm * 1e-6;
  const guard = Math.ceil(drift * period);
  const several = layout.loops.length > 1;
  const nameOf = (id: string | null) => layout.loops.find(({ demand }: { demand: LoopDemand }) => demand.id === id)?.demand.name;

  for (const slot of layout.slots) {
    const over = radio.headerBytes + slot.payload - timing.maxBytes;
    if (over > 0 && slot.copy === 1) {
      const whose = several && slot.loop ? ` of ${nameOf(slot.loop)}` : "";
      issues.push({
        code: "payload-too-long",
        path: "radio.phy",
        message: `${slot.label}${whose}: ${radio.headerBytes} B header and ${slot.payload} B payload are ${over} B more than one ${timing.label} packet carries (at most ${timing.maxBytes} B).`,
      });
    }
  }

  const shortest = Math.ceil(layout.end / (1 - drift));
  const reserve = period - layout.end - guard;
  // Offered on a grid of 0.1 ms, so that the next edit does not have to begin with eight digits.
  const longer = { periodS: Math.ceil(shortest / 1e5 - 1e-9) / 1e4, addsS: s(shortest - period), text: `a period of ${msAtLeast(shortest)}` };
  const savings = reserve < 0 ? savingsOf(scenario, layout.end, longer) : [];
  if (reserve < 0) {
    issues.push({
      code: "round-does-not-fit",
      path: "round.periodS",
      message: `The round does not fit: its slots end at ${ms(layout.end)} and ${ms(guard)} of guard follow, ${ms(-reserve)} more than the period of ${ms(period)}. The shortest period that fits is ${msAtLeast(shortest)}.`,
      help: savings.map((saving) => `${saving.text}: saves ${ms(toNs(saving.savesS))}`),
    });
  }
  const loops = layout.loops.map((loop) => loopTiming(loop, period, reserve >= 0, issues));
  return {
    periodS: s(period),
    hops: round.hops,
    slots: layout.slots.map(({ payload, airtime, step, start, floodStart, floodEnd, end, ...slot }) => ({
      ...slot,
      payloadBytes: payload,
      airtimeS: s(airtime),
      stepS: s(step),
      startS: s(start),
      floodStartS: s(floodStart),
      floodEndS: s(floodEnd),
      endS: s(end),
    })),
    loops,
    guardS: s(guard),
    reserveS: s(reserve),
    fits: reserve >= 0,
    shortestPeriodS: s(shortest),
    ns: {
      period,
      slots: layout.slots.map(({ id, message, start, floodStart, step, end }) => ({ id, message, start, floodStart, step, end })),
      loops: loops.map((loop) => {
        const first = loop.firstRound * period;
        return { period: loop.everyRounds * period, sample: first + toNs(loop.sampleAtS), act: first + toNs(loop.actAtS) };
      }),
    },
    savings,
    issues,
  };
}
