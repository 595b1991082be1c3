/** What a survey's counts say by themselves: weak and deep nodes, shared losses, floods that depend on each other. */
import { binomialAtMost, chiSquareTail, clopperPearson, packetsForClaim } from "#shared/math/statistics.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { Advice, Figure } from "./advice.ts";
import { capital, listWords, messagesOf, nodeWords, percent, wanted } from "./advice-words.ts";
import { type LinkRow, meanLinks } from "./link-table.ts";
import type { RoundTiming } from "./round.ts";
import { BATCHES, type FloodTally, medianStep, receivedBy, spreadOf } from "./tally.ts";
import { ms } from "./words.ts";

/** A message at a node that needs it. */
export interface Pair {
  /** Index of the message, and of its first slot. */
  message: number;
  slot: number;
  place: number;
  count: number;
  of: number;
  ratio: number;
}

/** Every message at every node that needs it; a beacon only where rounds depend on it. Weakest first. */
export function pairsOf(scenario: Scenario, timing: RoundTiming, tally: FloodTally): Pair[] {
  const pairs = tally.messages.flatMap(({ slots: [slot], needed, received, sent }, message): Pair[] => {
    if (timing.slots[slot].message === "beacon" && !scenario.round.beacon?.needed) return [];
    if (sent === 0) return [];
    return needed.map((place) => ({ message, slot, place, count: received[place], of: sent, ratio: received[place] / sent }));
  });
  return pairs.sort((a, b) => a.ratio - b.ratio);
}

/** Probability below which a difference counts as seen. */
const SIGNIFICANT = 0.001;

const NEIGHBOURS = 3;
/** Strongest links to a node first. */
export function linksTo(links: readonly LinkRow[], node: number): LinkRow[] {
  return links.filter(({ to, prr }) => to === node && prr >= 0.01).sort((a, b) => b.prr - a.prr || a.distanceM - b.distanceM);
}

export function findings(scenario: Scenario, timing: RoundTiming, tally: FloodTally, target: number): Advice[] {
  const pairs = pairsOf(scenario, timing, tally);
  return [
    ...weakNodes(scenario, timing, tally, pairs, target),
    ...deepNodes(scenario, timing, tally),
    ...beaconHost(scenario, timing),
    ...sharedLosses(tally),
    ...spells(scenario, timing, tally),
    ...tooFew(pairs, tally, target),
    ...notNeeded(scenario, timing, tally),
  ];
}

/** The weakest message of each node that gets less than the target. */
function weakNodes(scenario: Scenario, timing: RoundTiming, tally: FloodTally, pairs: readonly Pair[], target: number): Advice[] {
  const worst = new Map<number, Pair>();
  for (const pair of pairs) if (pair.ratio < target && !worst.has(pair.place)) worst.set(pair.place, pair);
  const tables = new Map<number, LinkRow[]>();
  const linksFor = (payloadBytes: number): LinkRow[] => {
    const links = tables.get(payloadBytes) ?? meanLinks(scenario, 0, payloadBytes);
    tables.set(payloadBytes, links);
    return links;
  };
  return Array.from(worst.values(), ({ slot, place, count, of, ratio }): Advice => {
    const node = tally.nodes[place];
    const [lo, hi] = clopperPearson(count, of);
    const links = linksFor(timing.slots[slot].payloadBytes);
    const best = linksTo(links, node).slice(0, NEIGHBOURS);
    const source = timing.slots[slot].from;
    const out = links
      .filter(({ from, to, prr }) => from === source && to !== node && prr >= 0.01)
      .sort((a, b) => b.prr - a.prr)
      .slice(0, NEIGHBOURS);
    const named = (rows: readonly LinkRow[], end: "from" | "to") =>
      rows.map((row) => `${end} ${nodeWords(scenario, row[end])}, ${percent(row.prr)}`).join("; ");
    // Where the sender's way into the floor is the narrower one, it is the one to look at.
    const narrow = source !== null && (out[0]?.prr ?? 0) < (best[0]?.prr ?? 0);
    const sender = narrow ? ` Best links from its sender, ${nodeWords(scenario, source)}: ${named(out, "to") || "none"}.` : "";
    const neighbours = best.length > 0 ? `Best links to it: ${named(best, "from")}.${sender}` : "No link reaches it.";
    const moves = scenario.floor?.nodes[place].wayPoints.length ? " Links are those at the start; the node moves." : "";
    const sure = hi < target ? `less than the ${wanted(target)} wanted` : `by this count less than the ${wanted(target)} wanted`;
    return {
      kind: ratio === 0 ? "unreached" : "weak",
      severity: hi < target ? "problem" : "warning",
      nodes: [node],
      slot: timing.slots[slot].id,
      text: `${capital(nodeWords(scenario, node))} has ${percent(ratio)} of the ${messagesOf(timing, slot)} that it needs (95 % interval ${percent(lo)} to ${percent(hi)}), ${sure}. ${neighbours}${moves}`,
      figures: [
        { label: "delivered", value: ratio, unit: "" },
        { label: "lower limit", value: lo, unit: "" },
        { label: "upper limit", value: hi, unit: "" },
        ...best.map(({ from, prr }): Figure => ({ label: `PRR from node ${from}`, value: prr, unit: "" })),
      ],
      edits: [],
    };
  });
}

