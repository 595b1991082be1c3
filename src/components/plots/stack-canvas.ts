/** The canvases of one stack: one below for everything painted, and the lines of each plot above it. */

import { rulerContext } from "./measure.ts";
import { paintUnder, titleWidth } from "./paint-stack.ts";
import type { Palette } from "./palette.ts";
import type { View } from "./plot-cursor.ts";
import { lineShape, SignalLines } from "./signal-lines.ts";
import type { PlotLane, StackLayout } from "./stack-layout.ts";

export interface StackInput {
  layout: StackLayout;
  t: Float64Array;
  palette: Palette;
}

export const measuredTitle = (palette: Pick<Palette, "face">, lane: PlotLane): number => {
  const ctx = rulerContext();
  return ctx ? titleWidth(ctx, palette, lane.signal) : lane.signal.label.length * 8;
};

export class StackCanvas {
  #host: HTMLElement;
  #canvas: HTMLCanvasElement;
  #lines: { shape: string; holder: HTMLElement; lines: SignalLines }[] = [];
  #input: StackInput | null = null;

  constructor(host: HTMLElement) {
    this.#host = host;
    this.#canvas = document.createElement("canvas");
    this.#canvas.className = "stack-ground";
    host.append(this.#canvas);
  }

  update(input: StackInput, view: View): void {
    this.#input = input;
    const { plots } = input.layout;
    const shapes = plots.map(({ signal }) => lineShape(signal));
    if (shapes.join() !== this.#lines.map(({ shape }) => shape).join()) this.#dropLines();
    this.draw(view);
  }

  draw(view: View): void {
    const input = this.#input;
    if (!input || input.layout.width <= 0) return;
    const { layout, palette, t } = input;
    const ratio = devicePixelRatio || 1;
    const [width, height] = [Math.round(layout.width * ratio), Math.round(layout.height * ratio)];
    if (this.#canvas.width !== width || this.#canvas.height !== height) {
      this.#canvas.width = width;
      this.#canvas.height = height;
      this.#canvas.style.width = `${layout.width}px`;
      this.#canvas.style.height = `${layout.height}px`;
    }
    const ctx = this.#canvas.getContext("2d");
    if (!ctx) return;
    ctx.setTransform(ratio, 0, 0, ratio, 0, 0);
    ctx.clearRect(0, 0, layout.width, layout.height);
    paintUnder(ctx, { layout, view, t, palette, pixel: 1 / ratio });
    layout.plots.forEach((lane, index) => {
      const lines = { signal: lane.signal, t, view, palette, width: layout.right - layout.left, height: lane.height, scale: 1 };
      const existing = this.#lines[index];
      if (existing) existing.lines.update(lines);
      const holder = existing?.holder ?? document.createElement("div");
      holder.style.cssText = `left:${layout.left}px;top:${lane.top}px;width:${lines.width}px;height:${lane.height}px`;
      if (existing) return;
      holder.className = "stack-lines";
      this.#host.append(holder);
      this.#lines.push({ shape: lineShape(lane.signal), holder, lines: new SignalLines(holder, lines) });
    });
  }

  #dropLines(): void {
    for (const { holder, lines } of this.#lines) {
      lines.destroy();
      holder.remove();
    }
    this.#lines = [];
  }

  destroy(): void {
    this.#dropLines();
    this.#canvas.remove();
  }
}
