/**
 * What a good colleague would say to a survey, computed: what is weak and why, what breaks it, and what helps, simulated with the
 * same random numbers, with what it costs in the round. Works off a list of trials in chunks.
 */
import type { Scenario } from "#shared/scenario/schema.ts";
import { capital, listWords, messagesOf, nodeWords, percent } from "./advice-words.ts";
import { type Change, changesFor } from "./changes.ts";
import { costWords, deepest, findings, type Pair, pairsOf } from "./findings.ts";
import { meanLinks } from "./link-table.ts";
import { type RoundTiming, roundTiming } from "./round.ts";
import { type Edit, withEdits } from "./savings.ts";
import { FloodTally } from "./tally.ts";
import { Ways } from "./ways.ts";

export interface Figure {
  label: string;
  value: number;
  /** "": a share, 0 to 1. */
  unit: string;
}

export interface Advice {
  kind:
    | "unreached"
    | "weak"
    | "deep"
    | "single-point"
    | "beacon-host"
    | "shared-loss"
    | "spells"
    | "too-few"
    | "not-needed"
    /** Something that helps; its edits make it. */
    | "change"
    /** What was tried and does not. */
    | "no-help";
  severity: "problem" | "warning" | "hint";
  /** Numbers of the nodes that it is about. */
  nodes: number[];
  /** The slot that it is about. */
  slot: string | null;
  text: string;
  figures: Figure[];
  /** New values in the scenario that would make the change; empty: it is not one setting. */
  edits: Edit[];
}

interface Trial {
  rounds: number;
  /** Made when its turn comes: links of a large floor take a while, and memory. */
  begin: () => FloodTally;
  conclude: (tally: FloodTally) => Advice | null;
}

interface Count {
  count: number;
  of: number;
}

interface Tried {
  change: Change;
  timing: RoundTiming;
  then: Count;
}

/** Work of one round, slots x nodes x nodes, that all trials of a kind together may take. */
const BUDGET = 20_000_000;
const clamp = (value: number, lo: number, hi: number): number => Math.min(hi, Math.max(lo, Math.floor(value)));

/** A node's outage cuts another one when that has less than this share of what it had. */
const CUT = 0.5;
/** A change helps when it takes away at least this share of the losses. */
const LEAST_HELP = 0.25;
/** A way at least this likely keeps a node from being cut off. */
const LIKELY = 0.6;
/** Instants of a run at which moving nodes are looked at. */
const INSTANTS = 5;

export interface AdvisorOptions {
  seed: number;
  target: number;
}

export class Advisor {
  /** Rounds simulated. */
  done = 0;
  private trials: Trial[] | null = null;
  private current: FloodTally | null = null;
  private readonly advice: Advice[] = [];
  private readonly tried: Tried[] = [];
  private readonly changeRounds: number;
  private readonly outageRounds: number;
  private weakest: Pair | null = null;
  private before: Count | null = null;
  private total = 0;

  /** The tally has to be finished when the first chunk is asked for. */
  constructor(
    private readonly scenario: Scenario,
    private readonly timing: RoundTiming,
    private readonly survey: FloodTally,
    private readonly options: AdvisorOptions,
  ) {
    const n = survey.nodes.length;
    const work = n * n * Math.max(1, timing.slots.length);
    this.changeRounds = Math.min(survey.rounds, clamp(BUDGET / work, 100, 1000));
    this.outageRounds = Math.min(survey.rounds, clamp(BUDGET / 4 / work, 30, 150));
  }

  get finished(): boolean {
    return this.trials !== null && this.trials.length === 0;
  }

  /** Rounds that it will simulate, as far as it is known. */
  get expected(): number {
    return this.trials === null ? 8 * this.changeRounds : Math.max(this.done, this.total);
  }