/** Nodes that half of some message's floods reach later than in step H. */
export function deepest(tally: FloodTally, hops: number): { places: number[]; step: number } {
  const places = new Set<number>();
  let deepest = hops;
  for (const slot of tally.slots) {
    tally.nodes.forEach((_, place) => {
      const step = medianStep(slot, place);
      if (step === null || step <= hops) return;
      places.add(place);
      deepest = Math.max(deepest, step);
    });
  }
  return { places: [...places].sort((a, b) => a - b), step: deepest };
}

function deepNodes(scenario: Scenario, timing: RoundTiming, tally: FloodTally): Advice[] {
  const { places, step } = deepest(tally, timing.hops);
  if (places.length === 0) return [];
  const slots = timing.slots
    .filter((_, i) => places.some((place) => (medianStep(tally.slots[i], place) ?? 0) > timing.hops))
    .map(({ label }) => label.toLowerCase());
  const nodes = places.map((place) => tally.nodes[place]);
  const [are, them] = nodes.length > 1 ? ["are", "them"] : ["is", "it"];
  return [
    {
      kind: "deep",
      severity: "warning",
      nodes,
      slot: null,
      text: `${capital(listWords(nodes.map((id) => nodeWords(scenario, id))))} ${are} deeper than the hop bound of ${timing.hops}: half of the floods of ${listWords(slots)} reach ${them} in step ${step} at the latest, so ${nodes.length > 1 ? "they have" : "it has"} fewer tries than the bound promises.`,
      figures: [
        { label: "hop bound", value: timing.hops, unit: "steps" },
        { label: "latest median step", value: step, unit: "steps" },
      ],
      edits: step <= 20 ? [{ path: ["round", "hops"], value: step }] : [],
    },
  ];
}

function beaconHost(scenario: Scenario, timing: RoundTiming): Advice[] {
  const host = timing.slots.find(({ message }) => message === "beacon")?.from ?? null;
  if (!scenario.round.beacon?.needed || host === null) return [];
  return [
    {
      kind: "beacon-host",
      severity: "warning",
      nodes: [host],
      slot: "beacon",
      text: `${capital(nodeWords(scenario, host))} sends the beacon without which no node takes part in a round: while it is out of service, nothing is delivered. Try it: take it out of service for a while and run.`,
      figures: [],
      edits: [],
    },
  ];
}

function sharedLosses(tally: FloodTally): Advice[] {
  return tally.loops.flatMap(({ timing, counts }): Advice[] => {
    const { samplings, measurementLost, commandLost, bothLost } = counts;
    if (samplings === 0 || bothLost < 2) return [];
    const independent = (measurementLost * commandLost) / samplings;
    const chance = 1 - binomialAtMost(bothLost - 1, samplings, independent / samplings);
    if (chance > SIGNIFICANT) return [];
    return [
      {
        kind: "shared-loss",
        severity: "warning",
        nodes: [],
        slot: null,
        text: `${timing.name} lost measurement and command of the same sampling ${bothLost} times in ${samplings}; independent losses would do so about ${independent < 10 ? independent.toFixed(1) : independent.toFixed(0)} times. What assumes independent losses is too hopeful on this floor.`,
        figures: [
          { label: "both lost", value: bothLost, unit: "times" },
          { label: "if independent", value: independent, unit: "times" },
        ],
        edits: [],
      },
    ];
  });
}

