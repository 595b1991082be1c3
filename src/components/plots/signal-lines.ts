/** The lines of one plot, drawn by uPlot: the only door to it. Everything else of a plot is painted around it. */
import uPlot from "uplot";
import type { Palette } from "./palette.ts";
import type { View } from "./plot-cursor.ts";
import type { PlotSignal } from "./plot-signals.ts";
import { thin } from "./series-points.ts";

interface LineStyle {
  values: Float64Array;
  /** On the second run's times. */
  second: boolean;
  stair: boolean;
  colour: keyof Palette;
  width: number;
  dash: number[];
}

/** From back to front. */
function linesOf(signal: PlotSignal): LineStyle[] {
  const lines: LineStyle[] = [];
  if (signal.reference) {
    lines.push({ values: signal.reference.values, second: false, stair: signal.reference.stair, colour: "sand", width: 1.5, dash: [2, 3] });
  }
  if (signal.second) {
    const width = signal.command ? 1.25 : 1.75;
    lines.push({ values: signal.second.values, second: true, stair: signal.stair, colour: "second", width, dash: signal.command ? [4, 2] : [7, 3] });
  }
  const colour = signal.command && !signal.second ? "ink" : "tide";
  lines.push({ values: signal.values, second: false, stair: signal.stair, colour, width: signal.command ? 1.25 : 1.75, dash: [] });
  return lines;
}

const stairs = uPlot.paths.stepped?.({ align: 1 });
const straight = uPlot.paths.linear?.();

export interface LinesInput {
  signal: PlotSignal;
  t: Float64Array;
  view: View;
  palette: Palette;
  width: number;
  height: number;
  /** Line widths are multiplied by this (files are drawn larger). */
  scale: number;
}

function dataOf({ signal, t, view, width, scale }: LinesInput): uPlot.AlignedData {
  const lines = linesOf(signal);
  const columns = Math.round(width * (scale === 1 ? uPlot.pxRatio : 1));
  const of = (times: Float64Array, second: boolean) =>
    thin(
      times,
      lines.filter((line) => line.second === second).map(({ values }) => values),
      view.fromS,
      view.untilS,
      columns,
    );
  const own = of(t, false);
  if (!signal.second) return own as uPlot.AlignedData;
  // Two runs on their own times: one common column of times, gaps bridged.
  const [times, ...rows] = uPlot.join([own as uPlot.AlignedData, of(signal.second.t, true) as uPlot.AlignedData]);
  const ownRows = rows.slice(0, own.length - 1);
  const secondRows = rows.slice(own.length - 1);
  return [times, ...lines.map((line) => (line.second ? secondRows.shift() : ownRows.shift()))] as uPlot.AlignedData;
}

export class SignalLines {
  #plot: uPlot;
  #input: LinesInput;

  constructor(target: HTMLElement, input: LinesInput) {
    this.#input = input;
    const series = linesOf(input.signal).map((_, index): uPlot.Series => {
      const line = () => linesOf(this.#input.signal)[index] as LineStyle;
      const { width, dash, stair, colour } = line();
      return {
        scale: "y",
        stroke: () => this.#input.palette[colour],
        width: width * input.scale,
        dash: dash.map((piece) => piece * input.scale),
        points: { show: false },
        spanGaps: input.signal.second !== null,
        paths: stair ? stairs : straight,
      };
    });
    this.#plot = new uPlot(
      {
        width: input.width,
        height: input.height,
        padding: [0, 0, 0, 0],
        pxAlign: 0,
        legend: { show: false },
        cursor: { show: false },
        axes: [{ show: false }, { show: false }],
        scales: {
          x: { time: false, range: () => [this.#input.view.fromS, this.#input.view.untilS] },
          y: { range: () => [this.#input.signal.domain.lo, this.#input.signal.domain.hi] },
        },
        series: [{}, ...series],
      },
      dataOf(input),
      target,
    );
  }

  get canvas(): HTMLCanvasElement {
    return this.#plot.ctx.canvas;
  }

  /** Another result of the same signal, another zoom, size or theme. */
  update(input: LinesInput): void {
    const before = this.#input;
    this.#input = input;
    if (input.width !== before.width || input.height !== before.height) this.#plot.setSize({ width: input.width, height: input.height });
    this.#plot.setData(dataOf(input), true);
  }

  destroy(): void {
    this.#plot.destroy();
  }
}

/** Signals whose lines have the same number, order and style can go on in the same plot. */
export const lineShape = (signal: PlotSignal): string =>
  [signal.name, signal.command, signal.stair, signal.reference?.stair, signal.second !== null].join("|");
