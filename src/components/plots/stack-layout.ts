/** Where everything stands in a stack of plots, in CSS pixels. Depends on width and run, not on the zoom. */

import type { RunResult } from "#shared/simulation/result.ts";
import { drawnExtentS } from "./drawn-extent.ts";
import type { Measure } from "./measure.ts";
import type { View } from "./plot-cursor.ts";
import type { PlotSignal } from "./plot-signals.ts";
import { markedEvents, placeEvents } from "./stack-events.ts";
import { type LossRecord, lossRecord } from "./tape-pieces.ts";
import { formatTick } from "./units.ts";

export interface PlotLane {
  signal: PlotSignal;
  titleY: number;
  top: number;
  height: number;
}
export interface TapeLane {
  message: "measurement" | "command";
  symbol: string;
  record: LossRecord;
  top: number;
}
export interface StackLayout {
  width: number;
  height: number;
  narrow: boolean;
  /** Plot area, horizontally. */
  left: number;
  right: number;
  eventRows: number;
  marked: ReturnType<typeof markedEvents>;
  plots: PlotLane[];
  tapes: TapeLane[];
  /** Lower edge of the lowest plot. */
  plotsBottom: number;
  axisTop: number;
  /** Time that the axis shows: the run's, or less when it ended early. */
  durationS: number;
  endedAtS: number;
  ended: RunResult["ended"];
  periodS: number;
}

export const EVENT_ROW = 15;
export const TITLE = 24;
export const TAPE = 12;
export const NEAT = 5;
const BETWEEN = 4;

export function xOfTime(layout: StackLayout, view: View): (timeS: number) => number {
  const perSecond = (layout.right - layout.left) / (view.untilS - view.fromS);
  return (timeS) => layout.left + (timeS - view.fromS) * perSecond;
}

export const yOfValue = (lane: PlotLane, value: number): number => {
  const { lo, hi } = lane.signal.domain;
  return lane.top + lane.height * (1 - (value - lo) / (hi - lo));
};

/** The words at the right of a plot's lines. */
export const LIMIT_WORDS = { limit: "limit", saturates: "saturates", settle: "settled" } as const;
export const referenceWord = (narrow: boolean): string => (narrow ? "ref." : "reference");

export function layOutStack(result: RunResult, signals: readonly PlotSignal[], width: number, measure: Measure): StackLayout {
  const narrow = width < 480;
  const { rounds } = result;
  const tapes: Omit<TapeLane, "top">[] = [];
  if (rounds.hasMeasurementSlot) {
    tapes.push({ message: "measurement", symbol: "y", record: lossRecord(rounds.measurementDelivered, rounds.count) });
  }
  if (rounds.hasCommandSlot) tapes.push({ message: "command", symbol: "u", record: lossRecord(rounds.commandDelivered, rounds.count) });

  const tickWidth = Math.max(0, ...signals.flatMap(({ ticks, factor }) => ticks.map((tick) => measure(formatTick(tick * factor), "axis"))));
  const words = signals.flatMap(({ reference, limits }) => [
    ...(reference ? [referenceWord(narrow)] : []),
    ...limits.map(({ kind }) => LIMIT_WORDS[kind]),
  ]);
  words.push(...tapes.map(({ record }) => `${record.lostBefore[record.lostBefore.length - 1]} lost`));
  const wordWidth = Math.max(0, ...words.map((word) => measure(word, "axis")));
  const left = Math.max(narrow ? 32 : 40, Math.ceil(tickWidth) + 13);
  const right = Math.max(left + 60, width - Math.max(narrow ? 46 : 58, Math.ceil(wordWidth) + 10));

  const marked = markedEvents(
    result.events,
    result.endedAtS,
    signals.some(({ reference }) => reference?.stair),
  );
  const durationS = drawnExtentS(result);
  const whole = (timeS: number) => left + (timeS / durationS) * (right - left);
  const { rows } = placeEvents(marked, { xOf: whole, left, right, rows: narrow ? 3 : 2, measure: (text) => measure(text, "axis") });
  const eventRows = Math.max(1, rows);

  let y = 5 + eventRows * EVENT_ROW;
  const plots = signals.map((signal, index): PlotLane => {
    if (index > 0) y += BETWEEN;
    const height = Math.round((signal.command ? 70 : index === 0 ? 126 : signals.length > 5 ? 80 : 104) * (narrow ? 0.8 : 1));
    const lane = { signal, titleY: y + 17, top: y + TITLE, height };
    y += TITLE + height;
    return lane;
  });
  const plotsBottom = y;
  y += 22;
  const placed = tapes.map((tape): TapeLane => {
    const lane = { ...tape, top: y };
    y += 25;
    return lane;
  });
  const axisTop = placed.length > 0 ? y + 2 : y - 12;
  return {
    width,
    height: axisTop + 27,
    narrow,
    left,
    right,
    eventRows,
    marked,
    plots,
    tapes: placed,
    plotsBottom,
    axisTop,
    durationS,
    endedAtS: result.endedAtS,
    ended: result.ended,
    periodS: rounds.periodS,
  };
}
