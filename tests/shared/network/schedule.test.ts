/** The slot table of any number of loops and messages. */
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { phyTiming } from "#shared/network/phy.ts";
import { occurs, type RoundTiming, roundTiming, type Slot } from "#shared/network/round.ts";
import { withEdits } from "#shared/network/savings.ts";
import { layOut } from "#shared/network/schedule.ts";
import type { Scenario, ScenarioInput } from "#shared/scenario/schema.ts";
import { scalar } from "../../helpers/scenarios.ts";

type OtherLoopInput = NonNullable<ScenarioInput["round"]["otherLoops"]>[number];
const other = (id: string, change: Partial<OtherLoopInput> = {}): OtherLoopInput => ({
  id,
  name: id,
  measurementBits: 32,
  commandBits: 16,
  ...change,
});
const shared = (loops: OtherLoopInput[], change?: (scenario: ScenarioInput) => void): Scenario =>
  scalar((scenario) => {
    scenario.round = { ...scenario.round, periodS: 0.05, otherLoops: loops };
    change?.(scenario);
  });

const slotOf = (timing: RoundTiming, id: string): Slot => {
  const slot = timing.slots.find((candidate) => candidate.id === id);
  if (!slot) throw new Error(`no slot ${id} among ${timing.slots.map(({ id }) => id).join(", ")}`);
  return slot;
};
const loopOf = (timing: RoundTiming, id: string) => {
  const loop = timing.loops.find((candidate) => candidate.loop === id);
  if (!loop) throw new Error(`no loop ${id}`);
  return loop;
};
const end = (scenario: Scenario): number => layOut(scenario, phyTiming(scenario.radio.phy)).end;

/** Pairs of slots that overlap in one of the first 64 x 64 rounds. */
function clashes({ slots, periodS }: RoundTiming): string[] {
  const found: string[] = [];
  slots.forEach((a, i) => {
    for (const b of slots.slice(i + 1)) {
      if (a.startS >= b.endS - 1e-12 || b.startS >= a.endS - 1e-12) continue;
      for (let round = 0; round < a.everyRounds * b.everyRounds + 64; round++) {
        if (occurs(a, round) && occurs(b, round)) {
          found.push(`${a.id} and ${b.id} in round ${round} of ${periodS} s`);
          break;
        }
      }
    }
  });
  return found;
}

describe("a round with several loops", () => {
  it("gives every message of every loop a slot of its own, named by its loop", () => {
    const timing = roundTiming(shared([other("arm"), other("belt", { placement: "actuator" }), other("crane", { placement: "sensor" })]));
    expect(timing.slots.map(({ id }) => id).sort()).toEqual(
      ["beacon", "main/measurement", "main/command", "arm/measurement", "arm/command", "belt/measurement", "crane/command"].sort(),
    );
    expect(timing.loops.map(({ loop }) => loop)).toEqual(["main", "arm", "belt", "crane"]);
    expect(clashes(timing)).toEqual([]);
  });

  it("puts slots whose rounds never meet in the same place, and only those", () => {
    const timing = roundTiming(
      shared([
        other("odd", { everyRounds: 2, firstRound: 1 }),
        other("even", { everyRounds: 2, firstRound: 0 }),
        other("third", { everyRounds: 3, firstRound: 1 }),
      ]),
    );
    expect(slotOf(timing, "odd/measurement").startS).toBe(slotOf(timing, "even/measurement").startS);
    // Every third round meets every second one sooner or later.
    const third = slotOf(timing, "third/measurement");
    expect(third.startS).toBeGreaterThanOrEqual(slotOf(timing, "odd/measurement").endS);
    expect(clashes(timing)).toEqual([]);
  });

  it("keeps a slot in its place in every round, so that each loop's latency is one constant", () => {
    const timing = roundTiming(shared([other("arm", { everyRounds: 4, firstRound: 2 })]));
    const arm = loopOf(timing, "arm");
    expect(arm.periodS).toBeCloseTo(0.2, 12);
    expect(arm.latencyS).toBe(0.05);
    const [own, second] = timing.ns.loops;
    expect(second).toEqual({ period: 200_000_000, sample: 100_000_000, act: 150_000_000 });
    expect(own).toEqual({ period: 50_000_000, sample: 0, act: 50_000_000 });
  });

  it("moves no loop's slots when another one's rounds leave its places free", () => {
    const alone = roundTiming(shared([other("even", { everyRounds: 2 })]));
    const both = roundTiming(shared([other("even", { everyRounds: 2 }), other("odd", { everyRounds: 2, firstRound: 1 })]));
    for (const id of ["main/measurement", "even/measurement"]) expect(slotOf(both, id).startS).toBe(slotOf(alone, id).startS);
  });

  it("sends a message of its own in two slots, the second behind everybody's first", () => {
    const timing = roundTiming(
      shared([other("arm", { measurementCopies: 2 })], (scenario) => {
        scenario.loops[0].sensor.copies = 2;
        scenario.round.messages = [{ id: "beat", name: "Heartbeat", payloadBytes: 2, copies: 2, everyRounds: 5, firstRound: 4 }];
      }),
    );
    const firsts = ["main/measurement", "arm/measurement"].map((id) => slotOf(timing, id));
    const seconds = ["main/measurement/2", "arm/measurement/2"].map((id) => slotOf(timing, id));
    expect(seconds.map(({ copy }) => copy)).toEqual([2, 2]);
    for (const second of seconds) for (const first of firsts) expect(second.startS).toBeGreaterThanOrEqual(first.endS - 1e-12);
    expect(slotOf(timing, "other/beat/2")).toMatchObject({ everyRounds: 5, firstRound: 4, label: "Heartbeat" });
    expect(clashes(timing)).toEqual([]);
  });

  it("computes from the end of the last measurement's slot on, with a second slot too", () => {
    const timing = roundTiming(
      shared([], ({ loops }) => {
        loops[0].sensor.copies = 2;
      }),
    );
    expect(loopOf(timing, "main").computeFromS).toBe(slotOf(timing, "main/measurement/2").endS);
  });
});

