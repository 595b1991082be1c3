/** Paints all of a stack but its signal lines: rock, limits, zero lines, words, events, loss tapes and the time axis. */
import { withUnit } from "#src/lib/format.ts";
import { hatch } from "./hatch.ts";
import type { Palette } from "./palette.ts";
import type { View } from "./plot-cursor.ts";
import type { PlotLimit } from "./plot-signals.ts";
import { indexAt } from "./series-points.ts";
import { type PlacedEvent, placeEvents } from "./stack-events.ts";
import { EVENT_ROW, LIMIT_WORDS, NEAT, type PlotLane, referenceWord, type StackLayout, TAPE, xOfTime, yOfValue } from "./stack-layout.ts";
import { lossTicks, lostInView, type TapePiece, tapePieces } from "./tape-pieces.ts";
import { timeScale } from "./time-scale.ts";
import { formatNumber, formatTick } from "./units.ts";

export interface Frame {
  layout: StackLayout;
  view: View;
  /** Times of the run, for limits that follow a reference. */
  t: Float64Array;
  palette: Palette;
  /** Device pixel, CSS pixels. */
  pixel: number;
}

export const FONT = {
  axis: (palette: Pick<Palette, "face">) => `400 12px ${palette.face}`,
  title: (palette: Pick<Palette, "face">) => `400 13px ${palette.face}`,
  strong: (palette: Pick<Palette, "face">) => `600 13px ${palette.face}`,
  symbol: (palette: Pick<Palette, "face">) => `italic 400 13px ${palette.face}`,
};

/** Canvas fonts draw a word joiner as nothing or as a box, depending on the face; it has no work to do there. */
const plain = (text: string): string => text.replaceAll("\u2060", "");

type Ctx = CanvasRenderingContext2D;

function line(ctx: Ctx, x1: number, y1: number, x2: number, y2: number): void {
  ctx.beginPath();
  ctx.moveTo(x1, y1);
  ctx.lineTo(x2, y2);
  ctx.stroke();
}

function write(ctx: Ctx, text: string, x: number, y: number, font: string, colour: string, align: CanvasTextAlign = "left"): void {
  ctx.font = font;
  ctx.fillStyle = colour;
  ctx.textAlign = align;
  ctx.fillText(plain(text), x, y);
}

/** Moves words apart that would touch, from top to bottom, and keeps them near their lines. */
function spread<T extends { y: number }>(words: T[], least: number): T[] {
  words.sort((a, b) => a.y - b.y);
  for (let i = 1; i < words.length; i++) {
    const above = words[i - 1] as T;
    const word = words[i] as T;
    if (word.y - above.y < least) word.y = above.y + least;
  }
  return words;
}

/** The edge of a limit as a polyline in pixels: straight, or following the reference. */
function limitEdge(frame: Frame, lane: PlotLane, limit: PlotLimit, offset: number): { x: number; y: number }[] {
  const { layout, view, t } = frame;
  const xOf = xOfTime(layout, view);
  const from = Math.max(limit.fromS, view.fromS);
  const until = Math.min(limit.untilS, view.untilS);
  if (until <= from) return [];
  const reference = limit.ofError ? lane.signal.reference : null;
  if (!reference) {
    const y = yOfValue(lane, offset);
    return [
      { x: xOf(from), y },
      { x: xOf(until), y },
    ];
  }
  const first = indexAt(t, from);
  const last = indexAt(t, until);
  const step = Math.max(1, Math.floor((last - first) / 4000));
  const edge: { x: number; y: number }[] = [];
  const add = (x: number, y: number) => {
    const before = edge[edge.length - 1];
    if (reference.stair && before && before.y !== y) edge.push({ x, y: before.y });
    edge.push({ x, y });
  };
  let level = Number.NaN;
  for (let i = first; i <= last; i += step) {
    const value = reference.values[i] as number;
    // A reference that stands still needs no points.
    if (value !== level) add(Math.max(xOf(from), xOf(t[i] as number)), yOfValue(lane, offset + value));
    level = value;
  }
  if (edge.length > 0) add(xOf(until), (edge[edge.length - 1] as { y: number }).y);
  return edge;
}

