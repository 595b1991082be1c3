/** What a good colleague would say, on small floors where it is known. */
import { describe, expect, it } from "vitest";
import type { Advice } from "#shared/network/advice.ts";
import { percent, rangesWords, wanted } from "#shared/network/advice-words.ts";
import { roundTiming } from "#shared/network/round.ts";
import { withEdits } from "#shared/network/savings.ts";
import { surveyFloods } from "#shared/network/survey.ts";
import type { Scenario, ScenarioInput } from "#shared/scenario/schema.ts";
import { flooded, line } from "../../helpers/floors.ts";

const adviceOn = (scenario: Scenario, rounds = 400): Advice[] => surveyFloods(scenario, { rounds, seed: 1 }).advice;
const kinds = (advice: readonly Advice[]): string[] => advice.map(({ kind }) => kind);
const of = (advice: readonly Advice[], kind: Advice["kind"]): Advice[] => advice.filter((entry) => entry.kind === kind);
const figure = ({ figures }: Advice, label: string): number => figures.find((entry) => entry.label === label)?.value ?? Number.NaN;

/** Nodes on a plan without obstacles, LE 1M at 0 dBm: links are sound up to about 60 m. */
const open = (places: [number, number][], change?: (scenario: ScenarioInput) => void): Scenario =>
  flooded((input) => {
    input.radio = { phy: "le-1m" };
    const nodes = places.map(([xM, yM], i) => ({ id: i + 1, xM, yM }));
    input.floor = { widthM: 400, depthM: 100, nodes, links: { type: "budget", pathLoss: { type: "log-distance", exponent: 3.2 } } };
    input.loops[0].nodes = { sensor: 1, controller: places.length, actuator: 1 };
    change?.(input);
  });

