/** A stack of plots as a picture file: light colours, a title, twice the size. */

import type { RunResult } from "#shared/simulation/result.ts";
import { measureWith } from "./measure.ts";
import { FONT, paintTimeAxis, paintUnder } from "./paint-stack.ts";
import { lightPalette, pictureFonts } from "./palette.ts";
import type { View } from "./plot-cursor.ts";
import type { PlotSignal } from "./plot-signals.ts";
import { SignalLines } from "./signal-lines.ts";
import { layOutStack } from "./stack-layout.ts";

const SCALE = 2;
const MARGIN = 20;
const TITLE_HEIGHT = 52;

export interface PngInput {
  result: RunResult;
  signals: readonly PlotSignal[];
  view: View;
  width: number;
  title: string;
  /** Second line: what the picture is of. */
  note: string;
}

export async function stackPng({ result, signals, view, width, title, note }: PngInput): Promise<Blob> {
  const palette = lightPalette();
  await pictureFonts(palette.face);
  const layout = layOutStack(result, signals, width, measureWith(palette.face));
  const canvas = document.createElement("canvas");
  canvas.width = (layout.width + 2 * MARGIN) * SCALE;
  canvas.height = (layout.height + TITLE_HEIGHT + MARGIN) * SCALE;
  const ctx = canvas.getContext("2d");
  if (!ctx) throw new Error("This browser gives no canvas to draw on.");
  ctx.fillStyle = palette.panel;
  ctx.fillRect(0, 0, canvas.width, canvas.height);
  ctx.setTransform(SCALE, 0, 0, SCALE, MARGIN * SCALE, 0);
  ctx.fillStyle = palette.ink;
  ctx.font = `600 16px ${palette.face}`;
  ctx.fillText(title, 0, 28);
  ctx.font = FONT.axis(palette);
  ctx.fillStyle = palette.ink2;
  ctx.fillText(note.replaceAll("\u2060", ""), 0, 45);
  ctx.translate(0, TITLE_HEIGHT);
  const t = result.series.t;
  const frame = { layout, view, t, palette, pixel: 1 / SCALE };
  paintUnder(ctx, frame);
  paintTimeAxis(ctx, frame, true);
  // uPlot draws at the screen's pixel ratio; a plot of another size gives the file's.
  const enlarged = SCALE / (devicePixelRatio || 1);
  const holder = document.createElement("div");
  holder.style.cssText = "position:fixed;left:-99999px;top:0";
  document.body.append(holder);
  try {
    for (const lane of layout.plots) {
      const plotWidth = layout.right - layout.left;
      const size = { width: plotWidth * enlarged, height: lane.height * enlarged, scale: enlarged };
      const lines = new SignalLines(holder, { signal: lane.signal, t, view, palette, ...size });
      // uPlot draws in a microtask after it is made.
      await Promise.resolve();
      await new Promise((resolve) => setTimeout(resolve, 0));
      ctx.drawImage(lines.canvas, layout.left, lane.top, plotWidth, lane.height);
      lines.destroy();
    }
  } finally {
    holder.remove();
  }
  return new Promise((resolve, reject) => {
    canvas.toBlob((blob) => (blob ? resolve(blob) : reject(new Error("The browser could not write the picture."))), "image/png");
  });
}
