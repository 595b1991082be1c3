import { act, render } from "@testing-library/react";
import { describe, expect, it, vi } from "vitest";
import { createPlotCursor, PlotCursorContext, useOnCursor } from "#src/components/plots/plot-cursor.ts";

const frame = () => act(() => new Promise((resolve) => requestAnimationFrame(() => resolve(undefined))));

function Picture({ onRender, onDraw }: { onRender: () => void; onDraw: (timeS: number) => void }) {
  onRender();
  useOnCursor(({ timeS }) => onDraw(timeS));
  return null;
}

describe("the cursor of a run", () => {
  it("stays inside the run and takes the zoomed view along", () => {
    const cursor = createPlotCursor(10, 4);
    cursor.zoomTo({ fromS: 3, untilS: 5 });
    cursor.moveTo(7);
    expect(cursor.view).toEqual({ fromS: 5, untilS: 7 });
    cursor.moveTo(99);
    expect(cursor.timeS).toBe(10);
    cursor.moveTo(Number.NaN);
    expect(cursor.timeS).toBe(10);
  });
  it("keeps the instant under the pointer where it is while zooming", () => {
    const cursor = createPlotCursor(10);
    cursor.zoomBy(0.5, 2);
    expect(cursor.view).toEqual({ fromS: 1, untilS: 6 });
    cursor.zoomBy(100);
    expect(cursor.view).toEqual({ fromS: 0, untilS: 10 });
  });
  it("never zooms closer than the shortest view", () => {
    const cursor = createPlotCursor(10, 5);
    cursor.setExtent(10, 0.025);
    for (let i = 0; i < 40; i++) cursor.zoomBy(0.5);
    expect(cursor.view.untilS - cursor.view.fromS).toBeCloseTo(0.025, 9);
  });
  it("shows the whole of the next run when it showed the whole of the one before, else keeps the zoom", () => {
    const cursor = createPlotCursor(10, 9);
    cursor.setExtent(20, 0.1);
    expect(cursor.view).toEqual({ fromS: 0, untilS: 20 });
    cursor.zoomTo({ fromS: 4, untilS: 6 });
    cursor.setExtent(12, 0.1);
    expect(cursor.view).toEqual({ fromS: 4, untilS: 6 });
    cursor.setExtent(3, 0.1);
    expect(cursor.view).toEqual({ fromS: 0, untilS: 3 });
    expect(cursor.timeS).toBe(3);
  });
  it("tells its listeners once a frame, and nothing is rendered again", async () => {
    const cursor = createPlotCursor(10);
    const drawn: number[] = [];
    const rendered = vi.fn();
    render(
      <PlotCursorContext value={cursor}>
        <Picture onRender={rendered} onDraw={(timeS) => drawn.push(timeS)} />
      </PlotCursorContext>,
    );
    for (let i = 1; i <= 60; i++) cursor.moveTo(i / 10);
    await frame();
    expect(drawn).toEqual([0, 6]);
    expect(rendered).toHaveBeenCalledTimes(1);
  });
});