function paintLimit(ctx: Ctx, frame: Frame, lane: PlotLane, limit: PlotLimit): void {
  const { palette, layout } = frame;
  const bottom = lane.top + lane.height;
  for (const [value, side] of [
    [limit.hi, -1],
    [limit.lo, 1],
  ] as const) {
    if (value === null) continue;
    const edge = limitEdge(frame, lane, limit, value);
    const [first, last] = [edge[0], edge[edge.length - 1]];
    if (!first || !last) continue;
    ctx.save();
    ctx.beginPath();
    ctx.rect(layout.left, lane.top, layout.right - layout.left, lane.height);
    ctx.clip();
    ctx.save();
    // Rock fills the picture up to its edge; a settling band, which holds for a while only, gets a narrow ledge.
    ctx.beginPath();
    for (const { x, y } of edge) ctx.lineTo(x, y);
    if (limit.kind === "settle") for (const { x, y } of [...edge].reverse()) ctx.lineTo(x, y + side * 6);
    else {
      const wall = side < 0 ? lane.top : bottom;
      ctx.lineTo(last.x, wall);
      ctx.lineTo(first.x, wall);
    }
    ctx.clip();
    hatch(ctx, first.x, lane.top, last.x - first.x, lane.height, palette);
    ctx.restore();
    ctx.strokeStyle = palette.coral;
    ctx.lineWidth = 1.25;
    ctx.beginPath();
    for (const { x, y } of edge) ctx.lineTo(x, y);
    ctx.stroke();
    // A limit that begins or ends inside the picture is closed by a post.
    const ledge = (x: number, y: number) => line(ctx, x, y, x, limit.kind === "settle" ? y + side * 6 : side < 0 ? lane.top : bottom);
    if (limit.fromS > frame.view.fromS) ledge(first.x, first.y);
    if (limit.untilS < frame.view.untilS && limit.untilS < layout.durationS) ledge(last.x, last.y);
    ctx.restore();
  }
}

function paintTicks(ctx: Ctx, frame: Frame, lane: PlotLane): void {
  const { palette, layout } = frame;
  const { ticks, factor } = lane.signal;
  const limits = ticks.filter((tick) => tick !== 0);
  const placed: number[] = [];
  for (const tick of [...limits, ...ticks.filter((tick) => tick === 0)]) {
    const y = yOfValue(lane, tick);
    if (y < lane.top - 1 || y > lane.top + lane.height + 1 || placed.some((other) => Math.abs(other - y) < 14)) continue;
    placed.push(y);
    ctx.strokeStyle = palette.ink3;
    ctx.lineWidth = 1;
    line(ctx, layout.left - 4, y, layout.left, y);
    write(ctx, formatTick(tick * factor), layout.left - 8, y + 4, FONT.axis(palette), palette.ink2, "right");
  }
}

function paintWords(ctx: Ctx, frame: Frame, lane: PlotLane): void {
  const { palette, layout, view, t } = frame;
  const { signal } = lane;
  const inside = (y: number) => y >= lane.top - 1 && y <= lane.top + lane.height + 1;
  const words: { y: number; text: string; colour: string }[] = [];
  for (const limit of signal.limits) {
    if (limit.untilS < view.untilS - 1e-9 && limit.untilS < layout.durationS) continue;
    if (limit.fromS >= view.untilS) continue;
    const ys = [limit.hi, limit.lo].flatMap((value) => {
      const edge = value === null ? [] : limitEdge(frame, lane, limit, value);
      const y = edge[edge.length - 1]?.y;
      return y !== undefined && inside(y) ? [y] : [];
    });
    // Both lines of an input's range say the same; one word is enough where they are near.
    const told = limit.kind === "limit" ? ys : ys.slice(0, 1);
    for (const y of told) words.push({ y, text: LIMIT_WORDS[limit.kind], colour: palette.coral });
  }
  if (signal.reference) {
    const y = yOfValue(lane, signal.reference.values[indexAt(t, view.untilS)] as number);
    if (inside(y)) words.push({ y, text: referenceWord(layout.narrow), colour: palette.sand });
  }
  for (const { y, text, colour } of spread(words, 13)) write(ctx, text, layout.right + 8, y + 4, FONT.axis(palette), colour);
  const beyond = (value: number, y: number, sign: string) => {
    const text = `${sign} ${withUnit(formatNumber(value * signal.factor, Math.min(2, signal.decimals)), signal.unit)}`;
    ctx.lineJoin = "round";
    ctx.lineWidth = 4;
    ctx.strokeStyle = palette.panel;
    ctx.font = FONT.axis(palette);
    ctx.textAlign = "right";
    ctx.strokeText(plain(text), layout.right - 4, y);
    write(ctx, text, layout.right - 4, y, FONT.axis(palette), palette.coral, "right");
  };
  if (signal.above !== null) beyond(signal.above, lane.top + 12, "↑ up to");
  if (signal.below !== null) beyond(signal.below, lane.top + lane.height - 4, "↓ down to");
}

