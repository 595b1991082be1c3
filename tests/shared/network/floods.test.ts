import { describe, expect, it } from "vitest";
import { NO_SLOT, NOT_RECEIVED, RADIO_OFF } from "#shared/network/flood.ts";
import { drawFloods, FloodProcess, type FloodRecord, senders } from "#shared/network/floods.ts";
import { meanLinks } from "#shared/network/link-table.ts";
import { receptionRatio } from "#shared/network/reception.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { at, type FloorInput, floorOf, type Setting, scenarioOn, timingOf, within } from "./floors.ts";

const links = { type: "budget" as const, pathLoss: { type: "log-distance" as const, exponent: 3.95, lossAt1mDb: 40 } };
/** A 3 x 4 grid of 40 m: neighbours hear each other, others hardly. */
const grid = at(...Array.from({ length: 12 }, (_, i): [number, number] => [20 + 40 * (i % 4), 20 + 40 * Math.floor(i / 4)])) ?? [];
const shadowed = { ...links, shadowing: { sigmaDb: 4, correlationM: 10, seed: 9 } };
const faded = { ...shadowed, fading: { kDb: 3, coherence: { type: "speed" as const, leastMPerS: 0.5 } } };
const nodes = { sensor: 1, controller: 6, actuator: 12 };
const hopping = { channels: { list: [15, 20, 26], hopping: "per-step" as const } };
const jammer = {
  xM: 60,
  yM: 20,
  powerDbm: 15,
  centreMHz: 2480,
  bandwidthMHz: 20,
  activity: { type: "random" as const, onShare: 0.4, meanOnS: 0.01 },
};

const draw = (scenario: Scenario, rounds = 200, seed = 1) => drawFloods(scenario, timingOf(scenario), rounds, seed);
const scenario = (floor: FloorInput, rest: Partial<Setting> = {}) => scenarioOn({ floor, nodes, radio: hopping, round: { hops: 5 }, ...rest });
const slotNames = (one: Scenario) => timingOf(one).slots.map(({ id }) => id);

/** First steps of a node in a slot, round by round. */
function column(one: Scenario, record: FloodRecord, slot: string, node: number): number[] {
  const index = slotNames(one).indexOf(slot);
  const place = record.nodes.indexOf(node);
  if (index < 0 || place < 0) throw new Error(`no slot ${slot} or node ${node}`);
  return Array.from({ length: record.rounds }, (_, k) => record.firstStep[(k * record.slots + index) * record.nodes.length + place] ?? -1);
}
const missed = (steps: number[]) => steps.filter((step) => step > NO_SLOT).length;
/** Share of floods that a node did not receive, over all slots and rounds. */
function missShare({ nodes: ids, firstStep }: FloodRecord, node: number): number {
  const place = ids.indexOf(node);
  const steps = Array.from(firstStep).filter((_, i) => i % ids.length === place);
  return steps.filter((step) => step === NOT_RECEIVED).length / steps.length;
}

