import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { neatScale, timeScale } from "#src/components/plots/time-scale.ts";

describe("a neatline axis", () => {
  it("labels whole seconds and inks every other half second", () => {
    const { labels, inked } = timeScale(0, 10, 0.9);
    expect(labels.map(({ text }) => text)).toEqual(["0", "1", "2", "3", "4", "5", "6", "7", "8", "9", "10\u2009\u2060s"]);
    expect(inked.map(({ from, until }) => [from, until]).slice(0, 2)).toEqual([
      [0, 0.5],
      [1, 1.5],
    ]);
  });
  it("turns to milliseconds for a run of a hundredth of a second", () => {
    expect(timeScale(0, 0.01, 0.001).labels.at(-1)?.text).toBe("10\u2009\u2060ms");
  });
  it("keeps all decimals of a zoomed view, minus signs true", () => {
    expect(timeScale(4.18, 4.2, 0.004).labels.map(({ text }) => text)).toContain("4.185");
    expect(neatScale(-0.4, 0.4, 0.15, "m").labels[0]?.text).toBe("−0.4");
  });
  it("takes a slightly longer step when that divides the whole", () => {
    expect(neatScale(0, 0.025, 0.0017, "ms", 1000, 0.025).labels.map(({ text }) => text)).toEqual(["0", "5", "10", "15", "20", "25\u2009\u2060ms"]);
  });
  it("keeps labels at least as far apart as asked, and pieces inside the axis", () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 3600, noNaN: true }), fc.double({ min: 1e-3, max: 3600, noNaN: true }), (from, width) => {
        const least = width / 12;
        const { labels, inked } = timeScale(from, from + width, least);
        const apart = labels.every((label, i) => i === 0 || label.at - (labels[i - 1]?.at ?? 0) >= least * 0.999);
        return apart && labels.length <= 14 && inked.every((piece) => piece.from >= from && piece.until <= from + width && piece.until > piece.from);
      }),
    );
  });
});