  advance(rounds: number): void {
    this.trials ??= this.begin();
    let left = rounds;
    while (left > 0 && this.trials.length > 0) {
      const [trial] = this.trials;
      // Beginning counts for a round, so that a chunk does not begin a hundred of them.
      if (this.current === null) left--;
      this.current ??= trial.begin();
      const tally = this.current;
      const before = tally.done;
      tally.advance(left);
      left -= tally.done - before;
      this.done += tally.done - before;
      if (!tally.finished) continue;
      const found = trial.conclude(tally);
      if (found) this.advice.push(found);
      this.current = null;
      this.trials.shift();
    }
  }

  /** Problems first, then warnings, then what helps, then hints. */
  result(): Advice[] {
    return [...this.advice, ...this.changes()].sort((a, b) => rank(a) - rank(b));
  }

  private begin(): Trial[] {
    const { scenario, timing, survey, options } = this;
    this.advice.push(...findings(scenario, timing, survey, options.target));
    const trials = [...this.outages(), ...this.changeTrials()];
    this.total = trials.reduce((sum, { rounds }) => sum + rounds, 0);
    return trials;
  }

  private outages(): Trial[] {
    const { scenario, timing, survey, options } = this;
    const pairs = pairsOf(scenario, timing, survey).filter(({ ratio }) => ratio >= CUT);
    const host = scenario.round.beacon?.needed ? timing.slots.find(({ message }) => message === "beacon")?.from : null;
    const ways = this.waysOf();
    return survey.nodes.flatMap((node, place): Trial[] => {
      const others = pairs.filter((pair) => pair.place !== place && survey.slots[pair.slot].source !== place);
      const around = (pair: Pair) => ways.every((way) => way.roundabout(survey.slots[pair.slot].source, pair.place, place, LIKELY));
      if (node === host || others.every(around)) return [];
      const down = withEdits(scenario, [{ path: ["floor", "nodes", place, "outages"], value: [{ fromS: 0, untilS: null }] }]);
      const rounds = this.outageRounds;
      const begin = () => new FloodTally(down, timing, { rounds, seed: options.seed });
      return [{ rounds, begin, conclude: (tally) => this.cut(node, others, tally) }];
    });
  }

  /** Links at the instants that count, for finding the nodes whose outage needs no simulation. */
  private waysOf(): Ways[] {
    const { scenario, timing, survey } = this;
    const longest = timing.slots.reduce((most, { payloadBytes }) => Math.max(most, payloadBytes), 0);
    const moves = scenario.floor?.nodes.some(({ wayPoints }) => wayPoints.length > 0) ?? false;
    const instants = moves ? Array.from({ length: INSTANTS }, (_, i) => (scenario.run.durationS * i) / (INSTANTS - 1)) : [0];
    return instants.map((atS) => new Ways(meanLinks(scenario, atS, longest), survey.nodes, timing.hops));
  }

  private cut(node: number, others: readonly Pair[], tally: FloodTally): Advice | null {
    const { scenario, timing, survey } = this;
    const after = others
      .map((pair) => ({ pair, ratio: tally.messages[pair.message].received[pair.place] / Math.max(1, tally.messages[pair.message].sent) }))
      .filter(({ pair, ratio }) => ratio < CUT * pair.ratio)
      .sort((a, b) => a.ratio - b.ratio);
    if (after.length === 0) return null;
    const [{ pair, ratio }] = after;
    const cutOff = [...new Set(after.map(({ pair }) => survey.nodes[pair.place]))];
    const more = cutOff.length > 1 ? ` So ${cutOff.length > 2 ? "are" : "is"} ${cutOff.length - 1} more.` : "";
    return {
      kind: "single-point",
      severity: "warning",
      nodes: [node, ...cutOff],
      slot: timing.slots[pair.slot].id,
      text: `${capital(nodeWords(scenario, node))} is a single point of failure: while it is out of service, ${nodeWords(scenario, survey.nodes[pair.place])} has ${percent(ratio)} of the ${messagesOf(timing, pair.slot)} instead of ${percent(pair.ratio)}.${more}`,
      figures: [
        { label: "delivered without it", value: ratio, unit: "" },
        { label: "delivered", value: pair.ratio, unit: "" },
      ],
      edits: [],
    };
  }