describe("floods of a run", () => {
  const everything = scenario(floorOf(grid, { links: faded, interferers: [jammer] }));

  it("are the same for the same seed, round by round or all at once, and others for another", () => {
    const record = draw(everything);
    expect(draw(everything)).toEqual(record);
    expect(draw(everything, 200, 2).firstStep).not.toEqual(record.firstStep);
    const process = new FloodProcess(everything, timingOf(everything), 1);
    for (let round = 0; round < 200; round++) {
      process.next();
      const row = record.firstStep.subarray(round * process.firstStep.length, (round + 1) * process.firstStep.length);
      expect(process.firstStep).toEqual(row);
    }
    expect(process.txNs).toEqual(record.txNs);
    // Losses, hops and late receptions do occur: the comparisons above and below mean something.
    const steps = new Set(record.firstStep);
    expect([0, 1, 2, 3, 4, NOT_RECEIVED].every((step) => steps.has(step))).toBe(true);
  });

  it("do not depend on the order of the list of nodes", () => {
    const turned = scenario(floorOf([...grid].reverse(), { links: faded, interferers: [jammer] }));
    const [a, b] = [draw(everything), draw(turned)];
    expect(b.nodes).toEqual([...a.nodes].reverse());
    for (const slot of slotNames(everything))
      for (const node of a.nodes) expect(column(turned, b, slot, node)).toEqual(column(everything, a, slot, node));
    expect([...b.rxNs].reverse()).toEqual([...a.rxNs]);
  });

  it("do not change when a node is added out of reach", () => {
    const far = { id: 5, xM: 1900, yM: 1900 };
    const renumbered = grid.map((node) => ({ ...node, id: node.id * 10 }));
    const tens = { sensor: 10, controller: 60, actuator: 120 };
    const plan = { links: faded, interferers: [jammer], widthM: 2000, depthM: 2000 };
    const [few, more] = [
      scenario(floorOf(renumbered, plan), { nodes: tens }),
      scenario(floorOf([...renumbered.slice(0, 4), far, ...renumbered.slice(4)], plan), { nodes: tens }),
    ];
    const [a, b] = [draw(few), draw(more)];
    for (const slot of slotNames(few)) for (const node of a.nodes) expect(column(more, b, slot, node)).toEqual(column(few, a, slot, node));
    expect(missed(column(more, b, "beacon", 5))).toBe(200);
  });

  it("of a message do not change when another message is added behind it", () => {
    const more = scenario(floorOf(grid, { links: faded, interferers: [jammer] }), {
      round: { hops: 5, messages: [{ id: "heartbeat", name: "Heartbeat", from: 3, payloadBytes: 8 }] },
    });
    const [a, b] = [draw(everything), draw(more)];
    expect(b.slots).toBe(a.slots + 1);
    // Random interferers and fading are the floor's: the new slot lies behind those of its round.
    for (const slot of slotNames(everything))
      for (const node of a.nodes) expect(column(more, b, slot, node)).toEqual(column(everything, a, slot, node));
  });

  it("of a message do not change when another message finds room before it, channels hopping", () => {
    const slow = (one: Scenario): Scenario => {
      one.loops[0].controller.computeS = 0.012;
      one.round.periodS = 0.08;
      return one;
    };
    const messages = [{ id: "heartbeat", name: "Heartbeat", from: 3, payloadBytes: 1 }];
    const floor = floorOf(grid, { links: faded, interferers: [jammer] });
    const few = slow(scenario(floor));
    const more = slow(scenario(floor, { round: { hops: 5, messages } }));
    expect(slotNames(more)).toEqual([...slotNames(few).slice(0, 2), "other/heartbeat", slotNames(few)[2]]);
    const [a, b] = [draw(few), draw(more)];
    for (const slot of slotNames(few)) for (const node of a.nodes) expect(column(more, b, slot, node)).toEqual(column(few, a, slot, node));
  });

  it("do not depend on the order of the interferers, nor on one that reaches nobody", () => {
    const named = [
      { ...jammer, name: "Dock" },
      { ...jammer, name: "Office", xM: 150, yM: 90, activity: { ...jammer.activity, meanOnS: 1e-6, onShare: 0.2 } },
    ];
    const faint = { ...jammer, name: "Yard", powerDbm: -60, xM: 199, yM: 199 };
    const of = (interferers: typeof named) => scenario(floorOf(grid, { links: faded, interferers }));
    const record = draw(of(named));
    expect(draw(of([named[1], named[0]]))).toEqual(record);
    expect(draw(of([faint, ...named]))).toEqual(record);
    expect(draw(of([named[0]]))).not.toEqual(record);
  });

  it("of two slots of one message are drawn by themselves", () => {
    const twice = scenario(floorOf(grid, { links: shadowed }));
    twice.loops[0].sensor.copies = 2;
    const record = draw(twice);
    const id = `${twice.loops[0].id}/measurement`;
    const both = record.nodes.filter((node) => column(twice, record, id, node).join() !== column(twice, record, `${id}/2`, node).join());
    expect(both.length).toBeGreaterThan(3);
  });

  it("are drawn only in rounds in which the slot occurs", () => {
    const some = scenario(floorOf(grid, { links }), {
      round: { hops: 5, messages: [{ id: "slow", name: "Slow", from: 3, payloadBytes: 8, everyRounds: 3, firstRound: 1 }] },
    });
    const steps = column(some, draw(some, 9), "other/slow", 3);
    expect(steps).toEqual([NO_SLOT, 0, NO_SLOT, NO_SLOT, 0, NO_SLOT, NO_SLOT, 0, NO_SLOT]);
  });
});