function paintTitle(ctx: Ctx, frame: Frame, lane: PlotLane): void {
  const { palette, layout } = frame;
  const { label, symbol, unit } = lane.signal;
  // Lines that come down from the events pass behind the words.
  ctx.fillStyle = palette.panel;
  ctx.fillRect(layout.left - 2, lane.titleY - 12, titleWidth(ctx, palette, lane.signal) + 4, 16);
  let x = layout.left;
  const add = (text: string, font: string) => {
    write(ctx, text, x, lane.titleY, font, palette.ink);
    x += ctx.measureText(text).width;
  };
  add(label, FONT.strong(palette));
  if (isLetter(lane.signal)) {
    x += 4;
    add(symbol, FONT.symbol(palette));
  }
  if (unit !== "") add(`, ${unit}`, FONT.title(palette));
}

/** A letter of the field, accents counted apart; a name that only repeats the label is not shown. */
const isLetter = ({ label, symbol }: PlotLane["signal"]): boolean => symbol !== "" && symbol.length <= 3 && symbol !== label;

/** Width of a plot's title, so that the value at the cursor keeps clear of it. */
export function titleWidth(ctx: Ctx, palette: Pick<Palette, "face">, signal: PlotLane["signal"]): number {
  const { label, symbol, unit } = signal;
  ctx.font = FONT.strong(palette);
  let width = ctx.measureText(label).width;
  ctx.font = FONT.title(palette);
  if (isLetter(signal)) width += 4 + ctx.measureText(symbol).width;
  return width + (unit === "" ? 0 : ctx.measureText(`, ${unit}`).width);
}

function paintCrossings(ctx: Ctx, frame: Frame, lane: PlotLane): void {
  const xOf = xOfTime(frame.layout, frame.view);
  ctx.strokeStyle = frame.palette.coral;
  ctx.lineWidth = 2;
  for (const { atS, value } of lane.signal.crossings) {
    const [x, y] = [xOf(atS), yOfValue(lane, value)];
    if (x < frame.layout.left || x > frame.layout.right || y < lane.top || y > lane.top + lane.height) continue;
    line(ctx, x - 4, y - 4, x + 4, y + 4);
    line(ctx, x - 4, y + 4, x + 4, y - 4);
  }
}

function triangle(ctx: Ctx, x: number, y: number): void {
  ctx.beginPath();
  ctx.moveTo(x - 4, y - 7);
  ctx.lineTo(x + 4, y - 7);
  ctx.lineTo(x, y);
  ctx.closePath();
}

function placedEvents(ctx: Ctx, { layout, view, palette }: Frame): PlacedEvent[] {
  ctx.font = FONT.axis(palette);
  const measure = (words: string) => ctx.measureText(words).width;
  const space = { xOf: xOfTime(layout, view), left: layout.left, right: layout.right, rows: layout.eventRows, measure };
  return placeEvents(layout.marked, space).events;
}

/** Dotted lines from the marks down through the plots. */
function paintLeads(ctx: Ctx, { layout, palette }: Frame, events: readonly PlacedEvent[]): void {
  ctx.strokeStyle = palette.ink3;
  ctx.lineWidth = 1;
  ctx.setLineDash([1, 2.5]);
  for (const { x, row, lead } of events) if (lead) line(ctx, x, 12 + row * EVENT_ROW, x, layout.plotsBottom);
  ctx.setLineDash([]);
}

