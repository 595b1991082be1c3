import { type Ref, useEffect, useImperativeHandle, useLayoutEffect, useMemo, useRef, useState } from "react";
import "uplot/dist/uPlot.min.css";
import "./plot-stack.css";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { stackPng } from "./export-png.ts";
import { measureWith, pageFace, useWidth } from "./measure.ts";
import { onThemeChange, type Palette, paletteOf, pictureFonts } from "./palette.ts";
import { type PlotCursor, useOnCursor, usePlotCursor, type View } from "./plot-cursor.ts";
import { plotSignals, usualSignals } from "./plot-signals.ts";
import { measuredTitle, StackCanvas } from "./stack-canvas.ts";
import { layOutStack, type StackLayout } from "./stack-layout.ts";
import { StackOverlay, type StackOverlayHandle, valueText } from "./stack-overlay.tsx";
import { formatTime, timeDecimals } from "./units.ts";
import { useStackHand } from "./use-stack-hand.ts";

export interface PlotStackHandle {
  /** The whole stack as it is zoomed now, in light colours, at twice the size. */
  toPng(title: string, note: string): Promise<Blob>;
}

export interface PlotStackProps {
  scenario: Scenario;
  result: RunResult;
  /** A second run, dashed: "B". */
  second?: RunResult;
  /** Column names in the order of the plots; default: what has a limit or a reference, then the inputs. */
  signals?: readonly string[];
  /** Last good result: colours are taken out. */
  stale?: boolean;
  ref?: Ref<PlotStackHandle>;
}

/** Counts up whenever the canvases have to be painted anew though the run is the same: theme, faces, pixel ratio. */
function useRepaint(): number {
  const [epoch, setEpoch] = useState(0);
  useEffect(() => {
    let mounted = true;
    const again = () => mounted && setEpoch((count) => count + 1);
    pictureFonts(pageFace()).then(again);
    const stop = onThemeChange(again);
    addEventListener("resize", again);
    return () => {
      mounted = false;
      stop();
      removeEventListener("resize", again);
    };
  }, []);
  return epoch;
}

/** Events, signals, loss tapes and time on one axis. Needs a PlotCursorContext above. */
export function PlotStack({ scenario, result, second, signals: names, stale = false, ref }: PlotStackProps) {
  const cursor = usePlotCursor();
  const host = useRef<HTMLDivElement>(null);
  const ground = useRef<HTMLDivElement>(null);
  const hand = useRef<HTMLDivElement>(null);
  const overlay = useRef<StackOverlayHandle>(null);
  const canvas = useRef<StackCanvas | null>(null);
  const painted = useRef<View | null>(null);
  const palette = useRef<(Palette & { of: string }) | null>(null);
  const width = useWidth(host);
  const epoch = useRepaint();
  const { t } = result.series;

  const shown = useMemo(() => plotSignals(scenario, result, names ?? usualSignals(scenario, result), second), [scenario, result, names, second]);
  // biome-ignore lint/correctness/useExhaustiveDependencies: `epoch` stands for the faces, which have widths of their own
  const { layout, titles } = useMemo(() => {
    const face = pageFace();
    const placed: StackLayout = layOutStack(result, shown, width, measureWith(face));
    return { layout: placed, titles: placed.plots.map((lane) => measuredTitle({ face }, lane)) };
  }, [result, shown, width, epoch]);

  useLayoutEffect(() => {
    if (!ground.current) return;
    const made = new StackCanvas(ground.current);
    canvas.current = made;
    return () => made.destroy();
  }, []);

  // biome-ignore lint/correctness/useExhaustiveDependencies: the layout is made from the result
  useLayoutEffect(() => {
    if (!host.current || layout.width <= 0) return;
    cursor.setExtent(layout.durationS, Math.max(result.rounds.periodS, layout.durationS / 1e5));
    const colours = `${stale} ${epoch}`;
    if (palette.current?.of !== colours) palette.current = { of: colours, ...paletteOf(host.current) };
    canvas.current?.update({ layout, t, palette: palette.current }, cursor.view);
    painted.current = cursor.view;
  }, [layout, t, stale, epoch, cursor]);

  useOnCursor(({ view }) => {
    if (painted.current === view || layout.width <= 0) return;
    painted.current = view;
    canvas.current?.draw(view);
  });

  useImperativeHandle(ref, () => ({
    toPng: (title, note) => stackPng({ result, signals: shown, view: cursor.view, width: Math.max(layout.width, 640), title, note }),
  }));

  const decimals = timeDecimals(result.rounds.periodS / 10);
  const describe = (at: PlotCursor) => {
    const element = hand.current;
    if (!element) return;
    const values = layout.plots.map((lane) => `${lane.signal.label} ${valueText(lane, t, at.timeS) || "not recorded"}`);
    element.setAttribute("aria-valuenow", String(Number(at.timeS.toFixed(6))));
    element.setAttribute("aria-valuetext", [formatTime(at.timeS, decimals), ...values].join(", "));
  };
  useOnCursor(describe);
  const handlers = useStackHand({ cursor, layout, t, hand, onSelect: (stretch) => overlay.current?.select(stretch) });

  return (
    <div ref={host} className="stack" style={{ height: layout.width > 0 ? layout.height : 480 }}>
      <div ref={ground} />
      {layout.width > 0 && <StackOverlay ref={overlay} layout={layout} t={t} titles={titles} timeDecimals={decimals} />}
      <div
        ref={hand}
        className="stack-hand"
        role="slider"
        tabIndex={0}
        aria-label="Time cursor of the plots"
        aria-keyshortcuts="ArrowLeft ArrowRight PageUp PageDown Home End + - 0"
        aria-valuemin={0}
        aria-valuemax={layout.durationS}
        aria-valuenow={0}
        {...handlers}
      />
    </div>
  );
}