describe("a node out of service", () => {
  /** A line whose nodes hear their neighbours only, for certain. */
  const line = (outages: { fromS: number; untilS?: number }[], node = 2) =>
    scenario(
      floorOf(
        (at([0, 0], [0, 1], [0, 2], [0, 3]) ?? []).map((one) => (one.id === node ? { ...one, outages } : one)),
        {
          links: { type: "matrix", prr: [0, 1, 2, 3].map((i) => [0, 1, 2, 3].map((j) => (Math.abs(i - j) === 1 ? 1 : 0))) },
        },
      ),
      { nodes: { sensor: 1, controller: 4, actuator: 2 }, round: { beacon: null, hops: 3, periodS: 0.05 } },
    );

  it("neither hears nor relays in slots that its outage touches", () => {
    const one = line([{ fromS: 0.1, untilS: 0.2 }]);
    const record = draw(one, 6);
    const id = `${one.loops[0].id}/measurement`;
    expect(column(one, record, id, 2)).toEqual([1, 1, RADIO_OFF, RADIO_OFF, 1, 1]);
    expect(column(one, record, id, 3)).toEqual([2, 2, NOT_RECEIVED, NOT_RECEIVED, 2, 2]);
    expect(column(one, record, id, 1)).toEqual([0, 0, 0, 0, 0, 0]);
  });

  it("is off for the whole slot when the outage begins or ends within it, and not when it only borders on it", () => {
    const [slot] = timingOf(line([])).slots;
    const { startS = 0, endS = 0 } = slot ?? {};
    const first = (fromS: number, untilS: number) => column(line([{ fromS, untilS }]), draw(line([{ fromS, untilS }]), 1), "main/measurement", 2)[0];
    expect(first(endS - 1e-6, 1)).toBe(RADIO_OFF);
    expect(first(endS, 1)).toBe(1);
    expect(first(0, startS + 1e-6)).toBe(RADIO_OFF);
  });

  it("starts no flood: nobody receives, and who is on listens in vain", () => {
    const one = line([{ fromS: 0.05 }], 1);
    const record = draw(one, 2);
    for (const node of [1, 2, 3, 4]) expect(column(one, record, "main/measurement", node)[1]).toBe(RADIO_OFF);
    const timing = timingOf(one);
    const slots = timing.slots.reduce((sum, slot) => sum + slot.floodEndS - slot.startS, 0);
    const before = draw(one, 1);
    const place = record.nodes.indexOf(3);
    // The command of round 1 is flooded by node 4 as ever; the measurement's slot costs node 3 all of its listening.
    const listening = ((record.rxNs[place] ?? 0) - (before.rxNs[place] ?? 0)) / 1e9;
    expect(listening).toBeGreaterThan((timing.slots[0]?.floodEndS ?? 0) - (timing.slots[0]?.startS ?? 0));
    expect(listening).toBeLessThan(slots);
    // Node 1 itself spends nothing any more.
    expect(record.rxNs[record.nodes.indexOf(1)]).toBe(before.rxNs[record.nodes.indexOf(1)]);
  });
});