function paintEvents(ctx: Ctx, { layout, palette }: Frame, events: readonly PlacedEvent[]): void {
  for (const { mark, x, untilX, row, text } of events) {
    const y = 12 + row * EVENT_ROW;
    const lost = mark === "outage" || mark === "silence" || mark === "ended";
    const colour = lost ? palette.coral : palette.ink;
    ctx.fillStyle = colour;
    ctx.strokeStyle = colour;
    ctx.lineWidth = 1.25;
    if (mark === "outage") ctx.fillRect(x, y - 7, Math.max(2, untilX - x), 7);
    else if (mark === "push" || mark === "reference") {
      triangle(ctx, x, y);
      ctx.fill();
    } else if (mark === "push-ends") {
      triangle(ctx, x, y);
      ctx.stroke();
    } else if (mark === "change") ctx.strokeRect(x - 3.5, y - 7, 7, 7);
    else if (mark === "ended") {
      ctx.lineWidth = 2;
      line(ctx, x, y - 8, x, layout.plotsBottom);
    } else {
      ctx.beginPath();
      ctx.arc(x, y - 3.5, 3.2, 0, 2 * Math.PI);
      if (mark === "silence") ctx.fill();
      else ctx.stroke();
    }
    if (!text) continue;
    const align = text.anchor === "start" ? "left" : "right";
    // Dotted lines of other events pass behind the words.
    ctx.lineWidth = 4;
    ctx.lineJoin = "round";
    ctx.strokeStyle = palette.panel;
    ctx.font = FONT.axis(palette);
    ctx.textAlign = align;
    ctx.strokeText(text.words, text.x, y);
    write(ctx, text.words, text.x, y, FONT.axis(palette), lost ? palette.coral : palette.ink2, align);
  }
}

/** What lies under the signals of one plot. */
function paintGround(ctx: Ctx, frame: Frame, lane: PlotLane): void {
  const { layout, view, palette } = frame;
  const xOf = xOfTime(layout, view);
  const within = (x: number) => Math.min(layout.right, Math.max(layout.left, x));
  if (layout.endedAtS < layout.durationS) {
    const x = within(xOf(layout.endedAtS));
    ctx.fillStyle = palette.shade;
    ctx.fillRect(x, lane.top, layout.right - x, lane.height);
  }
  ctx.fillStyle = palette.coralWash;
  for (const { mark, atS, untilS } of layout.marked) {
    if (mark !== "outage") continue;
    const x = within(xOf(atS));
    const until = within(xOf(untilS));
    if (until > x || (atS >= view.fromS && atS <= view.untilS)) ctx.fillRect(x, lane.top, Math.max(1, until - x), lane.height);
  }
  for (const limit of lane.signal.limits) paintLimit(ctx, frame, lane, limit);
  const { lo, hi } = lane.signal.domain;
  if (lo < 0 && hi > 0) {
    ctx.strokeStyle = palette.line;
    ctx.lineWidth = 1;
    const y = yOfValue(lane, 0);
    line(ctx, layout.left, y, layout.right, y);
  }
}

/** The tape itself, its base line and the coral ticks. */
export function paintTape(ctx: Ctx, pieces: readonly TapePiece[], top: number, palette: Palette, pixel: number): void {
  ctx.fillStyle = palette.tape;
  for (const { x, untilX, depth, deliveredShare } of pieces) {
    const cut = depth * TAPE;
    ctx.fillRect(x, top + cut, untilX - x, TAPE - cut);
    if (cut > 0 && deliveredShare > 0) {
      // Many rounds in one pixel: what was cut away is tinted by the share that did arrive.
      ctx.globalAlpha = 0.55 * deliveredShare;
      ctx.fillRect(x, top, untilX - x, cut);
      ctx.globalAlpha = 1;
    }
  }
  const [first, last] = [pieces[0], pieces[pieces.length - 1]];
  if (!first || !last) return;
  ctx.strokeStyle = palette.ink2;
  ctx.lineWidth = 1;
  line(ctx, first.x, top + TAPE + 0.5, last.untilX, top + TAPE + 0.5);
  ctx.fillStyle = palette.coral;
  for (const { x, width } of lossTicks(pieces, Math.max(1.5, pixel))) ctx.fillRect(x + 0.2, top + TAPE + 2.5, width, 3);
}

