import { describe, expect, it } from "vitest";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { describeChanges } from "#src/pages/scenario/model/changes.ts";
import { type Path, setAt } from "#src/pages/scenario/model/json-path.ts";
import { mergeDrafts } from "#src/pages/scenario/model/merge.ts";

const base = TEMPLATES[0].scenario;
const changed = (...edits: [Path, unknown][]) => edits.reduce<unknown>((json, [path, value]) => setAt(json, path, value), base);
const plain = (text: string) => text.replaceAll("\u2009", " ").replaceAll("\u2060", "").replaceAll("\u2212", "-");
const say = (after: unknown) => describeChanges(base, after).map(({ label, before, after: now }) => `${label}: ${plain(before)} -> ${plain(now)}`);

describe("the list of changes", () => {
  it("is empty for two equal scenarios", () => {
    expect(describeChanges(base, structuredClone(base))).toEqual([]);
  });

  it("names each setting in the words and units of the form", () => {
    expect(
      say(
        changed(
          [["losses", "process", "command"], 0.112],
          [["loops", 0, "plant", "cartMassKg"], 1.3],
          [["round", "periodS"], 0.03],
          [["limits", 0, "hi"], Math.PI / 18],
        ),
      ),
    ).toEqual([
      "Cart mass: 1.2 kg -> 1.3 kg",
      "Round, period: 25 ms -> 30 ms",
      "Command lost, chance: 5 % -> 11.2 %",
      expect.stringMatching(/^Limit 1, highest: .*° -> 10°$/),
    ]);
  });

  it("says another form of a part as one change", () => {
    expect(say(changed([["loops", 0, "actuator", "onLoss"], { policy: "hold" }]))).toEqual(["Command lost: plan of 6 -> hold"]);
    const bursts = { type: "gilbert-elliott-shared", channel: { goodToBad: 0.05, badToGood: 0.45, lossInGood: 0, lossInBad: 1 } };
    expect(say(changed([["losses", "process"], bursts]))).toEqual(["Loss process: 5 %, each by itself -> in bursts for both, 10 %"]);
  });

  it("finds which entry of a list came or went", () => {
    const limits = base.limits;
    expect(say(changed([["limits"], limits.toSpliced(1, 1)]))).toEqual(["Limit 2: Position within ±0.3 m -> –"]);
    const push = { type: "step", channel: "cart", fromS: 7, untilS: null, size: 2 };
    expect(say(changed([["pushes"], [...base.pushes, push]]))).toEqual(["Push 2: – -> Step of 2 N on the cart, 7 s on"]);
  });

  it("counts a given sequence as one setting", () => {
    const given = { type: "given", measurement: [1, 1, 1], command: [1, 0, 1], then: "repeat" };
    const before = changed([["losses", "process"], given]);
    const after = setAt(before, ["losses", "process", "command"], [1, 0, 0]);
    expect(describeChanges(before, after).map(({ before: was, after: is }) => [was, is])).toEqual([["3 rounds, 1 lost", "3 rounds, 2 lost"]]);
  });
});

describe("putting two drafts together", () => {
  const mass: Path = ["loops", 0, "plant", "cartMassKg"];
  const loss: Path = ["losses", "process", "command"];
  it("takes from each what only that one changed", () => {
    const { json, clashes } = mergeDrafts(base, changed([mass, 2]), changed([loss, 0.2]));
    expect(clashes).toEqual([]);
    expect(json).toEqual(changed([mass, 2], [loss, 0.2]));
  });

  it("keeps mine where both changed the same setting, and says which", () => {
    const { json, clashes } = mergeDrafts(base, changed([mass, 2]), changed([mass, 3], [loss, 0.2]));
    expect(clashes).toEqual(["loops[0].plant.cartMassKg"]);
    expect(json).toEqual(changed([mass, 2], [loss, 0.2]));
  });

  it("does not mix two forms of one part", () => {
    const hold = changed([["loops", 0, "actuator", "onLoss"], { policy: "hold" }]);
    const longer = changed([["loops", 0, "actuator", "onLoss", "length"], 8]);
    expect(mergeDrafts(base, hold, longer)).toEqual({ json: hold, clashes: ["loops[0].actuator.onLoss"] });
  });
});