describe("a needed beacon", () => {
  const prr = [
    [0, 0.5, 1],
    [1, 0, 1],
    [1, 0, 0],
  ];
  const one = (needed: boolean, outages: { fromS: number; untilS: number }[] = []) =>
    scenarioOn({
      // Node 1 hosts the beacon, and node 2 hears it in every other round; node 3 is told nothing by node 2.
      floor: floorOf(
        (at([0, 0], [0, 1], [0, 2]) ?? []).map((node) => (node.id === 1 ? { ...node, outages } : node)),
        { links: { type: "matrix", prr }, beaconNode: 1 },
      ),
      nodes: { sensor: 2, controller: 3, actuator: 2 },
      round: { beacon: { payloadBytes: 4, needed }, hops: 1, transmissions: 1 },
    });

  it("silences for the rest of the round who missed it", () => {
    const record = draw(one(true), 400);
    const beacon = column(one(true), record, "beacon", 2);
    const measurement = column(one(true), record, "main/measurement", 2);
    expect(missed(beacon)).toBeGreaterThan(20);
    beacon.forEach((step, k) => {
      expect(measurement[k]).toBe(step === NOT_RECEIVED ? RADIO_OFF : 0);
    });
    // Without its source, the measurement reaches nobody in those rounds.
    const atController = column(one(true), record, "main/measurement", 3);
    beacon.forEach((step, k) => {
      expect(atController[k]).toBe(step === NOT_RECEIVED ? RADIO_OFF : 1);
    });
  });

  it("that is not needed silences nobody", () => {
    const record = draw(one(false), 400);
    expect(missed(column(one(false), record, "beacon", 2))).toBeGreaterThan(20);
    expect(column(one(false), record, "main/measurement", 2).every((step) => step === 0)).toBe(true);
  });

  it("is missed by all when its host is down, and by nobody's host otherwise", () => {
    const down = one(true, [{ fromS: 0.05, untilS: 0.1 }]);
    const record = draw(down, 3);
    for (const node of [1, 2, 3]) for (const slot of slotNames(down)) expect(column(down, record, slot, node)[1]).toBe(RADIO_OFF);
    expect(column(down, record, "beacon", 1)).toEqual([0, RADIO_OFF, 0]);
  });
});

describe("radio-on time of a run", () => {
  it("is that of every slot's steps, by hand", () => {
    const prr = [
      [0, 1],
      [1, 0],
    ];
    const one = scenarioOn({
      floor: floorOf(at([0, 0], [0, 1]), { links: { type: "matrix", prr } }),
      nodes: { sensor: 1, controller: 2, actuator: 2 },
      round: { beacon: null, hops: 1, transmissions: 2, wakeUpS: 0.0003 },
      radio: { turnaroundS: 0.0002 },
    });
    one.loops[0].controller.placement = "actuator";
    const { airtimeS = 0 } = timingOf(one).slots[0] ?? {};
    const record = draw(one, 10);
    const air = Math.round(airtimeS * 1e9);
    // The source sends in steps 1 and 3, node 2 in steps 2 and 4.
    expect([...record.txNs]).toEqual([20 * air, 20 * air]);
    expect([...record.rxNs]).toEqual([10 * (300_000 + 2 * (air + 200_000) + air - 2 * air), 10 * (300_000 + 3 * (air + 200_000) + air - 2 * air)]);
  });
});

it("who sends in a step follows from the steps of first reception", () => {
  const one = scenario(floorOf(grid, { links }), { round: { hops: 3, transmissions: 2 } });
  expect(senders(one, timingOf(one), 0, [1, 0, NOT_RECEIVED, RADIO_OFF, 5])).toEqual([[1], [0], [1], [0], [], [4]]);
});

