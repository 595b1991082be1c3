/** Changes that may help a message to arrive: what a colleague would try, as edits of the scenario. */
import type { Scenario } from "#shared/scenario/schema.ts";
import { listWords, nodeWords, rangesWords } from "./advice-words.ts";
import { channelPlan, channelsInUse } from "./channels.ts";
import { linksTo, type Pair } from "./findings.ts";
import { meanLinks } from "./link-table.ts";
import type { RoundTiming } from "./round.ts";
import type { Edit } from "./savings.ts";

export interface Change {
  /** Of one family only the best is offered. */
  family: "transmissions" | "hops" | "slack" | "copies" | "channels" | "relay";
  text: string;
  /** Within a list of what was tried. */
  short: string;
  edits: Edit[];
  /** Nodes that it is about. */
  nodes: number[];
}

/** Midpoints that are tried. */
const PLACES = 4;

/** For the weakest message and node; deepest: the latest step by which half of some floods arrive. */
export function changesFor(scenario: Scenario, timing: RoundTiming, ids: readonly number[], weakest: Pair, deepest: number): Change[] {
  const { round } = scenario;
  const node = ids[weakest.place];
  const inRound = (key: keyof Scenario["round"], value: number): Edit[] => [{ path: ["round", key], value }];
  const changes: Change[] = [];
  if (round.transmissions < 10) {
    const n = round.transmissions + 1;
    changes.push({
      family: "transmissions",
      text: `${n} instead of ${n - 1} transmissions per node`,
      short: "one more transmission per node",
      edits: inRound("transmissions", n),
      nodes: [],
    });
  }
  const hops = Math.min(20, Math.max(round.hops + 1, deepest));
  if (hops > round.hops) {
    changes.push({
      family: "hops",
      text: `A hop bound of ${hops} instead of ${round.hops}`,
      short: `a hop bound of ${hops}`,
      edits: inRound("hops", hops),
      nodes: [],
    });
  }
  if (round.slackSteps < 20) {
    const slack = round.slackSteps + 1;
    changes.push({
      family: "slack",
      text: slack === 1 ? "One slack step" : `${slack} slack steps`,
      short: "one more slack step",
      edits: inRound("slackSteps", slack),
      nodes: [],
    });
  }
  return [...changes, ...secondSlot(scenario, timing, weakest), ...otherChannels(scenario), ...relays(scenario, timing, ids, weakest, node)];
}

function secondSlot(scenario: Scenario, timing: RoundTiming, { slot }: Pair): Change[] {
  const { message, loop, id } = timing.slots[slot];
  const path = copiesPath(scenario, message, loop, id);
  if (!path) return [];
  const label = timing.slots[slot].label.split(",")[0].toLowerCase();
  return [
    {
      family: "copies",
      text: `A second slot for the ${message === "other" ? `message "${timing.slots[slot].label}"` : label}`,
      short: "a second slot",
      edits: [{ path, value: 2 }],
      nodes: [],
    },
  ];
}

function copiesPath({ loops, round }: Scenario, message: string, loop: string | null, id: string): (string | number)[] | null {
  if (message === "other") {
    const index = round.messages.findIndex((candidate) => `other/${candidate.id}` === id);
    return index >= 0 && round.messages[index].copies === 1 ? ["round", "messages", index, "copies"] : null;
  }
  if (message === "beacon") return null;
  const own = loops.findIndex((candidate) => candidate.id === loop);
  if (own >= 0) {
    const part = message === "measurement" ? "sensor" : "actuator";
    return loops[own][part].copies === 1 ? ["loops", own, part, "copies"] : null;
  }
  const other = round.otherLoops.findIndex((candidate) => candidate.id === loop);
  const key = message === "measurement" ? "measurementCopies" : "commandCopies";
  return other >= 0 && round.otherLoops[other][key] === 1 ? ["round", "otherLoops", other, key] : null;
}

/** Every channel that no interferer reaches, where one in use is reached. */
function otherChannels({ floor, radio }: Scenario): Change[] {
  if (!floor || floor.links.type === "matrix" || floor.interferers.length === 0) return [];
  const bands = floor.interferers.map(({ name, centreMHz, bandwidthMHz }, i) => ({ name: name || `interferer ${i + 1}`, centreMHz, bandwidthMHz }));
  const plan = channelPlan(radio.phy, bands);
  const inUse = radio.channels.hopping === "none" ? channelsInUse(radio).slice(0, 1) : channelsInUse(radio);
  const disturbed = plan.filter(({ channel, overlaps }) => inUse.includes(channel) && overlaps.length > 0);
  const free = plan.filter(({ overlaps }) => overlaps.length === 0).map(({ channel }) => channel);
  if (disturbed.length === 0 || free.length === 0) return [];
  const by = [...new Set(disturbed.flatMap(({ overlaps }) => overlaps.map(({ name }) => name)))];
  const text = `Only ${free.length === 1 ? "the channel" : "channels"} that ${listWords(by)} ${by.length > 1 ? "do" : "does"} not reach, ${rangesWords(free)}`;
  return [{ family: "channels", text, short: "other channels", edits: [{ path: ["radio", "channels", "list"], value: free }], nodes: [] }];
}

/** One more node midway between the weak one and those that it hears best, or the sender. */
function relays(scenario: Scenario, timing: RoundTiming, ids: readonly number[], { slot, place }: Pair, node: number): Change[] {
  const { floor } = scenario;
  if (!floor || floor.links.type === "matrix" || floor.nodes.length >= 120) return [];
  const links = meanLinks(scenario, 0, timing.slots[slot].payloadBytes);
  const source = timing.slots[slot].from;
  const from = [...linksTo(links, node).map((link) => link.from), ...(source === null ? [] : [source])];
  const id = Array.from({ length: 999 }, (_, i) => i + 1).find((free) => !ids.includes(free)) ?? 999;
  const weak = floor.nodes[place];
  // The nearest of what is left helps little; of many good links the far ones show where a relay is missing.
  const candidates = [...new Set(from)].slice(0, PLACES - 1).concat(source !== null ? [source] : []);
  return [...new Set(candidates)].flatMap((other): Change[] => {
    const neighbour = floor.nodes[ids.indexOf(other)];
    const xM = Math.round((weak.xM + neighbour.xM) * 5) / 10;
    const yM = Math.round((weak.yM + neighbour.yM) * 5) / 10;
    if (Math.abs(weak.xM - neighbour.xM) + Math.abs(weak.yM - neighbour.yM) < 1) return [];
    const heightM = Math.round((weak.heightM + neighbour.heightM) * 5) / 10;
    const relay = { id, name: "Relay", xM, yM, heightM, txPowerDbm: null, wayPoints: [], outages: [] };
    return [
      {
        family: "relay",
        text: `A relay at ${xM} m across and ${yM} m down, midway between ${nodeWords(scenario, other)} and ${nodeWords(scenario, node)}`,
        short: "a relay midway to one of its neighbours or to the sender",
        edits: [{ path: ["floor", "nodes"], value: [...floor.nodes, relay] }],
        nodes: [node, other],
      },
    ];
  });
}
