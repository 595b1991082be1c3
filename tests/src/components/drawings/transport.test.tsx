import { act, render, screen } from "@testing-library/react";
import { userEvent } from "@testing-library/user-event";
import { afterEach, describe, expect, it, vi } from "vitest";
import { speedText, Transport, usualSpeed } from "#src/components/drawings/transport.tsx";
import { createPlotCursor, type PlotCursor, PlotCursorContext } from "#src/components/plots/plot-cursor.ts";
import { madeRun } from "../../helpers/made-run.ts";

const { result } = madeRun();
const show = (cursor: PlotCursor, run = result) =>
  render(
    <PlotCursorContext value={cursor}>
      <Transport result={run} note="every 50 ms" />
    </PlotCursorContext>,
  );
const original = window.matchMedia;
afterEach(() => {
  window.matchMedia = original;
  vi.useRealTimers();
});

describe("the speed of the playback", () => {
  it("is true for a run of ten seconds, and a round multiple that takes about ten seconds for others", () => {
    expect([10, 20, 4].map(usualSpeed)).toEqual([1, 1, 1]);
    expect([0.01, 1, 120, 3600].map((length) => speedText(usualSpeed(length)))).toEqual(["1/1000", "1/10", "10", "500"]);
    for (const length of [0.01, 0.5, 3, 60, 600, 3600]) {
      const seconds = length / usualSpeed(length);
      expect(seconds, `${length} s`).toBeGreaterThan(4);
      expect(seconds, `${length} s`).toBeLessThan(40);
    }
  });
});

describe("the playback", () => {
  it("moves the cursor with the time of the frames, and stops at the end of the run", async () => {
    vi.useFakeTimers({ toFake: ["requestAnimationFrame", "cancelAnimationFrame", "performance"] });
    const cursor = createPlotCursor(10, 0);
    show(cursor);
    act(() => screen.getByRole("button", { name: /^Play/ }).click());
    act(() => vi.advanceTimersByTime(50));
    expect(screen.getByRole("button", { name: "Pause" })).toBeDefined();
    act(() => vi.advanceTimersByTime(2000));
    expect(cursor.timeS).toBeGreaterThan(1.9);
    expect(cursor.timeS).toBeLessThan(2.1);
    act(() => vi.advanceTimersByTime(9000));
    expect(cursor.timeS).toBe(10);
    expect(cursor.playing).toBe(false);
  });
  it("begins anew when it is started at the end", () => {
    vi.useFakeTimers({ toFake: ["requestAnimationFrame", "cancelAnimationFrame", "performance"] });
    const cursor = createPlotCursor(10, 10);
    show(cursor);
    act(() => screen.getByRole("button", { name: /^Play/ }).click());
    act(() => vi.advanceTimersByTime(200));
    expect(cursor.timeS).toBeLessThan(0.5);
  });
  it("goes to the start", async () => {
    const cursor = createPlotCursor(10, 4);
    show(cursor);
    await userEvent.click(screen.getByRole("button", { name: "To the start" }));
    expect(cursor.timeS).toBe(0);
  });
  it("goes on in steps, and never by itself, for people who asked for less motion", async () => {
    window.matchMedia = (media) => Object.assign(original(media), { matches: media.includes("reduce") });
    const cursor = createPlotCursor(10, 0);
    show(cursor);
    const button = screen.getByRole("button", { name: "Go on by 10 rounds" });
    const frame = () => act(() => new Promise((resolve) => requestAnimationFrame(() => resolve(undefined))));
    await userEvent.click(button);
    await frame();
    expect(cursor.timeS).toBeCloseTo(0.25, 9);
    await frame();
    await userEvent.click(button);
    await frame();
    expect(cursor.timeS).toBeCloseTo(0.5, 9);
    expect(cursor.playing).toBe(false);
    expect(screen.queryByRole("radio")).toBeNull();
  });
});