  private changeTrials(): Trial[] {
    const { scenario, timing, survey, options } = this;
    const [weakest] = pairsOf(scenario, timing, survey);
    if (!weakest || weakest.ratio >= options.target) return [];
    this.weakest = weakest;
    const rounds = this.changeRounds;
    const of = (changed: Scenario, then: RoundTiming) => () => new FloodTally(changed, then, { rounds, seed: options.seed });
    const first: Trial = {
      rounds,
      begin: of(scenario, timing),
      conclude: (tally) => {
        this.before = this.had(tally, timing, weakest);
        return null;
      },
    };
    const changes = changesFor(scenario, timing, survey.nodes, weakest, deepest(survey, timing.hops).step);
    const trials = changes.map((change): Trial => {
      const changed = withEdits(scenario, change.edits);
      const then = roundTiming(changed);
      return {
        rounds,
        begin: of(changed, then),
        conclude: (tally) => {
          this.tried.push({ change, timing: then, then: this.had(tally, then, weakest) });
          return null;
        },
      };
    });
    return [first, ...trials];
  }

  /** Messages of the weakest pair that its node had. */
  private had(tally: FloodTally, timing: RoundTiming, { slot, place }: Pair): Count {
    const id = this.timing.slots[slot].id;
    const message = tally.messages.find(({ slots: [first] }) => timing.slots[first].id === id);
    return { count: message?.received[place] ?? 0, of: message?.sent ?? 0 };
  }

  /** What helped the weakest node, the best of each family, best first; and what did not. */
  private changes(): Advice[] {
    const { weakest, before: now } = this;
    if (!weakest || !now) return [];
    const helps = Math.max(1, LEAST_HELP * (now.of - now.count));
    const outcomes = [...this.tried].sort((a, b) => b.then.count - a.then.count || b.timing.reserveS - a.timing.reserveS);
    const best = outcomes.filter(({ change }, i) => outcomes.findIndex((other) => other.change.family === change.family) === i);
    const good = best.filter(({ then }) => then.count - now.count >= helps);
    const idle = best.filter(({ then }) => then.count - now.count < helps);
    return [...good.map((outcome) => this.helpful(outcome, now, weakest)), ...this.unhelpful(idle, weakest)];
  }

  private helpful({ change, timing: changed, then }: Tried, now: Count, weakest: Pair): Advice {
    const { scenario, timing, survey } = this;
    const node = survey.nodes[weakest.place];
    return {
      kind: "change",
      severity: "hint",
      nodes: [...new Set([node, ...change.nodes])],
      slot: timing.slots[weakest.slot].id,
      text: `${change.text}: ${nodeWords(scenario, node)} would have ${percent(share(then))} of the ${messagesOf(timing, weakest.slot)} instead of ${percent(share(now))}. ${costWords(timing, changed)}`,
      figures: [
        { label: "delivered now", value: share(now), unit: "" },
        { label: "delivered then", value: share(then), unit: "" },
        { label: "tried with", value: then.of, unit: "floods" },
        { label: "time added to the round", value: timing.reserveS - changed.reserveS, unit: "s" },
        { label: "reserve then", value: changed.reserveS, unit: "s" },
      ],
      edits: change.edits,
    };
  }

  private unhelpful(idle: readonly Tried[], weakest: Pair): Advice[] {
    const { scenario, timing, survey } = this;
    if (idle.length === 0) return [];
    const node = survey.nodes[weakest.place];
    const tried = listWords(idle.map(({ change }) => change.short));
    return [
      {
        kind: "no-help",
        severity: "hint",
        nodes: [node],
        slot: timing.slots[weakest.slot].id,
        text: `Tried for ${nodeWords(scenario, node)}, without much effect: ${tried}.`,
        figures: [],
        edits: [],
      },
    ];
  }
}

const share = ({ count, of }: Count): number => (of > 0 ? count / of : 0);

const RANKS = { problem: 0, warning: 1, hint: 3 };
const rank = ({ kind, severity }: Advice): number => (kind === "change" ? 2 : RANKS[severity]);
