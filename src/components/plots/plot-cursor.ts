/**
 * Cursor and zoom of one run. Pictures that share a time axis share one of these. It lives outside React: a pointer that
 * moves 60 times a second tells its listeners once per frame, and they write to their own canvas or SVG.
 */
import { createContext, useContext, useEffect, useRef, useSyncExternalStore } from "react";

export interface View {
  fromS: number;
  untilS: number;
}

export interface PlotCursor {
  readonly timeS: number;
  readonly view: View;
  readonly durationS: number;
  readonly playing: boolean;
  /** Moves the cursor; the view follows when the cursor would leave it. */
  moveTo(timeS: number): void;
  zoomTo(view: View): void;
  /** Factor below 1 zooms in; the instant `aroundS` stays where it is (default: the cursor, else the middle). */
  zoomBy(factor: number, aroundS?: number): void;
  resetZoom(): void;
  setPlaying(playing: boolean): void;
  /** Another run on the same screen: keeps cursor and zoom as far as they still lie inside. */
  setExtent(durationS: number, shortestViewS: number): void;
  /** Called at most once a frame, and once at the start. */
  subscribe(listener: () => void): () => void;
}

const nextFrame = (callback: () => void): void => {
  if (typeof requestAnimationFrame === "function") requestAnimationFrame(callback);
  else queueMicrotask(callback);
};

export function createPlotCursor(durationS: number, timeS = 0): PlotCursor {
  let extent = durationS;
  let shortest = durationS / 1000;
  let time = Math.min(Math.max(timeS, 0), durationS);
  let view: View = { fromS: 0, untilS: durationS };
  let playing = false;
  let scheduled = false;
  const listeners = new Set<() => void>();

  const changed = () => {
    if (scheduled) return;
    scheduled = true;
    nextFrame(() => {
      scheduled = false;
      for (const listener of listeners) listener();
    });
  };
  const confine = (wanted: View): View => {
    const width = Math.min(extent, Math.max(shortest, wanted.untilS - wanted.fromS));
    const middle = (wanted.fromS + wanted.untilS) / 2;
    const fromS = Math.min(Math.max(0, middle - width / 2), extent - width);
    return width >= extent ? { fromS: 0, untilS: extent } : { fromS, untilS: fromS + width };
  };
  const setView = (wanted: View) => {
    const next = confine(wanted);
    if (next.fromS === view.fromS && next.untilS === view.untilS) return;
    view = next;
    changed();
  };

  return {
    get timeS() {
      return time;
    },
    get view() {
      return view;
    },
    get durationS() {
      return extent;
    },
    get playing() {
      return playing;
    },
    moveTo(timeS) {
      if (!Number.isFinite(timeS)) return;
      const next = Math.min(Math.max(timeS, 0), extent);
      if (next === time) return;
      time = next;
      const width = view.untilS - view.fromS;
      if (time < view.fromS) setView({ fromS: time, untilS: time + width });
      else if (time > view.untilS) setView({ fromS: time - width, untilS: time });
      changed();
    },
    zoomTo: setView,
    zoomBy(factor, aroundS) {
      const inside = time >= view.fromS && time <= view.untilS;
      const around = aroundS ?? (inside ? time : (view.fromS + view.untilS) / 2);
      const width = Math.min(extent, Math.max(shortest, (view.untilS - view.fromS) * factor));
      const share = (around - view.fromS) / (view.untilS - view.fromS);
      setView({ fromS: around - share * width, untilS: around + (1 - share) * width });
    },
    resetZoom: () => setView({ fromS: 0, untilS: extent }),
    setPlaying(next) {
      if (next === playing) return;
      playing = next;
      changed();
    },
    setExtent(nextDurationS, shortestViewS) {
      shortest = Math.min(nextDurationS, shortestViewS);
      if (nextDurationS === extent) return;
      const whole = view.fromS === 0 && view.untilS === extent;
      extent = nextDurationS;
      time = Math.min(time, extent);
      view = whole || view.fromS >= extent ? { fromS: 0, untilS: extent } : confine(view);
      changed();
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}

export const PlotCursorContext = createContext<PlotCursor | null>(null);

/** The cursor of the run around this component. */
export function usePlotCursor(): PlotCursor {
  const cursor = useContext(PlotCursorContext);
  if (!cursor) throw new Error("usePlotCursor: no PlotCursorContext above this component.");
  return cursor;
}

/** Calls `draw` once after every render and then at most once a frame while cursor or zoom change; nothing renders again. */
export function useOnCursor(draw: (cursor: PlotCursor) => void): void {
  const cursor = usePlotCursor();
  const latest = useRef(draw);
  useEffect(() => {
    latest.current = draw;
    draw(cursor);
  });
  useEffect(() => cursor.subscribe(() => latest.current(cursor)), [cursor]);
}

/** A value of the cursor that renders again only when it changes: `useCursorValue((cursor) => cursor.playing)`. */
export function useCursorValue<T extends string | number | boolean>(select: (cursor: PlotCursor) => T): T {
  const cursor = usePlotCursor();
  return useSyncExternalStore(cursor.subscribe, () => select(cursor));
}
