/** What each possible change would save of a round, found by laying the round out again with it. */
import type { Scenario } from "#shared/scenario/schema.ts";
import { PHY_TIMINGS, phyTiming } from "./phy.ts";
import { layOut } from "./schedule.ts";

export interface Edit {
  path: (string | number)[];
  value: unknown;
}

export interface Saving {
  change: "transmissions" | "hops" | "bytes" | "phy" | "period" | "relay" | "slack" | "copies" | "placement" | "rhythm";
  text: string;
  savesS: number;
  /** The change, as new values in the scenario; empty when it is not one setting. */
  edits: Edit[];
}

function withValue(at: unknown, [key, ...rest]: (string | number)[], value: unknown): unknown {
  if (key === undefined) return value;
  if (Array.isArray(at)) return at.map((item, i) => (i === key ? withValue(item, rest, value) : item));
  const object = at as Record<string, unknown>;
  return { ...object, [key]: withValue(object[key], rest, value) };
}

/** The scenario with the edits of a saving or of advice made. */
export const withEdits = (scenario: Scenario, edits: readonly Edit[]): Scenario =>
  edits.reduce((changed, { path, value }) => withValue(changed, path, value) as Scenario, scenario);

/** endNs: where the slots end now; longer: the period that fits, and what it would add. Largest saving first. */
export function savingsOf(scenario: Scenario, endNs: number, longer: { periodS: number; addsS: number; text: string }): Saving[] {
  const { round, radio } = scenario;
  const savings: Saving[] = [];
  /** True when the change saves something. */
  const offer = (change: Saving["change"], text: string, edits: Edit[], fewerBytes = 0): boolean => {
    const changed = withEdits(scenario, edits);
    const saves = endNs - layOut(changed, phyTiming(changed.radio.phy), fewerBytes).end;
    if (saves > 0) savings.push({ change, text, savesS: saves / 1e9, edits });
    return saves > 0;
  };
  const inRound = (key: keyof Scenario["round"], value: unknown): Edit[] => [{ path: ["round", key], value }];

  const { transmissions: n, hops } = round;
  if (n > 1) offer("transmissions", `${n - 1} instead of ${n} transmissions per node`, inRound("transmissions", n - 1));
  if (hops > 1) offer("hops", `${hops - 1} instead of ${hops} hops`, inRound("hops", hops - 1));
  if (round.relay === "alternating" && n > 1) offer("relay", "back-to-back instead of alternating relay", inRound("relay", "back-to-back"));
  if (round.slackSteps > 0) offer("slack", "no slack steps", inRound("slackSteps", 0));
  // Every message carries the header: a byte less there is a byte less in each.
  if (radio.headerBytes > 0) offer("bytes", "one byte less in every message", [{ path: ["radio", "headerBytes"], value: radio.headerBytes - 1 }]);
  else offer("bytes", "one byte less in every message", [], 1);
  const faster = PHY_TIMINGS[PHY_TIMINGS.findIndex(({ phy }) => phy === radio.phy) + 1];
  if (faster) {
    // Channels are numbered otherwise by another standard: the new one starts with its own.
    const channels: Edit[] =
      (radio.phy === "ieee802154") === (faster.phy === "ieee802154") ? [] : [{ path: ["radio", "channels", "list"], value: [] }];
    offer("phy", faster.label, [{ path: ["radio", "phy"], value: faster.phy }, ...channels]);
  }

  const { controller, sensor, actuator, timing, name } = scenario.loops[0];
  if (sensor.copies > 1 || actuator.copies > 1) {
    const edits = ["sensor", "actuator"].map((part) => ({ path: ["loops", 0, part, "copies"], value: 1 }));
    offer("copies", "one slot for each message instead of two", edits);
  }
  if (controller.placement === "apart" && controller.acknowledgement !== "reported") {
    for (const placement of ["sensor", "actuator"] as const)
      offer("placement", `the controller with the ${placement}`, [{ path: ["loops", 0, "controller", "placement"], value: placement }]);
  }
  if (round.otherLoops.length > 0) {
    // In whichever rounds the others leave free, or it would save nothing.
    const half = (who: string, every: number, first: number, path: (string | number)[]) => {
      if (every > 32) return;
      const text = `${who} ${every === 1 ? "every second round" : `every ${every * 2} rounds`}`;
      for (const firstRound of [first, first + every]) {
        const edits = [
          { path: [...path, "everyRounds"], value: every * 2 },
          { path: [...path, "firstRound"], value: firstRound },
        ];
        if (offer("rhythm", text, edits)) return;
      }
    };
    half(name, timing.everyRounds, timing.firstRound, ["loops", 0, "timing"]);
    round.otherLoops.forEach((other, i) => {
      half(other.name, other.everyRounds, other.firstRound, ["round", "otherLoops", i]);
    });
  }
  savings.push({ change: "period", text: longer.text, savesS: longer.addsS, edits: inRound("periodS", longer.periodS) });
  return savings.sort((a, b) => b.savesS - a.savesS);
}