describe("advice", () => {
  it("has nothing to complain about where every link is sound and no node is alone", () => {
    const scenario = open([
      [20, 20],
      [40, 40],
      [40, 10],
      [60, 20],
    ]);
    expect(kinds(adviceOn(scenario, 4000))).toEqual([]);
  });

  it("says how many floods a claim takes when there are too few", () => {
    const [few] = of(adviceOn(line(2, 1)), "too-few");
    // 0.999^3688 is the first below 0.025 (success run).
    expect(figure(few, "floods needed")).toBe(3688);
    expect(few.text).toMatch(/^400 rounds are too few to show 99\.9 %: even without a loss it takes 3688 floods/);
  });

  it("counts the losses that there were into what a claim takes", () => {
    // 0.97 twice a flood: about one in 1100 lost, near the target.
    const scenario = line(2, 0.97, (input) => {
      input.round = { periodS: 0.05, hops: 1, transmissions: 2, slackSteps: 1 };
    });
    const [few] = of(adviceOn(scenario, 6000), "too-few");
    expect(few.text).toMatch(/even with no further loss than the \d of the weakest it takes \d+ floods/);
    expect(figure(few, "floods needed")).toBeGreaterThan(6000);
  });

  it("names the weak node with its links, and makes what helps worth its figures", () => {
    const scenario = open(
      [
        [10, 20],
        [50, 20],
        [114, 20],
      ],
      (input) => {
        input.round = { periodS: 0.05, hops: 2, transmissions: 1 };
        input.floor = { ...input.floor, widthM: 400, depthM: 100, nodes: input.floor?.nodes };
      },
    );
    const advice = adviceOn(scenario);
    const [weak] = advice;
    expect(weak).toMatchObject({ kind: "weak", severity: "problem" });
    expect(weak.text).toMatch(/95 % interval .* less than the 99\.9 % wanted\. Best links to it: from node 2/);
    const changes = of(advice, "change");
    expect(changes.length).toBeGreaterThan(1);
    const now = roundTiming(scenario);
    for (const change of changes) {
      expect(figure(change, "delivered then")).toBeGreaterThan(figure(change, "delivered now"));
      const changed = withEdits(scenario, change.edits);
      // Who makes the change gets what was promised: the same random numbers, so the same floods.
      const survey = surveyFloods(changed, { rounds: figure(change, "tried with"), seed: 1, withoutAdvice: true });
      const nodes = survey.slots
        .filter(({ id }) => id === change.slot || id === `${change.slot}/2`)
        .map(({ nodes }) => nodes.find(({ node }) => node === weak.nodes[0]));
      if (nodes.length === 1) expect(nodes[0]?.ratio).toBe(figure(change, "delivered then"));
      expect(figure(change, "time added to the round")).toBeCloseTo(now.reserveS - roundTiming(changed).reserveS, 12);
    }
    const relay = changes.find(({ text }) => text.startsWith("A relay"));
    expect(relay?.text).toMatch(/^A relay at \d+ m across and 20 m down, midway between node \d and node \d: /);
    expect(relay?.edits[0].value).toMatchObject([{ id: 1 }, { id: 2 }, { id: 3 }, { id: 4, name: "Relay", yM: 20 }]);
    expect(figure(relay as Advice, "time added to the round")).toBe(0);
  });

  it("says what no flood reaches", () => {
    const [cut] = adviceOn(
      line(3, 1, (input) => {
        if (input.floor?.links?.type === "matrix")
          input.floor.links.prr = [
            [0, 1, 0],
            [1, 0, 0],
            [0, 0, 0],
          ];
      }),
    );
    expect(cut).toMatchObject({ kind: "unreached", severity: "problem" });
    expect(cut.text).toMatch(/has 0 % of the .* No link reaches it\./);
  });

  it("names nodes that lie deeper than the hop bound, with the bound that would do", () => {
    const scenario = line(5, 1, (input) => {
      input.round = { periodS: 0.05, hops: 2, transmissions: 2 };
    });
    const [deep] = of(adviceOn(scenario), "deep");
    // From both ends: nodes 1 and 2 for what node 5 sends, nodes 4 and 5 for what node 1 sends.
    expect(deep).toMatchObject({ severity: "warning", nodes: [1, 2, 4, 5], edits: [{ path: ["round", "hops"], value: 4 }] });
    expect(of(adviceOn(withEdits(scenario, deep.edits)), "deep")).toEqual([]);
  });

  it("finds the relay without which another node is cut off, and no other", () => {
    const points = of(adviceOn(line(3, 1)), "single-point");
    expect(points.map(({ nodes }) => nodes)).toEqual([[2, 3, 1]]);
    expect(points[0].text).toMatch(/^Node 2 is a single point of failure: while it is out of service, node [13] has 0 % of the .* instead of 100 %/);
    const ring = flooded((input) => {
      const near = (i: number, j: number) => (Math.abs(i - j) === 1 || Math.abs(i - j) === 3 ? 1 : 0);
      const nodes = [0, 1, 2, 3].map((i) => ({ id: i + 1, xM: 5 * i, yM: 1 }));
      input.floor = { widthM: 50, depthM: 10, nodes, links: { type: "matrix", prr: nodes.map((_, i) => nodes.map((__, j) => near(i, j))) } };
      input.loops[0].nodes = { sensor: 1, controller: 3, actuator: 1 };
    });
    expect(of(adviceOn(ring), "single-point")).toEqual([]);
  });

  it("warns of the beacon's host where every round depends on it", () => {
    const needed = (yes: boolean) => adviceOn(line(2, 1, (input) => void Object.assign(input.round, { beacon: { payloadBytes: 4, needed: yes } })));
    expect(of(needed(true), "beacon-host")).toMatchObject([{ nodes: [2], slot: "beacon" }]);
    expect(of(needed(false), "beacon-host")).toEqual([]);
  });

  it("says that both messages are lost together where both hang on the beacon, and not where they do not", () => {
    const needed = (yes: boolean) =>
      adviceOn(
        line(2, 0.8, (input) => {
          input.round = { periodS: 0.05, hops: 1, transmissions: 1, beacon: { payloadBytes: 4, needed: yes } };
        }),
        1500,
      );
    const [shared] = of(needed(true), "shared-loss");
    expect(figure(shared, "both lost")).toBeGreaterThan(figure(shared, "if independent"));
    expect(of(needed(false), "shared-loss")).toEqual([]);
  });

  it("offers the channels that an interferer leaves free", () => {
    const scenario = open(
      [
        [10, 20],
        [40, 20],
      ],
      (input) => {
        input.radio = { phy: "ieee802154", channels: { list: [11, 12] } };
        input.floor = {
          ...input.floor,
          widthM: 400,
          depthM: 100,
          interferers: [
            {
              name: "Access point",
              xM: 40,
              yM: 21,
              powerDbm: 15,
              centreMHz: 2412,
              bandwidthMHz: 22,
              activity: { type: "periodic", onS: 3, offS: 3 },
            },
          ],
        };
      },
    );
    const advice = adviceOn(scenario);
    const channels = of(advice, "change").find(({ text }) => text.startsWith("Only channels"));
    expect(channels?.text).toMatch(/^Only channels that Access point does not reach, 15 to 26: node 2 would have 100 % of the measurements/);
    expect(channels?.edits).toEqual([{ path: ["radio", "channels", "list"], value: [15, 16, 17, 18, 19, 20, 21, 22, 23, 24, 25, 26] }]);
    // Three seconds on and off are far longer than a round of 50 ms.
    expect(kinds(advice)).toContain("spells");
  });

  it("tells what was tried in vain", () => {
    // The one link into the floor is either there or not; nothing but another way helps.
    const scenario = line(2, 0.9, (input) => {
      input.round = { periodS: 0.05, hops: 1, transmissions: 1 };
    });
    const [vain] = of(adviceOn(scenario), "no-help");
    expect(vain.text).toMatch(/^Tried for node [12], without much effect: a hop bound of 2 and one more slack step\./);
  });
});

describe("words of advice", () => {
  it("give a share enough digits and no more", () => {
    expect([0, 0.123, 0.9876, 0.99984, 0.99996, 1].map(percent)).toEqual(["0 %", "12.3 %", "98.76 %", "99.98 %", "over 99.99 %", "100 %"]);
    expect([0.9, 0.999, 0.99995].map(wanted)).toEqual(["90 %", "99.9 %", "99.995 %"]);
  });
  it("write channels as ranges", () => {
    expect(rangesWords([26, 11, 12, 13, 15, 16])).toBe("11 to 13, 15, 16 and 26");
  });
});