describe("two relays that send at once", () => {
  const at1m = { ...links, pathLoss: { ...links.pathLoss, exponent: 4 }, captureDb: 3, concurrencyPenaltyDb: 3 };
  const dbm = (distanceM: number) => -40 - 40 * Math.log10(distanceM);
  const noiseDbm = -104.989700043;
  const mw = (level: number) => 10 ** (level / 10);

  /** Source in the middle of the left side, relays A and B, receiver to their right; only step 2 can reach the receiver. */
  function reached(relayB: [number, number], receiverXM: number): { share: number; ratio: (signalMw: number) => number } {
    const one = scenarioOn({
      floor: floorOf(at([20, 100], [50, 100], relayB, [receiverXM, 100]), { links: at1m }),
      nodes: { sensor: 1, controller: 4, actuator: 2 },
      round: { beacon: null, hops: 2, transmissions: 1, periodS: 0.1 },
    });
    const slot = timingOf(one).slots.find(({ id }) => id === "main/measurement");
    const steps = column(one, draw(one, ROUNDS), "main/measurement", 4);
    for (const relay of [2, 3]) expect(column(one, draw(one, 50), "main/measurement", relay).every((step) => step === 1)).toBe(true);
    expect(steps.every((step) => step === 2 || step === NOT_RECEIVED)).toBe(true);
    const bytes = one.radio.headerBytes + (slot?.payloadBytes ?? 0);
    const ratio = (signalMw: number) => receptionRatio("ieee802154", one.radio.reception, bytes, signalMw / mw(noiseDbm));
    return { share: steps.filter((step) => step === 2).length / ROUNDS, ratio };
  }
  const ROUNDS = 20_000;

  it("at equal power reach as one of them would: the sum, less the penalty", () => {
    // B stands as far from the receiver as A, and hears the source.
    const { share, ratio } = reached([51.6, 88], 92);
    const [a, b] = [mw(dbm(42)), mw(dbm(Math.sqrt(40.4 ** 2 + 12 ** 2)))];
    const p = ratio((a + b) * mw(-3));
    expect(p).toBeGreaterThan(0.05);
    expect(p).toBeLessThan(0.99);
    expect(Math.abs(share - p)).toBeLessThan(within(p, ROUNDS) + 1e-5);
  });

  it("reach by the stronger alone when it is captured: the sum, without penalty", () => {
    const { share, ratio } = reached([28, 100], 94);
    const [a, b] = [mw(dbm(44)), mw(dbm(66))];
    const p = ratio(a + b);
    expect(p).toBeGreaterThan(0.05);
    expect(p).toBeLessThan(0.99);
    expect(Math.abs(share - p)).toBeLessThan(within(p, ROUNDS) + 1e-5);
  });
});

it("a longer packet over the same link is lost more often, each by its own length", () => {
  const messages = [1, 100].map((payloadBytes) => ({ id: `bytes-${payloadBytes}`, name: "Report", from: 1, to: [2], payloadBytes }));
  const places = at([10, 100], [56.9, 100], [57, 101]);
  const one = scenario(floorOf(places, { links }), {
    nodes: { sensor: 1, controller: 2, actuator: 3 },
    radio: { channels: { list: [26], hopping: "none" } },
    round: { hops: 1, transmissions: 1, messages, periodS: 0.05 },
  });
  const ROUNDS = 4000;
  const record = draw(one, ROUNDS);
  const prr = messages.map(({ payloadBytes }) => meanLinks(one, 0, payloadBytes).find(({ from, to }) => from === 1 && to === 2)?.prr ?? -1);
  messages.forEach(({ id }, i) => {
    const share = column(one, record, `other/${id}`, 2).filter((step) => step === 1).length / ROUNDS;
    expect(Math.abs(share - (prr[i] ?? -1)), id).toBeLessThan(within(prr[i] ?? 0, ROUNDS) + 1e-4);
  });
  expect((prr[0] ?? 0) - (prr[1] ?? 0)).toBeGreaterThan(0.2);
});

it("a node at rest hears a moving one fade as fast as that one moves, and another at rest for ever alike", () => {
  const still = { ...links, fading: { kDb: -40, coherence: { type: "speed" as const, leastMPerS: 0 } } };
  // To and fro by 10 cm: the distance hardly changes, the fading does.
  const wayPoints = Array.from({ length: 199 }, (_, i) => ({ atS: 0.1 * (i + 1), xM: 47 + 0.1 * ((i + 1) % 2), yM: 100 }));
  const changes = (moves: boolean) => {
    const [first, second, third] = at([10, 100], [47, 100], [190, 100]) ?? [];
    if (!first || !second || !third) throw new Error("three nodes");
    const one = scenario(floorOf([first, moves ? { ...second, wayPoints } : second, third], { links: still }), {
      nodes: { sensor: 1, controller: 2, actuator: 3 },
      radio: { channels: { list: [26], hopping: "none" } },
      round: { hops: 1, transmissions: 1, periodS: 0.05 },
    });
    const steps = column(one, draw(one, 390, 4), "main/measurement", 2);
    return steps.filter((step, k) => k > 0 && step !== steps[k - 1]).length;
  };
  expect(changes(false)).toBe(0);
  expect(changes(true)).toBeGreaterThan(60);
});

