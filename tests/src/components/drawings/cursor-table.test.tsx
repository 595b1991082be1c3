import { act, render } from "@testing-library/react";
import { describe, expect, it } from "vitest";
import { commandFact, measurementFact, recordsOf, roundAt } from "#src/components/drawings/cursor-facts.ts";
import { CursorTable } from "#src/components/drawings/cursor-table.tsx";
import { createPlotCursor, PlotCursorContext } from "#src/components/plots/plot-cursor.ts";
import { type MadeRun, madeRun } from "../../helpers/made-run.ts";

/** Rounds 2 to 4 are lost, of both messages. */
const made = madeRun({ durationS: 1, delivered: (round) => round < 2 || round > 4, events: [] });
const middleOf = (round: number) => (round + 0.5) * 0.025;

function withLoop(change: (loop: MadeRun["scenario"]["loops"][0]) => object): MadeRun["scenario"] {
  const [loop] = made.scenario.loops;
  return { ...made.scenario, loops: [{ ...loop, ...change(loop) }] };
}
const onLoss = (policy: MadeRun["scenario"]["loops"][0]["actuator"]["onLoss"]) =>
  withLoop((loop) => ({ actuator: { ...loop.actuator, onLoss: policy } }));

describe("what became of a message", () => {
  const records = recordsOf(made.result);
  const command = (round: number, scenario = made.scenario) => {
    const { word, more } = commandFact(scenario, made.result, records, middleOf(round));
    return `${word} ${more}`.trim();
  };
  it("tells delivered, lost, and how often in a row", () => {
    const told = [1, 2, 4].map((round) => measurementFact(made.result, records, middleOf(round)));
    expect(told.map(({ word, more }) => `${word} ${more}`.trim())).toEqual(["delivered", "lost", "lost, 3 in a row"]);
  });
  it("tells which command of the plan stands in for a lost one, and when the plan is over", () => {
    expect([1, 2, 4].map((round) => command(round))).toEqual(["delivered", "lost, plan 2 of 6", "lost, plan 4 of 6"]);
    const short = onLoss({ policy: "plan", length: 3, end: "zero" });
    expect([3, 4].map((round) => command(round, short))).toEqual(["lost, plan 3 of 3", "lost, plan over, zero"]);
  });
  it("tells what the actuator does without a plan", () => {
    expect(command(3, onLoss({ policy: "hold" }))).toBe("lost, last one held");
    expect(command(3, onLoss({ policy: "zero" }))).toBe("lost, zero");
  });
  it("does not claim a plan before any command arrived", () => {
    const never = madeRun({ durationS: 1, delivered: () => false });
    expect(commandFact(never.scenario, never.result, recordsOf(never.result), 0.1).more).toBe("none yet");
  });
  it("says so where the controller needs no message", () => {
    const direct = { ...made.result, rounds: { ...made.result.rounds, hasMeasurementSlot: false, hasCommandSlot: false } };
    expect(measurementFact(direct, records, 0.1).word).toBe("read directly");
    expect(commandFact(made.scenario, direct, records, 0.1).word).toBe("acts directly");
  });
  it("counts an instant on a boundary to the round that begins, and the end of the run to the last round", () => {
    expect([0, 0.025, 0.999, 1].map((timeS) => roundAt(made.result, timeS))).toEqual([0, 1, 39, 39]);
  });
});

describe("the table at the cursor", () => {
  it("follows the cursor with values in shown units", async () => {
    const cursor = createPlotCursor(1, middleOf(4));
    const { container } = render(
      <PlotCursorContext value={cursor}>
        <CursorTable scenario={made.scenario} result={made.result} />
      </PlotCursorContext>,
    );
    expect(container.textContent).toContain("At the cursor, 0.113");
    expect(container.textContent).toContain("−0.150\u2009\u2060m");
    expect(container.textContent).toContain("lost, plan 4 of 6");
    expect(container.textContent).toContain("4 of 40");
    cursor.moveTo(0);
    await act(() => new Promise((resolve) => requestAnimationFrame(() => resolve(undefined))));
    expect(container.textContent).toContain("At the cursor, 0.000");
    expect(container.textContent).toContain("0 of 40");
    expect(container.textContent).not.toContain("lost");
  });
});