function spells(scenario: Scenario, timing: RoundTiming, tally: FloodTally): Advice[] {
  const dependent = tally.slots.flatMap((slot, i) => {
    if (timing.slots[i].message === "beacon" && !scenario.round.beacon?.needed) return [];
    const spread = spreadOf(slot);
    return chiSquareTail(spread * (BATCHES - 1), BATCHES - 1) < SIGNIFICANT ? [{ slot: i, spread }] : [];
  });
  if (dependent.length === 0) return [];
  const factor = Math.sqrt(dependent.reduce((most, { spread }) => Math.max(most, spread), 1));
  return [
    {
      kind: "spells",
      severity: "hint",
      nodes: [],
      slot: null,
      text: `Floods with ${listWords(dependent.map(({ slot }) => messagesOf(timing, slot)))} come in good and bad spells: nodes move, or fading or interference outlasts a round. The true intervals are wider, by a factor of up to about ${factor.toFixed(1)}.`,
      figures: [{ label: "wider by", value: factor, unit: "times" }],
      edits: [],
    },
  ];
}

function tooFew(pairs: readonly Pair[], tally: FloodTally, target: number): Advice[] {
  const open = pairs.filter(({ count, of, ratio }) => ratio >= target && clopperPearson(count, of)[0] < target);
  if (open.length === 0) return [];
  const lost = open.reduce((most, { count, of }) => Math.max(most, of - count), 0);
  const needed = packetsForClaim(target, 0.975, lost);
  const how = lost === 0 ? "even without a loss" : `even with no further loss than the ${lost} of the weakest`;
  const nodes = [...new Set(open.map(({ place }) => tally.nodes[place]))].sort((a, b) => a - b);
  return [
    {
      kind: "too-few",
      severity: "hint",
      nodes,
      slot: null,
      text: `${tally.done} rounds are too few to show ${wanted(target)}: ${how} it takes ${needed} floods until the two-sided 95 % interval lies above it.`,
      figures: [{ label: "floods needed", value: needed, unit: "floods" }],
      edits: [],
    },
  ];
}

/** Nodes that hardly anything reaches, where nothing is needed: said once, so that nobody wonders. */
function notNeeded(scenario: Scenario, timing: RoundTiming, tally: FloodTally): Advice[] {
  const inNeed = new Set(pairsOf(scenario, timing, tally).map(({ place }) => place));
  const sources = new Set(tally.slots.map(({ source }) => source));
  return tally.nodes.flatMap((node, place): Advice[] => {
    if (inNeed.has(place) || sources.has(place)) return [];
    const best = tally.slots.reduce((most, slot) => Math.max(most, slot.floods > 0 ? receivedBy(slot, place) / slot.floods : 0), 0);
    if (best >= 0.5) return [];
    return [
      {
        kind: "not-needed",
        severity: "hint",
        nodes: [node],
        slot: null,
        text: `${capital(nodeWords(scenario, node))} has at most ${percent(best)} of any message. Nothing needs it there, and it hardly helps as a relay.`,
        figures: [{ label: "delivered", value: best, unit: "" }],
        edits: [],
      },
    ];
  });
}

/** "It takes 1.40 ms more of the round and leaves 3.00 ms in reserve." */
export function costWords(now: RoundTiming, then: RoundTiming): string {
  const ns = (seconds: number) => Math.round(seconds * 1e9);
  const adds = ns(now.reserveS) - ns(then.reserveS);
  if (adds === 0) return "It costs no time in the round.";
  const takes = adds > 0 ? `It takes ${ms(adds)} more of the round` : `It takes ${ms(-adds)} less of the round`;
  if (then.fits) return `${takes} and leaves ${ms(ns(then.reserveS))} in reserve.`;
  return `${takes}, which ${now.fits ? "then no longer fits" : "does not fit"}: the shortest period would be ${ms(Math.ceil((then.shortestPeriodS * 1e9) / 1e4 - 1e-6) * 1e4)}.`;
}