describe("computing", () => {
  it("and acts after the last of the command's slots, as either may bring it", () => {
    const timing = roundTiming(shared([other("twice", { commandCopies: 2 })]));
    expect(loopOf(timing, "twice").earliestActS).toBeCloseTo(slotOf(timing, "twice/command/2").endS, 12);
    expect(slotOf(timing, "twice/command/2").startS).toBeGreaterThanOrEqual(slotOf(timing, "twice/command").endS);
  });
  it("runs beside the slots of others, and the command waits for its end", () => {
    const timing = roundTiming(
      shared([other("arm", { computeS: 0.0001 })], ({ loops }) => {
        loops[0].controller.computeS = 0.004;
      }),
    );
    const own = loopOf(timing, "main");
    const beside = slotOf(timing, "arm/measurement");
    expect(beside.startS).toBeGreaterThanOrEqual(own.computeFromS - 1e-12);
    expect(beside.startS).toBeLessThan(own.computeUntilS);
    expect(slotOf(timing, "main/command").startS).toBeGreaterThanOrEqual(own.computeUntilS);
    // The other loop's computing ends earlier, so its command goes first.
    expect(slotOf(timing, "arm/command").startS).toBeLessThan(slotOf(timing, "main/command").startS);
  });

  it("may go on into the next round, where the command then comes before the measurements", () => {
    const timing = roundTiming(
      shared([], (scenario) => {
        scenario.loops[0].timing = { commandTravels: "next-round" };
        scenario.loops[0].controller.computeS = 0.03;
      }),
    );
    expect(timing.issues).toEqual([]);
    expect(slotOf(timing, "main/command").endS).toBeLessThanOrEqual(slotOf(timing, "main/measurement").startS + 1e-12);
    expect(loopOf(timing, "main")).toMatchObject({ commandDelay: 1, latencyS: 0.1 });
  });

  it("says so when it is not over before that slot of the next round", () => {
    const timing = roundTiming(
      shared([], (scenario) => {
        scenario.loops[0].timing = { commandTravels: "next-round" };
        scenario.loops[0].controller.computeS = 0.2;
      }),
    );
    expect(timing.issues.map(({ code }) => code)).toContain("computing-too-long");
  });

  it("of a loop that runs every third round lets its command travel in the round after, every third too", () => {
    const timing = roundTiming(shared([other("arm", { everyRounds: 3, firstRound: 2, commandTravels: "next-round" })]));
    expect(slotOf(timing, "arm/measurement")).toMatchObject({ everyRounds: 3, firstRound: 2 });
    expect(slotOf(timing, "arm/command")).toMatchObject({ everyRounds: 3, firstRound: 0 });
  });
});

// ---------------------------------------------------------------- any round

const rhythm = fc
  .integer({ min: 1, max: 6 })
  .chain((everyRounds) => fc.integer({ min: 0, max: everyRounds - 1 }).map((firstRound) => ({ everyRounds, firstRound })));
