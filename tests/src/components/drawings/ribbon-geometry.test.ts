import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { roundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { laneParts, ribbonScale, ribbonText, stairOf, WordPlacer } from "#src/components/drawings/ribbon-geometry.ts";
import { placeHeads } from "#src/components/drawings/round-ribbon.tsx";

const base = TEMPLATES[0]?.scenario as Scenario;
type Placement = Scenario["loops"][0]["controller"]["placement"];
const withPlacement = (placement: Placement, commandTravels: "same-round" | "next-round" = "same-round"): Scenario => ({
  ...base,
  loops: [{ ...base.loops[0], controller: { ...base.loops[0].controller, placement }, timing: { ...base.loops[0].timing, commandTravels } }],
});

describe("the loop below the round", () => {
  it("leads from sampling to acting without a gap, wherever the controller runs and whenever the command travels", () => {
    for (const placement of ["sensor", "apart", "actuator"] as const) {
      for (const travels of ["same-round", "next-round"] as const) {
        const timing = roundTiming(withPlacement(placement, travels));
        const parts = laneParts(timing, timing.loops[0]);
        expect(parts[0]?.fromS, `${placement}, ${travels}`).toBeCloseTo(timing.loops[0].sampleAtS, 9);
        expect(parts.at(-1)?.untilS, `${placement}, ${travels}`).toBeCloseTo(timing.loops[0].actAtS, 9);
        for (const [i, part] of parts.entries()) if (i > 0) expect(part.fromS).toBeCloseTo(parts[i - 1]?.untilS ?? Number.NaN, 9);
        expect(parts.filter(({ kind }) => kind === "computes")).toHaveLength(1);
        expect(parts.filter(({ kind }) => kind === "way")).toHaveLength(placement === "apart" ? 2 : 1);
      }
    }
  });
});

describe("the stairs of a slot", () => {
  const timing = roundTiming(base);
  const slot = timing.slots[1];
  if (!slot) throw new Error("The template has no measurement slot.");
  const scale = ribbonScale(timing, 12, 612);

  it("rise by one hop a step up to the hop bound and stay there", () => {
    const { treads, divisions } = stairOf(slot, 3, scale, { base: 100, height: 60 });
    expect(treads.map(({ hop, top }) => [hop, top])).toEqual([
      [1, 80],
      [2, 60],
      [3, 40],
    ]);
    expect(divisions).toHaveLength(slot.steps - 1);
    expect(divisions.slice(3).every(({ top }) => top === 40)).toBe(true);
  });
  it("begin after the wake-up, on the scale of the round", () => {
    const { path, wake, right } = stairOf(slot, 3, scale, { base: 100, height: 60 });
    expect(wake.until).toBeCloseTo(12 + (slot.floodStartS / timing.periodS) * 600, 6);
    expect(right).toBeCloseTo(12 + (slot.endS / timing.periodS) * 600, 6);
    expect(path.startsWith(`M${Math.round(wake.until * 100) / 100} 100`)).toBe(true);
  });
});

describe("a round that does not fit", () => {
  const timing = roundTiming({ ...base, round: { ...base.round, periodS: 0.02, hops: 5 } });
  it("goes on past the post", () => {
    const scale = ribbonScale(timing, 12, 612);
    expect(timing.fits).toBe(false);
    expect(scale.post).toBeLessThan(612);
    expect(scale.xOf(timing.slots.at(-1)?.endS ?? 0)).toBeGreaterThan(scale.post);
    expect(ribbonText(timing)).toContain("too long by");
  });
});

describe("words in the ribbon", () => {
  it("stand beside each other in one row where they fit, else in two or three, else numbers stand for them", () => {
    const heads = (gap: number) =>
      ["Beacon", "Measurement", "Command"].map((name, i) => ({ name, detail: "", x: 20 + i * gap, anchor: "start" as const, coral: false }));
    const width = () => 80;
    expect(placeHeads(heads(100), width, 12, 600)?.map(({ row }) => row)).toEqual([0, 0, 0]);
    expect(placeHeads(heads(50), width, 12, 600)?.map(({ row }) => row)).toEqual([0, 1, 0]);
    expect(placeHeads(heads(30), width, 12, 600)?.map(({ row }) => row)).toEqual([0, 1, 2]);
    expect(placeHeads(heads(30), width, 12, 110)).toBeNull();
  });
  it("never lie over each other or outside the picture", () => {
    const word = fc.record({
      x: fc.integer({ min: 0, max: 340 }),
      y: fc.integer({ min: 0, max: 60 }),
      width: fc.integer({ min: 10, max: 120 }),
      anchor: fc.constantFrom("start" as const, "middle" as const, "end" as const),
    });
    fc.assert(
      fc.property(fc.array(word, { maxLength: 12 }), (offers) => {
        const placer = new WordPlacer(0, 340);
        const boxes = offers.flatMap((offer) => {
          const placed = placer.place([offer]);
          if (!placed) return [];
          const from = placed.anchor === "start" ? placed.x : placed.anchor === "end" ? placed.x - placed.width : placed.x - placed.width / 2;
          return [{ from, until: from + placed.width, y: placed.y }];
        });
        const inside = boxes.every(({ from, until }) => from >= 0 && until <= 340);
        const apart = boxes.every((a, i) => boxes.every((b, j) => i <= j || a.until <= b.from || b.until <= a.from || Math.abs(a.y - b.y) >= 14));
        return inside && apart;
      }),
    );
  });
});