describe("hopping", () => {
  it("meets a blocked channel only in its steps", () => {
    // Channel 26 is drowned everywhere; two nodes, one transmission each, per-step over 26 and 11.
    const blocked = { xM: 5, yM: 5, powerDbm: 40, centreMHz: 2480, bandwidthMHz: 2 };
    const one = scenarioOn({
      floor: floorOf(at([5, 0], [5, 10], [8, 8]), { links, interferers: [blocked] }),
      radio: { channels: { list: [26, 11], hopping: "per-step" } },
      round: { beacon: null, hops: 1, transmissions: 1 },
    });
    const steps = column(one, draw(one, 6), "main/measurement", 2);
    // Step 1 is on channel 26 in rounds 0, 2, 4 (place 0), on 11 in the others; there is no second try.
    expect(steps).toEqual([NOT_RECEIVED, 1, NOT_RECEIVED, 1, NOT_RECEIVED, 1]);
  });
});

// Common practice, no source: what the trade says of flooding, looked at on seeded floors.
describe("what the trade says of floods (common practice, no source)", () => {
  const rounds = 400;

  it("an interferer hurts near itself only", () => {
    const hall = (interferers: FloorInput["interferers"]) => draw(scenario(floorOf(grid, { links: shadowed, interferers }), { radio: {} }), rounds);
    const near = { xM: 22, yM: 22, powerDbm: -20, centreMHz: 2480, bandwidthMHz: 2 };
    const [quiet, loud] = [hall([]), hall([near])];
    expect(missShare(loud, 1)).toBeGreaterThan(missShare(quiet, 1) + 0.2);
    // 90 m away and more; node 1's own floods still reach everybody there.
    for (const node of [7, 8, 11, 12]) expect(Math.abs(missShare(loud, node) - missShare(quiet, node))).toBeLessThan(0.02);
  });

  it("a moved node changes nothing while it stays covered", () => {
    const hall = (xM: number, yM: number) => {
      const one = scenario(floorOf([...grid, { id: 13, xM, yM }], { links, widthM: 200 }), { round: { hops: 5, transmissions: 3 }, radio: {} });
      const { slots, reserveS } = timingOf(one);
      return { record: draw(one, rounds), slots, reserveS };
    };
    const [here, there] = [hall(40, 40), hall(120, 80)];
    expect(there.slots).toEqual(here.slots);
    for (let node = 1; node <= 13; node++) {
      expect(missShare(here.record, node)).toBeLessThan(0.01);
      expect(missShare(there.record, node)).toBeLessThan(0.01);
    }
  });

  it("more transmissions buy reliability, with time and energy", () => {
    const weak = { ...links, pathLoss: { ...links.pathLoss, exponent: 4.12 } };
    const made = [1, 2, 3].map((transmissions) => {
      const one = scenario(floorOf(grid, { links: weak }), { round: { hops: 5, transmissions, periodS: 0.1 }, radio: {} });
      const record = draw(one, rounds);
      const misses = record.nodes.reduce((sum, node) => sum + missShare(record, node), 0) / record.nodes.length;
      const energy = record.txNs.reduce((sum, v) => sum + v, 0) + record.rxNs.reduce((sum, v) => sum + v, 0);
      return { misses, energy, steps: timingOf(one).slots[0]?.steps ?? 0 };
    });
    const [one, two, three] = made;
    if (!one || !two || !three) throw new Error("three cases");
    expect(one.misses).toBeGreaterThan(0.02);
    expect(two.misses).toBeLessThan(one.misses / 2);
    expect(three.misses).toBeLessThan(two.misses);
    expect([two.steps - one.steps, three.steps - two.steps]).toEqual([2, 2]);
    expect(two.energy).toBeGreaterThan(one.energy);
    expect(three.energy).toBeGreaterThan(two.energy);
  });
});
