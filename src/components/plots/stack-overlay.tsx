/** What moves over the plots: cursor line, rings, values beside it, the time slip. Written directly, never rendered again. */
import { type Ref, useImperativeHandle, useRef } from "react";
import { withUnit } from "#src/lib/format.ts";
import { timeLabels } from "./paint-stack.ts";
import { type PlotCursor, useOnCursor } from "./plot-cursor.ts";
import { valueAt } from "./series-points.ts";
import { NEAT, type PlotLane, type StackLayout, xOfTime, yOfValue } from "./stack-layout.ts";
import { formatNumber, formatTime } from "./units.ts";

export interface StackOverlayHandle {
  select(stretch: { from: number; until: number } | null): void;
}

interface StackOverlayProps {
  layout: StackLayout;
  t: Float64Array;
  /** Width of each plot's title, pixels. */
  titles: number[];
  timeDecimals: number;
  ref: Ref<StackOverlayHandle>;
}

const MOST_LABELS = 40;

/** "−7.08°" of the signal at an instant; "" where nothing was recorded. */
export function valueText({ signal }: PlotLane, t: Float64Array, timeS: number): string {
  const value = valueAt(t, signal.values, timeS, signal.stair);
  return Number.isFinite(value) ? withUnit(formatNumber(value * signal.factor, signal.decimals), signal.unit) : "";
}

export function StackOverlay({ layout, t, titles, timeDecimals, ref }: StackOverlayProps) {
  const svg = useRef<SVGSVGElement>(null);
  const selection = useRef<SVGRectElement>(null);
  const second = layout.plots.some(({ signal }) => signal.second !== null);

  useImperativeHandle(ref, () => ({
    select(stretch) {
      const rect = selection.current;
      if (!rect) return;
      rect.style.display = stretch ? "" : "none";
      if (!stretch) return;
      rect.setAttribute("x", String(stretch.from));
      rect.setAttribute("width", String(stretch.until - stretch.from));
    },
  }));

  /** From the first title to the axis; interrupted where it would run through a title. */
  const linePath = (x: number): string => {
    let path = `M${x} ${(layout.plots[0]?.titleY ?? 15) - 15}`;
    layout.plots.forEach(({ titleY }, index) => {
      if (x >= layout.left - 2 && x <= layout.left + (titles[index] ?? 0) + 3) path += `V${titleY - 12}M${x} ${titleY + 5}`;
    });
    return `${path}V${layout.axisTop + NEAT}`;
  };

  const place = (cursor: PlotCursor) => {
    const root = svg.current;
    if (!root) return;
    const find = (name: string) => root.querySelector<SVGElement>(`[data-part="${name}"]`);
    const x = xOfTime(layout, cursor.view)(cursor.timeS);
    const visible = x >= layout.left - 0.5 && x <= layout.right + 0.5;
    const moving = find("moving");
    if (moving) moving.style.display = visible ? "" : "none";
    const slipWidth = formatTime(cursor.timeS, timeDecimals).length * 6.6 + 14;
    const slipX = Math.min(layout.width - slipWidth / 2, Math.max(slipWidth / 2, x));
    if (visible) {
      find("line")?.setAttribute("d", linePath(x));
      layout.plots.forEach((lane, index) => {
        placeValue(lane, index, x, cursor.timeS, find, titles[index] ?? 0);
      });
      const slip = find("slip");
      slip?.setAttribute("x", String(slipX - slipWidth / 2));
      slip?.setAttribute("width", String(slipWidth));
      const text = find("time");
      text?.setAttribute("x", String(slipX));
      if (text) text.textContent = formatTime(cursor.timeS, timeDecimals);
    }
    const labels = timeLabels(layout, cursor.view);
    const texts = root.querySelectorAll<SVGTextElement>('[data-part="label"]');
    texts.forEach((element, index) => {
      const label = labels[index];
      const covered = label && visible && Math.abs(label.x - slipX) < slipWidth / 2 + label.text.length * 3.2 + 2;
      element.style.display = label && !covered ? "" : "none";
      if (!label) return;
      element.setAttribute("x", String(label.x));
      if (element.textContent !== label.text) element.textContent = label.text;
    });
  };

  const placeValue = (lane: PlotLane, index: number, x: number, timeS: number, find: (name: string) => SVGElement | null, title: number) => {
    const { signal } = lane;
    const value = valueAt(t, signal.values, timeS, signal.stair);
    const other = signal.second ? valueAt(signal.second.t, signal.second.values, timeS, signal.stair) : Number.NaN;
    for (const [name, at] of [
      [`ring${index}`, value],
      [`second${index}`, other],
    ] as const) {
      const ring = find(name);
      const y = yOfValue(lane, at);
      const inside = Number.isFinite(y) && y >= lane.top - 1 && y <= lane.top + lane.height + 1;
      if (!ring) continue;
      ring.style.display = inside ? "" : "none";
      if (!inside) continue;
      ring.setAttribute("cx", String(x));
      ring.setAttribute("cy", String(y));
    }
    const own = valueText(lane, t, timeS);
    const otherText = Number.isFinite(other) ? withUnit(formatNumber(other * signal.factor, signal.decimals), signal.unit) : "";
    const element = find(`value${index}`);
    if (!element) return;
    const [ownSpan, otherSpan] = element.querySelectorAll("tspan");
    if (ownSpan) ownSpan.textContent = signal.second && own ? `A ${own}` : own;
    if (otherSpan) otherSpan.textContent = otherText ? `\u2003B ${otherText}` : "";
    const width = ((element.textContent ?? "").length + 1) * 6.8;
    const clear = layout.left + title + 10;
    const after = Math.max(x + 8, clear);
    const fits = after + width <= layout.width;
    element.setAttribute("x", String(fits ? after : Math.max(x - 8, clear + width)));
    element.setAttribute("text-anchor", fits ? "start" : "end");
  };

  useOnCursor(place);

  return (
    <svg ref={svg} className="stack-over" width={layout.width} height={layout.height} aria-hidden="true">
      <rect
        ref={selection}
        className="stack-select"
        y={layout.plots[0]?.top ?? 0}
        height={layout.axisTop - (layout.plots[0]?.top ?? 0)}
        style={{ display: "none" }}
      />
      {Array.from({ length: MOST_LABELS }, (_, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a fixed row of labels that are only moved
        <text key={index} data-part="label" className="ax" y={layout.axisTop + 19} textAnchor="middle" style={{ display: "none" }} />
      ))}
      <g data-part="moving">
        <path data-part="line" className="cursor" />
        {layout.plots.map(({ signal, titleY }, index) => (
          <g key={signal.name}>
            <circle data-part={`ring${index}`} r="3.2" className="paper" />
            {signal.second && <circle data-part={`second${index}`} r="3.2" className="paper" />}
            <text data-part={`value${index}`} y={titleY} className={signal.command ? "stack-value command" : "stack-value"}>
              <tspan />
              {second && <tspan className="second" />}
            </text>
          </g>
        ))}
        <rect data-part="slip" className="cursorf" y={layout.axisTop + 7} height="18" />
        <text data-part="time" className="cursort" y={layout.axisTop + 20} textAnchor="middle" />
      </g>
    </svg>
  );
}
