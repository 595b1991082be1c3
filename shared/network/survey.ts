/**
 * A survey of the floor: many simulated floods as figures with intervals, and what a good colleague would say to them. The
 * nodes' scripted outages are left out of it; what an outage does is seen in a run.
 */
import { clopperPearson } from "#shared/math/statistics.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { type Advice, Advisor } from "./advice.ts";
import { radioEnergy } from "./energy.ts";
import { type RoundTiming, roundTiming } from "./round.ts";
import { FloodTally, medianStep, receivedBy, type SlotTally, spreadOf, type TallyOptions, withoutOutages } from "./tally.ts";

/** count of so many, its ratio, and the 95 % interval of Clopper and Pearson. */
export interface Proportion {
  count: number;
  of: number;
  ratio: number;
  lo: number;
  hi: number;
}

/** What one node received of one slot. */
export interface SurveyedNode extends Omit<Proportion, "count" | "of"> {
  node: number;
  name: string;
  /** Does it need the message? */
  needed: boolean;
  /** Floods sent, and received here. */
  sent: number;
  received: number;
  /** Step by which half of all floods have arrived; null: less than half ever do. */
  medianStep: number | null;
  /** Floods first received in step 1, 2, ...: its distance in hops, and what losses add. */
  hops: number[];
}

export interface SurveyedSlot {
  id: string;
  label: string;
  loop: string | null;
  /** Node that starts it. */
  from: number | null;
  floods: number;
  /** Share of all nodes, the sender too, that have the message after step 1, 2, ... */
  reachedShare: number[];
  /** Floods that reached every node in need. */
  delivered: Proportion;
  /** What `delivered` would be if those nodes received independently of each other; null with fewer than two. */
  deliveredIfIndependent: number | null;
  /** Variance of 20 successive shares of delivered floods over that of independent floods: about 1, or floods come in good and bad spells. */
  spread: number;
  /** Every node but the sender. */
  nodes: SurveyedNode[];
}

export interface SurveyedLoop {
  loop: string;
  name: string;
  samplings: number;
  /** Null: the placement needs no such message. */
  measurement: Proportion | null;
  command: Proportion | null;
  /** All messages of one sampling delivered. */
  both: Proportion;
  /** Samplings that lost both, and how many would have if losses were independent; null with fewer than two messages. */
  lostTogether: { count: number; ifIndependent: number } | null;
}

/** Per round, on average. */
export interface SurveyedRadio {
  node: number;
  name: string;
  radioOnS: number;
  sendS: number;
  listenS: number;
  chargeC: number;
  dutyCycle: number;
  sendDutyCycle: number;
  /** Null: nothing is drawn. */
  batteryDays: number | null;
  /** Share of the beacons that it has; null: there is no beacon. */
  beaconRatio: number | null;
}

export interface FloodSurvey {
  rounds: number;
  seed: number;
  /** Nodes whose scripted outages were left out. */
  outagesLeftOut: number[];
  slots: SurveyedSlot[];
  loops: SurveyedLoop[];
  nodes: SurveyedRadio[];
  advice: Advice[];
}

export interface SurveyOptions extends TallyOptions {
  /** Share of a message's floods that every node in need should have. */
  target?: number;
  /** Without advice a survey takes about a third of the time. */
  withoutAdvice?: boolean;
}

export const SURVEY_TARGET = 0.999;

const share = (count: number, of: number): Proportion => {
  const [lo, hi] = clopperPearson(count, of);
  return { count, of, ratio: of > 0 ? count / of : 0, lo, hi };
};

/** Advances in chunks; the scenario has to be one that prepareFloor lets through. */
export class Survey {
  private readonly scenario: Scenario;
  private readonly timing: RoundTiming;
  private readonly tally: FloodTally;
  private readonly advisor: Advisor | null;
  private readonly outagesLeftOut: number[];

  constructor(
    scenario: Scenario,
    private readonly options: SurveyOptions,
  ) {
    this.scenario = withoutOutages(scenario);
    this.timing = roundTiming(this.scenario);
    this.outagesLeftOut = scenario.floor?.nodes.filter(({ outages }) => outages.length > 0).map(({ id }) => id) ?? [];
    this.tally = new FloodTally(this.scenario, this.timing, options);
    this.advisor = options.withoutAdvice
      ? null
      : new Advisor(this.scenario, this.timing, this.tally, { seed: options.seed, target: options.target ?? SURVEY_TARGET });
  }

