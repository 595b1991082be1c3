import { describe, expect, it } from "vitest";
import { drawnExtentS } from "#src/components/plots/drawn-extent.ts";
import { madeRun } from "../../helpers/made-run.ts";

describe("the time that the plots show", () => {
  it("is the run's, or ends shortly after a run that ended early", () => {
    expect(drawnExtentS(madeRun().result)).toBe(10);
    const early = drawnExtentS(madeRun({ endedAtS: 1.3, ended: "diverged" }).result);
    expect(early).toBeGreaterThan(1.3);
    expect(early).toBeLessThan(1.3 * 1.25);
    expect(drawnExtentS(madeRun({ endedAtS: 9.8, ended: "track-end" }).result)).toBe(10);
  });
});