/** Hairlines between rounds, where they are wide enough to be told apart. */
function paintRoundGaps(ctx: Ctx, frame: Frame, top: number, count: number): void {
  const { layout, view, palette } = frame;
  const xOf = xOfTime(layout, view);
  if (xOf(layout.periodS) - xOf(0) < 7) return;
  ctx.strokeStyle = palette.panel;
  ctx.lineWidth = 1;
  const first = Math.max(1, Math.ceil(view.fromS / layout.periodS));
  for (let k = first; k < count && k * layout.periodS < view.untilS; k++)
    line(ctx, xOf(k * layout.periodS), top, xOf(k * layout.periodS), top + TAPE);
}

function paintTapes(ctx: Ctx, frame: Frame): void {
  const { layout, view, palette, pixel } = frame;
  for (const { record, symbol, top } of layout.tapes) {
    const count = record.streak.length;
    const pieces = tapePieces(record, { periodS: layout.periodS, count, ...view, left: layout.left, right: layout.right, pixel });
    paintTape(ctx, pieces, top, palette, pixel);
    paintRoundGaps(ctx, frame, top, count);
    write(ctx, symbol, layout.left - 8, top + 10, FONT.symbol(palette), palette.ink, "right");
    const lost = lostInView(record, layout.periodS, view.fromS, view.untilS);
    write(ctx, `${formatNumber(lost, 0)} lost`, layout.right + 8, top + 11, FONT.axis(palette), lost > 0 ? palette.coral : palette.ink2);
  }
}

/** Labels stand at least 46 pixels apart, and not more than about thirteen on a wide axis. */
export const leastLabelPx = (width: number): number => Math.max(46, width / 13);
const leastLabelS = ({ left, right }: StackLayout, { fromS, untilS }: View): number =>
  ((untilS - fromS) * leastLabelPx(right - left)) / (right - left);

/** Labels of the time axis that fit between its ends. */
export function timeLabels(layout: StackLayout, view: View): { x: number; text: string }[] {
  const xOf = xOfTime(layout, view);
  return timeScale(view.fromS, view.untilS, leastLabelS(layout, view)).labels.map(({ at, text }) => ({ x: xOf(at), text }));
}

export function paintTimeAxis(ctx: Ctx, frame: Frame, labels: boolean): void {
  const { layout, view, palette } = frame;
  const xOf = xOfTime(layout, view);
  const { inked } = timeScale(view.fromS, view.untilS, leastLabelS(layout, view));
  ctx.fillStyle = palette.panel;
  ctx.fillRect(layout.left, layout.axisTop, layout.right - layout.left, NEAT);
  ctx.fillStyle = palette.ink;
  for (const { from, until } of inked) ctx.fillRect(xOf(from), layout.axisTop, xOf(until) - xOf(from), NEAT);
  ctx.strokeStyle = palette.ink;
  ctx.lineWidth = 0.9;
  ctx.strokeRect(layout.left, layout.axisTop, layout.right - layout.left, NEAT);
  if (!labels) return;
  for (const { x, text } of timeLabels(layout, view)) write(ctx, text, x, layout.axisTop + 19, FONT.axis(palette), palette.ink2, "center");
}

/** Under the signal lines. */
export function paintUnder(ctx: Ctx, frame: Frame): void {
  const events = placedEvents(ctx, frame);
  for (const lane of frame.layout.plots) paintGround(ctx, frame, lane);
  paintLeads(ctx, frame, events);
  for (const lane of frame.layout.plots) {
    paintTicks(ctx, frame, lane);
    paintWords(ctx, frame, lane);
    paintTitle(ctx, frame, lane);
    paintCrossings(ctx, frame, lane);
  }
  paintEvents(ctx, frame, events);
  paintTapes(ctx, frame);
  paintTimeAxis(ctx, frame, false);
}
