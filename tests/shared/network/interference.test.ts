import { describe, expect, it } from "vitest";
import { Activity, overlapProbability } from "#shared/network/interference.ts";

const MS = 1e6;
const always = { fromS: 0, untilS: null };
const sends = (activity: Activity, start: number, length = 1) => activity.sendsIn(start * MS, (start + length) * MS);

describe("an interferer", () => {
  it("that always sends does so within its window only, and any overlap counts", () => {
    const activity = new Activity({ type: "always" }, { fromS: 0.1, untilS: 0.2 }, 1, "x");
    expect([98, 99.5, 150, 199.9, 200].map((ms) => sends(activity, ms))).toEqual([false, true, true, true, false]);
  });

  it("that sends periodically does so by its phase, and any overlap counts", () => {
    const activity = new Activity({ type: "periodic", onS: 0.002, offS: 0.008, phaseS: 0 }, always, 1, "x");
    expect([0, 1.9, 2, 5, 9, 9.1, 10, 12, 19.5].map((ms) => sends(activity, ms))).toEqual([true, true, false, false, false, true, true, false, true]);
    const later = new Activity({ type: "periodic", onS: 0.002, offS: 0.008, phaseS: 0.003 }, always, 1, "x");
    expect([0, 5.9, 6.1, 7, 8.9, 9].map((ms) => sends(later, ms))).toEqual([false, false, true, true, true, false]);
  });

  it("that sends periodically from a time on keeps its phase from t = 0", () => {
    const activity = new Activity({ type: "periodic", onS: 0.002, offS: 0.008, phaseS: 0 }, { fromS: 0.011, untilS: null }, 1, "x");
    expect([0, 10, 10.5, 12, 20].map((ms) => sends(activity, ms))).toEqual([false, false, true, false, true]);
  });

  const random = { type: "random", onShare: 0.25, meanOnS: 0.004 } as const;

  // Renewal theory: off at an instant with 1 - s, no on-time begins within the step with exp(-step / mean off); mean off = 12 ms.
  it.each([0.0001, 1, 10])("that sends at random overlaps a step of %d ms as often as exponential times do", (step) => {
    const floods = 40_000;
    let met = 0;
    const activity = new Activity(random, always, 3, "x");
    for (let i = 0; i < floods; i++) if (sends(activity, i * 97, step)) met++;
    const p = 1 - 0.75 * Math.exp(-step / 12);
    expect(Math.abs(met / floods - p)).toBeLessThan(4.5 * Math.sqrt((p * (1 - p)) / floods));
    expect(overlapProbability(random, step / 1000)).toBeCloseTo(p, 12);
  });

  it("that sends at random is on for its mean time", () => {
    const activity = new Activity(random, always, 4, "x");
    let [on, begins, last] = [0, 0, false];
    for (let i = 0; i < 400_000; i++) {
      const now = sends(activity, i * 0.1, 1e-6);
      if (now) on++;
      if (now && !last) begins++;
      last = now;
    }
    // Looked at every 0.1 ms, gaps and bursts shorter than that may be missed: 3 %.
    expect((on * 0.1) / begins / 4).toBeGreaterThan(0.9);
    expect((on * 0.1) / begins / 4).toBeLessThan(1.1);
    expect(Math.abs(on / 400_000 - 0.25)).toBeLessThan(0.02);
  });

  it("that sends at random in very short bursts keeps its share over a long time, quickly", () => {
    const activity = new Activity({ type: "random", onShare: 0.4, meanOnS: 1e-6 }, always, 5, "x");
    let on = 0;
    for (let i = 0; i < 20_000; i++) if (sends(activity, i * 500, 1e-6)) on++;
    expect(Math.abs(on / 20_000 - 0.4)).toBeLessThan(0.02);
  });

  it("that sends at random does so at the same times whoever asks, however seldom and in whichever order", () => {
    for (const meanOnS of [1e-6, 1e-4, 0.004]) {
      const asked = { ...random, meanOnS };
      const often = new Activity(asked, always, 6, "x");
      const all = Array.from({ length: 6000 }, (_, ms) => sends(often, ms, 0.001));
      const seldom = new Activity(asked, always, 6, "x");
      expect(all.filter((_, ms) => ms % 997 === 5)).toEqual(
        Array.from({ length: 6 }, (_, i) => sends(seldom, i * 997 + 5, 0.001)).concat(sends(seldom, 5987, 0.001)),
      );
      const back = [5000, 4000, 4001, 17, 5999, 0];
      expect(back.map((ms) => sends(seldom, ms, 0.001))).toEqual(back.map((ms) => all[ms]));
    }
  });

  it("that sends at random does so in other ways with another seed or name, never with a share of 0, always with 1", () => {
    const pattern = (seed: number, name: string, onShare = 0.25) => {
      const activity = new Activity({ ...random, onShare }, always, seed, name);
      return Array.from({ length: 200 }, (_, i) => Number(sends(activity, i * 7))).join("");
    };
    expect(pattern(1, "a")).toBe(pattern(1, "a"));
    expect(pattern(1, "a")).not.toBe(pattern(2, "a"));
    expect(pattern(1, "a")).not.toBe(pattern(1, "b"));
    expect(pattern(1, "a", 0)).not.toContain("1");
    expect(pattern(1, "a", 1)).not.toContain("0");
  });

  it("overlaps a step with its share of a period and the step's length", () => {
    expect(overlapProbability({ type: "always" }, 0.001)).toBe(1);
    expect(overlapProbability({ type: "periodic", onS: 0.002, offS: 0.008, phaseS: 0 }, 0.001)).toBeCloseTo(0.3, 15);
    expect(overlapProbability({ type: "periodic", onS: 0.002, offS: 0.008, phaseS: 0 }, 1)).toBe(1);
    expect(overlapProbability({ type: "random", onShare: 0, meanOnS: 1 }, 1)).toBe(0);
    expect(overlapProbability({ type: "random", onShare: 1, meanOnS: 1 }, 1)).toBe(1);
  });
});
