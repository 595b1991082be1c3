import { act, render, screen, within } from "@testing-library/react";
import { userEvent } from "@testing-library/user-event";
import { describe, expect, it } from "vitest";
import { RunBench } from "#src/components/drawings/run-bench.tsx";
import { tellingInstant } from "#src/components/drawings/telling-instant.ts";
import { createPlotCursor } from "#src/components/plots/plot-cursor.ts";
import { type Making, madeRun } from "../../helpers/made-run.ts";

function show(making: Making = {}) {
  const made = madeRun(making);
  const cursor = createPlotCursor(made.result.durationS, 4.18);
  const view = render(<RunBench {...made} cursor={cursor} />);
  return { ...view, ...made, cursor, hand: screen.getByRole("slider", { name: "Time cursor of the plots" }) };
}
const frame = () => act(() => new Promise((resolve) => requestAnimationFrame(() => resolve(undefined))));

describe("the bench of a run", () => {
  it("names every limit with its decisive figure and how much of it was used", () => {
    show();
    const limits = within(screen.getByRole("list", { name: "Limits and what the run used of them" })).getAllByRole("listitem");
    expect(limits).toHaveLength(5);
    expect(limits[0]?.textContent).toContain("Angle within ±12°");
    expect(limits[0]?.textContent).toContain("8.82°");
    expect(within(limits[0] as HTMLElement).getByRole("img", { name: "74 percent of the limit used" })).toBeDefined();
    expect(limits[1]?.textContent).toContain("0.210\u2009\u2060m");
  });
  it("describes every picture in words", () => {
    show();
    expect(screen.getByRole("img", { name: /^Pendulum on cart at the cursor, to scale/ })).toBeDefined();
    expect(screen.getByRole("img", { name: /^One round of 25 ms: Beacon from 0 ms/ })).toBeDefined();
  });
  it("tells the instant and the values under the cursor to those who cannot see it", async () => {
    const { hand, cursor } = show();
    await frame();
    expect(hand.getAttribute("aria-valuetext")).toMatch(/^4\.180/);
    cursor.moveTo(0);
    await frame();
    expect(hand.getAttribute("aria-valuetext")).toMatch(/^0\.000/);
    expect(hand.getAttribute("aria-valuetext")).toContain("Position −0.150");
  });
  it("moves by a round with the arrows, by ten with shift, and to both ends", async () => {
    const { hand, cursor } = show();
    hand.focus();
    await userEvent.keyboard("{ArrowRight}");
    expect(cursor.timeS).toBeCloseTo(4.2, 9);
    await userEvent.keyboard("{ArrowRight}");
    expect(cursor.timeS).toBeCloseTo(4.225, 9);
    await userEvent.keyboard("{Shift>}{ArrowLeft}{/Shift}");
    expect(cursor.timeS).toBeCloseTo(3.975, 9);
    await userEvent.keyboard("{End}");
    expect(cursor.timeS).toBe(10);
    await userEvent.keyboard("{Home}");
    expect(cursor.timeS).toBe(0);
  });
  it("zooms around the cursor with the keys and shows the whole run again", async () => {
    const { hand, cursor } = show();
    hand.focus();
    await userEvent.keyboard("+");
    expect(cursor.view.untilS - cursor.view.fromS).toBeCloseTo(5, 9);
    await frame();
    await userEvent.click(screen.getByRole("button", { name: "Whole run" }));
    expect(cursor.view).toEqual({ fromS: 0, untilS: 10 });
  });
  it("goes to the end of a run that ended early, not beyond it", async () => {
    const { hand, cursor } = show({ endedAtS: 4.3, ended: "diverged" });
    hand.focus();
    await userEvent.keyboard("{End}");
    expect(cursor.timeS).toBe(4.3);
  });
  it("begins where the run tells most: the largest use of a limit after something happened", () => {
    const { result } = madeRun();
    expect(tellingInstant(result)).toBe(4.12);
    expect(tellingInstant({ ...result, limits: [] })).toBe(4);
    expect(tellingInstant({ ...result, limits: [], events: [] })).toBe(0);
  });
});
