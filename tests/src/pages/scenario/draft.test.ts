import { describe, expect, it } from "vitest";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { change, cleanDraft, type Edit, endStep, type History, redo, startHistory, undo } from "#src/pages/scenario/model/draft.ts";
import { getAt, type Path } from "#src/pages/scenario/model/json-path.ts";
import { append, duplicate, move, moveSensorSignal, remove, removeSensorSignal } from "#src/pages/scenario/model/list-edits.ts";

const MASS: Path = ["loops", 0, "plant", "cartMassKg"];
const LENGTH: Path = ["loops", 0, "plant", "rodLengthM"];
const start = () => startHistory(cleanDraft(TEMPLATES[0].scenario));
const type = (path: Path, text: string, value: unknown): Edit => ({ kind: "type", path, text, value });
const edited = (history: History, ...edits: Edit[]) => edits.reduce(change, history);
const at = (history: History, path: Path) => getAt(history.present.json, path);

describe("editing a draft", () => {
  it("changes one setting and leaves the scenario that it began from as it was", () => {
    const before = structuredClone(TEMPLATES[0].scenario);
    const history = edited(start(), type(MASS, "2.5", 2.5));
    expect(at(history, MASS)).toBe(2.5);
    expect(TEMPLATES[0].scenario).toEqual(before);
  });

  it("keeps text that is no number beside the last value that was one", () => {
    const history = edited(start(), type(MASS, "2", 2), { kind: "mistype", path: MASS, text: "2.x", problem: "no number" });
    expect(at(history, MASS)).toBe(2);
    expect(history.present.typed["loops[0].plant.cartMassKg"]).toEqual({ text: "2.x", problem: "no number" });
  });

  it("takes one step for everything that is typed into a field in one go", () => {
    const history = edited(start(), type(MASS, "2", 2), type(MASS, "2.", 2), type(MASS, "2.5", 2.5));
    expect(history.past).toHaveLength(1);
    expect(at(undo(history), MASS)).toBe(1.2);
  });

  it("begins another step in another field, and after the field was left", () => {
    const twoFields = edited(start(), type(MASS, "2", 2), type(LENGTH, "0.4", 0.4), type(MASS, "3", 3));
    expect(twoFields.past).toHaveLength(3);
    const left = change(endStep(edited(start(), type(MASS, "2", 2))), type(MASS, "3", 3));
    expect(at(undo(left), MASS)).toBe(2);
  });

  it("does what was undone again, until something else is edited", () => {
    const undone = undo(edited(start(), type(MASS, "2", 2)));
    expect(at(redo(undone), MASS)).toBe(2);
    expect(redo(edited(undone, type(LENGTH, "0.4", 0.4))).future).toHaveLength(0);
    expect(at(redo(edited(undone, type(LENGTH, "0.4", 0.4))), MASS)).toBe(1.2);
  });

  it("brings typed text back with the step that it belonged to", () => {
    const history = endStep(edited(start(), { kind: "mistype", path: MASS, text: "a", problem: "no number" }));
    const fixed = change(history, type(MASS, "2", 2));
    expect(undo(fixed).present.typed["loops[0].plant.cartMassKg"]?.text).toBe("a");
  });

  it("remembers 200 steps and forgets the oldest beyond", () => {
    let history = start();
    for (let i = 1; i <= 205; i++) history = endStep(change(history, type(MASS, String(i), i)));
    expect(history.past).toHaveLength(200);
    let back = history;
    for (let i = 0; i < 300; i++) back = undo(back);
    expect(at(back, MASS)).toBe(5);
  });

  it("makes no step of an edit that changes nothing", () => {
    const history = start();
    expect(change(history, { kind: "set", path: MASS, value: 1.2 })).toBe(history);
  });

  it("forgets what was typed beside a signal's name when another signal is chosen, since the unit is another", () => {
    const bound: Path = ["limits", 0, "hi"];
    const history = edited(start(), type(bound, "10", 0.1745), { kind: "set", path: ["limits", 0, "signal"], value: "position" });
    expect(history.present.typed).toEqual({});
  });
});

describe("editing lists", () => {
  const second: Path = ["limits", 1, "hi"];
  const typedAt = (history: History) => Object.keys(history.present.typed);
  const withTyped = () => edited(start(), { kind: "mistype", path: second, text: "x", problem: "no number" });

  it("keeps typed text with its entry when entries before it go, come or move", () => {
    const history = withTyped();
    const { json } = history.present;
    expect(typedAt(change(history, remove(json, ["limits"], 0)))).toEqual(["limits[0].hi"]);
    expect(typedAt(change(history, duplicate(json, ["limits"], 0)))).toEqual(["limits[2].hi"]);
    expect(typedAt(change(history, move(json, ["limits"], 1, 3)))).toEqual(["limits[3].hi"]);
    expect(typedAt(change(history, move(json, ["limits"], 3, 0)))).toEqual(["limits[2].hi"]);
  });

  it("drops typed text with the entry that is removed", () => {
    const history = withTyped();
    expect(typedAt(change(history, remove(history.present.json, ["limits"], 1)))).toEqual([]);
  });

  it("appends and undoes in one step", () => {
    const history = start();
    const more = change(history, append(history.present.json, ["limits"], { type: "saturation", below: 0.5 }));
    expect(at(more, ["limits"])).toHaveLength(6);
    expect(at(undo(more), ["limits"])).toHaveLength(5);
  });

  it("keeps the filter's noise figures with their signals", () => {
    const crane = startHistory(cleanDraft(TEMPLATES[1].scenario));
    const noisy = change(crane, { kind: "set", path: ["loops", 0, "controller", "estimator", "measurementNoise"], value: [0.01, 0.02] });
    const moved = change(noisy, moveSensorSignal(noisy.present.json, 0, 1));
    expect(at(moved, ["loops", 0, "sensor", "signals", 0, "signal"])).toBe("angle");
    expect(at(moved, ["loops", 0, "controller", "estimator", "measurementNoise"])).toEqual([0.02, 0.01]);
    const removed = change(noisy, removeSensorSignal(noisy.present.json, 0));
    expect(at(removed, ["loops", 0, "controller", "estimator", "measurementNoise"])).toEqual([0.02]);
    expect(at(undo(removed), ["loops", 0, "controller", "estimator", "measurementNoise"])).toEqual([0.01, 0.02]);
  });
});