  get finished(): boolean {
    return this.tally.finished && (this.advisor === null || this.advisor.finished);
  }

  /** 0 to 1. */
  get progress(): number {
    const { done, rounds } = this.tally;
    if (!this.advisor) return done / rounds;
    return (done + this.advisor.done) / (rounds + this.advisor.expected);
  }

  /** Simulates at most so many more rounds. */
  advance(rounds: number): void {
    if (!this.tally.finished) this.tally.advance(rounds);
    else this.advisor?.advance(rounds);
  }

  result(): FloodSurvey {
    const { tally, timing, scenario } = this;
    const names = scenario.floor?.nodes.map(({ name }) => name) ?? [];
    const beacon = timing.slots.findIndex(({ message }) => message === "beacon");
    const periods = tally.done;
    return {
      rounds: tally.done,
      seed: this.options.seed,
      outagesLeftOut: this.outagesLeftOut,
      slots: tally.slots.map((slot, i) => surveyedSlot(timing.slots[i], slot, tally.nodes, names)),
      loops: tally.loops.map(({ timing: { loop, name }, counts }) => {
        const sent = (message: string) => timing.slots.some((slot) => slot.loop === loop && slot.message === message);
        const { samplings: n, measurementLost, commandLost, bothLost } = counts;
        const measurement = sent("measurement") ? share(n - measurementLost, n) : null;
        const command = sent("command") ? share(n - commandLost, n) : null;
        const lostTogether = measurement && command ? { count: bothLost, ifIndependent: n > 0 ? (measurementLost * commandLost) / n : 0 } : null;
        return { loop, name, samplings: n, measurement, command, both: share(n - (measurementLost + commandLost - bothLost), n), lostTogether };
      }),
      nodes: tally.nodes.map((node, i) => {
        const time = { sendS: tally.txNs[i] / 1e9 / periods, listenS: tally.rxNs[i] / 1e9 / periods };
        const { energyJ: _, ...spent } = radioEnergy(scenario.radio, timing.periodS, time);
        const has = beacon < 0 ? null : receivedBy(tally.slots[beacon], i) / Math.max(1, tally.slots[beacon].floods);
        return { node, name: names[i] ?? "", ...spent, beaconRatio: has };
      }),
      advice: this.advisor?.result() ?? [],
    };
  }
}

function surveyedSlot(slot: RoundTiming["slots"][number], tally: SlotTally, ids: readonly number[], names: readonly string[]): SurveyedSlot {
  const { steps, floods, delivered, needed, firstStep } = tally;
  const reachedShare: number[] = [];
  let reached = 0;
  for (let step = 0; step <= steps; step++) {
    for (let place = 0; place < ids.length; place++) reached += firstStep[place * (steps + 1) + step];
    if (step > 0) reachedShare.push(floods > 0 ? reached / (floods * ids.length) : 0);
  }
  const nodes = ids.flatMap((node, place): SurveyedNode[] => {
    if (place === tally.source) return [];
    const received = receivedBy(tally, place);
    const { ratio, lo, hi } = share(received, floods);
    const hops = Array.from({ length: steps }, (_, i) => firstStep[place * (steps + 1) + i + 1]);
    return [
      {
        node,
        name: names[place] ?? "",
        needed: needed.includes(place),
        sent: floods,
        received,
        ratio,
        lo,
        hi,
        medianStep: medianStep(tally, place),
        hops,
      },
    ];
  });
  const inNeed = nodes.filter((node) => node.needed);
  return {
    id: slot.id,
    label: slot.label,
    loop: slot.loop,
    from: slot.from,
    floods,
    reachedShare,
    delivered: share(delivered, floods),
    deliveredIfIndependent: inNeed.length < 2 ? null : inNeed.reduce((product, { ratio }) => product * ratio, 1),
    spread: spreadOf(tally),
    nodes,
  };
}

/** The whole survey at once; onProgress hears 0 to 1. */
export function surveyFloods(scenario: Scenario, options: SurveyOptions, onProgress?: (progress: number) => void): FloodSurvey {
  const survey = new Survey(scenario, options);
  while (!survey.finished) {
    survey.advance(100);
    onProgress?.(survey.progress);
  }
  return survey.result();
}