const copies = fc.integer({ min: 1, max: 2 });
const anyLoop = fc.record({
  rhythm,
  placement: fc.constantFrom("sensor", "apart", "actuator") as fc.Arbitrary<"sensor" | "apart" | "actuator">,
  measurementBits: fc.integer({ min: 1, max: 300 }),
  commandBits: fc.integer({ min: 1, max: 100 }),
  measurementCopies: copies,
  commandCopies: copies,
  computeS: fc.double({ min: 0, max: 0.01, noNaN: true }),
  sampleAtS: fc.double({ min: 0, max: 0.02, noNaN: true }),
  commandTravels: fc.constantFrom("same-round", "next-round") as fc.Arbitrary<"same-round" | "next-round">,
});
const anyMessage = fc.record({ rhythm, payloadBytes: fc.integer({ min: 0, max: 60 }), copies });
const anyRound = fc
  .record({
    phy: fc.constantFrom("ieee802154", "le-1m", "le-2m") as fc.Arbitrary<"ieee802154" | "le-1m" | "le-2m">,
    headerBytes: fc.integer({ min: 0, max: 12 }),
    periodS: fc.double({ min: 0.005, max: 0.3, noNaN: true }),
    hops: fc.integer({ min: 1, max: 6 }),
    transmissions: fc.integer({ min: 1, max: 4 }),
    relay: fc.constantFrom("alternating", "back-to-back") as fc.Arbitrary<"alternating" | "back-to-back">,
    slackSteps: fc.integer({ min: 0, max: 3 }),
    own: rhythm,
    ownCopies: fc.tuple(copies, copies),
    loops: fc.array(anyLoop, { maxLength: 5 }),
    messages: fc.array(anyMessage, { maxLength: 4 }),
  })
  .map(({ phy, headerBytes, own, ownCopies, loops, messages, ...round }) =>
    scalar((scenario) => {
      scenario.radio = { phy, headerBytes };
      scenario.loops[0].timing = own;
      scenario.loops[0].sensor.copies = ownCopies[0];
      scenario.loops[0].actuator.copies = ownCopies[1];
      scenario.round = {
        ...round,
        otherLoops: loops.map(({ rhythm, ...loop }, i) => ({ id: `l${i}`, name: `Loop ${i}`, ...rhythm, ...loop })),
        messages: messages.map(({ rhythm, ...message }, i) => ({ id: `m${i}`, name: `Message ${i}`, ...rhythm, ...message })),
      };
    }),
  );

describe("any round", () => {
  it("has no two slots of a common round that overlap", () => {
    fc.assert(
      fc.property(anyRound, (scenario) => {
        expect(clashes(roundTiming(scenario))).toEqual([]);
      }),
      { numRuns: 80, seed: 7 },
    );
  });

  it("computes after the last measurement and sends no command before computing has ended, or says that it would", () => {
    fc.assert(
      fc.property(anyRound, (scenario) => {
        const timing = roundTiming(scenario);
        for (const { loop, computeUntilS, computeFromS, commandDelay } of timing.loops) {
          const commands = timing.slots.filter((slot) => slot.loop === loop && slot.message === "command");
          const measurements = timing.slots.filter((slot) => slot.loop === loop && slot.message === "measurement");
          for (const { endS } of measurements) expect(computeFromS).toBeGreaterThanOrEqual(endS - 1e-12);
          for (const { startS } of commands) {
            const ready = commandDelay * timing.periodS + startS >= computeUntilS - 1e-12;
            expect(ready || timing.issues.some(({ code }) => code === "computing-too-long")).toBe(true);
          }
        }
      }),
      { numRuns: 80, seed: 8 },
    );
  });

  it("that does not fit gets exactly what each offered change promises", () => {
    let made = 0;
    fc.assert(
      fc.property(anyRound, (scenario) => {
        const before = end(scenario);
        for (const { change, edits, savesS } of roundTiming(scenario).savings) {
          if (change === "period" || edits.length === 0) continue;
          const saved = before - end(withEdits(scenario, edits));
          expect(saved).toBe(Math.round(savesS * 1e9));
          expect(saved).toBeGreaterThan(0);
          made++;
        }
      }),
      { numRuns: 80, seed: 9 },
    );
    expect(made).toBeGreaterThan(60);
  });

  it("fits in the period that is offered, and in none that is shorter than the shortest", () => {
    let made = 0;
    fc.assert(
      fc.property(anyRound, (scenario) => {
        const timing = roundTiming(scenario);
        const longer = timing.savings.find(({ change }) => change === "period");
        if (!longer) return;
        expect(roundTiming(withEdits(scenario, longer.edits)).fits).toBe(true);
        const shorter = withEdits(scenario, [{ path: ["round", "periodS"], value: timing.shortestPeriodS - 2e-9 }]);
        expect(roundTiming(shorter).fits).toBe(false);
        made++;
      }),
      { numRuns: 80, seed: 10 },
    );
    expect(made).toBeGreaterThan(10);
  });
});
