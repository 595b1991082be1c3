import { describe, expect, it } from "vitest";
import { surveyFloods } from "#shared/network/survey.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { placeLabels } from "#src/components/plan/label-places.ts";
import { frameFor, panned, snapped, toPoint, toSpot, wholeView, zoomed } from "#src/components/plan/plan-view.ts";
import { exampleFloor } from "#src/pages/floor/model/example-floor.ts";
import { readMatrix } from "#src/pages/floor/model/matrix-text.ts";
import { rescaled } from "#src/pages/floor/model/picture-scale.ts";
import { pictureProblem } from "#src/pages/floor/panels/picture-panel.tsx";

const size = { widthM: 72, depthM: 40 };
const frame = frameFor(908, 620, size);

describe("the view of a plan", () => {
  it("fills the frame's width with the whole plan, to scale", () => {
    const view = wholeView(frame, size);
    expect(view.scale).toBeCloseTo(12, 9);
    expect(toPoint(view, frame, { xM: 72, yM: 40 })).toEqual({ x: frame.left + 864, y: frame.top + 480 });
  });

  it("zooms around the pointer: what lies under it stays", () => {
    const at = { x: 500, y: 300 };
    const before = toSpot(wholeView(frame, size), frame, at);
    const after = toSpot(zoomed(wholeView(frame, size), frame, size, 3, at), frame, at);
    expect(after.xM).toBeCloseTo(before.xM, 9);
    expect(after.yM).toBeCloseTo(before.yM, 9);
  });

  it("never leaves the plan, however far it is panned or zoomed out", () => {
    const near = zoomed(wholeView(frame, size), frame, size, 4, { x: 400, y: 200 });
    const far = panned(near, frame, size, 1e5, -1e5);
    expect(far.xM).toBe(0);
    expect(far.yM).toBeCloseTo(40 - frame.height / far.scale, 9);
    expect(zoomed(near, frame, size, 1e-3, { x: 0, y: 0 })).toEqual(wholeView(frame, size));
  });

  it("snaps places to 0.1 m inside of the plan", () => {
    expect(snapped({ xM: 12.3456, yM: -3 }, size)).toEqual({ xM: 12.3, yM: 0 });
    expect(snapped({ xM: 100, yM: 39.99 }, { widthM: 72.08, depthM: 40 })).toEqual({ xM: 72.08, yM: 40 });
  });

  it("puts no label over a mark or another label, and leaves out what has no room", () => {
    const at = { x: 100, y: 100 };
    const bounds = { left: 0, top: 0, right: 300, bottom: 300 };
    const asked = Array.from({ length: 6 }, () => ({ at, width: 60, clear: 11 }));
    const places = placeLabels(asked, [{ at, half: 11 }], bounds);
    expect(places.filter(Boolean).length).toBe(4);
    expect(new Set(places.filter(Boolean).map((place) => `${place?.dx} ${place?.dy}`)).size).toBe(4);
  });
});

describe("reception ratios as text", () => {
  const square = [
    [0, 0.9, 0.5],
    [0.8, 0, 1],
    [0.4, 1, 0],
  ];
  it.each([
    ["tabs", "0\t0.9\t0.5\n0.8\t0\t1\n0.4\t1\t0"],
    ["commas", "0,0.9,0.5\n0.8,0,1\n0.4,1,0\n"],
    ["decimal commas", "0 0,9 0,5\n0,8 0 1\n0,4 1 0"],
    ["semicolons and decimal commas", "0;0,9;0,5\r\n0,8;0;1\r\n0,4;1;0"],
    ["per cent", "– 90 50\n80 – 100\n40 100 –"],
    ["names of nodes", "from,1,2,3\n1,0,0.9,0.5\n2,0.8,0,1\n3,0.4,1,0"],
  ])("are read with %s", (_, text) => {
    expect(readMatrix(text, 3)).toEqual({ ok: true, prr: square });
  });

  it("say how many rows are needed, and which value is out of range", () => {
    expect(readMatrix("0 1\n1 0", 3)).toEqual({ ok: false, problem: expect.stringContaining("2 rows entered; the floor has 3 nodes") });
    expect(readMatrix("0 250\n1 0", 2)).toEqual({ ok: false, problem: expect.stringContaining("The largest value is 250") });
    expect(readMatrix("0 -1\n1 0", 2)).toEqual({ ok: false, problem: expect.stringContaining("Row 1, column 2 is -1") });
    expect(readMatrix("0 1 1\n1 0", null)).toEqual({ ok: false, problem: expect.stringContaining("Row 1 has 3 values") });
  });
});

describe("a picture under the plan", () => {
  const picture = { id: "0f8fad5b-d9cb-469f-a165-70867728950e", xM: 2, yM: 1, metresPerPixel: 0.02, opacity: 0.5 };
  it("is scaled by two points and their distance; the first point stays", () => {
    const done = rescaled(picture, { xM: 10, yM: 5 }, { xM: 14, yM: 5 }, 8);
    expect(done).toEqual({ ok: true, picture: { ...picture, metresPerPixel: 0.04, xM: -6, yM: -3 } });
    expect(rescaled(picture, { xM: 10, yM: 5 }, { xM: 10, yM: 5 }, 8)).toEqual({ ok: false });
  });

  it("is refused before it is sent when it is too large or no picture", () => {
    expect(pictureProblem({ name: "hall.png", size: 12_000_000, type: "image/png" })).toMatch(/12.*MB; at most 10/);
    expect(pictureProblem({ name: "hall.pdf", size: 1000, type: "application/pdf" })).toMatch(/no PNG or JPEG/);
    expect(pictureProblem({ name: "hall.jpg", size: 1000, type: "image/jpeg" })).toBeNull();
  });
});

describe("a pasted table", () => {
  it("takes a row of names for names, and a word among numbers for a mistake", () => {
    expect(readMatrix("A B C\n0 0.9 0.5\n0.8 0 0.7\n0.6 0.5 0", 3)).toMatchObject({ ok: true });
    expect(readMatrix("0 0.9 x\n0.8 0 0.7\n0.6 0.5 0", 3)).toEqual({ ok: false, problem: "Row 1, column 3: \u201cx\u201d is no number." });
  });
});

describe("the first arrangement", () => {
  it("delivers, and in a hall takes the wave over several hops", () => {
    for (const [widthM, depthM, least] of [
      [20, 12, 1],
      [60, 30, 3],
      [72, 40, 3],
    ] as const) {
      const scenario = exampleFloor(structuredClone(TEMPLATES[0].scenario), "Hall", widthM, depthM);
      const { slots } = surveyFloods(scenario, { rounds: 300, seed: 1, withoutAdvice: true });
      const deepest = Math.max(...slots.flatMap(({ nodes }) => nodes.map(({ medianStep }) => medianStep ?? 99)));
      expect(deepest, `${widthM} x ${depthM} m`).toBeGreaterThanOrEqual(least);
      for (const { delivered } of slots) expect(delivered.ratio, `${widthM} x ${depthM} m`).toBeGreaterThan(0.98);
    }
  });
});
