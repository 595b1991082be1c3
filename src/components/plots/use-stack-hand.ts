/** Pointer, wheel and keys on a stack of plots: they move the cursor and the zoom and nothing else. */
import { type KeyboardEvent, type PointerEvent, type RefObject, useEffect, useRef } from "react";
import type { PlotCursor } from "./plot-cursor.ts";
import { nearestIndex } from "./series-points.ts";
import type { StackLayout } from "./stack-layout.ts";

/** Pixels that a pressed pointer may wander before it draws a zoom. */
const STILL = 4;

export interface StackHandInput {
  cursor: PlotCursor;
  layout: StackLayout;
  t: Float64Array;
  hand: RefObject<HTMLElement | null>;
  /** Shows the stretch being drawn, pixels; null: none. */
  onSelect(stretch: { from: number; until: number } | null): void;
}

export function useStackHand({ cursor, layout, t, hand, onSelect }: StackHandInput) {
  const pointers = useRef(new Map<number, number>());
  const drawn = useRef<{ from: number; selecting: boolean } | null>(null);
  const pinch = useRef<{ apart: number; fromS: number; untilS: number; middleS: number } | null>(null);

  const xIn = (event: { clientX: number }) => event.clientX - (hand.current?.getBoundingClientRect().left ?? 0);
  const timeAt = (x: number): number => {
    const share = (x - layout.left) / (layout.right - layout.left);
    return cursor.view.fromS + Math.min(1, Math.max(0, share)) * (cursor.view.untilS - cursor.view.fromS);
  };
  /** On recorded points, so that what is read is what was computed. */
  const moveTo = (x: number) => {
    const timeS = timeAt(x);
    const recorded = t[nearestIndex(t, timeS)];
    cursor.moveTo(recorded !== undefined && timeS <= layout.endedAtS ? recorded : timeS);
  };

  const onPointerDown = (event: PointerEvent<HTMLElement>) => {
    if (event.button !== 0) return;
    const x = xIn(event);
    pointers.current.set(event.pointerId, x);
    event.currentTarget.setPointerCapture(event.pointerId);
    cursor.setPlaying(false);
    if (event.pointerType === "touch") {
      const [a, b] = [...pointers.current.values()];
      if (a !== undefined && b !== undefined) {
        pinch.current = { apart: Math.max(20, Math.abs(a - b)), ...cursor.view, middleS: timeAt((a + b) / 2) };
      } else moveTo(x);
      return;
    }
    drawn.current = { from: x, selecting: false };
  };

  const onPointerMove = (event: PointerEvent<HTMLElement>) => {
    const x = xIn(event);
    if (pointers.current.has(event.pointerId)) pointers.current.set(event.pointerId, x);
    if (event.pointerType === "touch") {
      const [a, b] = [...pointers.current.values()];
      const start = pinch.current;
      if (start && a !== undefined && b !== undefined) {
        const factor = start.apart / Math.max(20, Math.abs(a - b));
        const width = (start.untilS - start.fromS) * factor;
        const share = ((a + b) / 2 - layout.left) / (layout.right - layout.left);
        cursor.zoomTo({ fromS: start.middleS - share * width, untilS: start.middleS + (1 - share) * width });
      } else if (pointers.current.size === 1 && !start) moveTo(x);
      return;
    }
    const stretch = drawn.current;
    if (stretch && (stretch.selecting || Math.abs(x - stretch.from) > STILL)) {
      stretch.selecting = true;
      const inside = (at: number) => Math.min(layout.right, Math.max(layout.left, at));
      onSelect({ from: inside(Math.min(x, stretch.from)), until: inside(Math.max(x, stretch.from)) });
    } else if (!cursor.playing) moveTo(x);
  };

  const onPointerUp = (event: PointerEvent<HTMLElement>) => {
    pointers.current.delete(event.pointerId);
    if (pointers.current.size === 0) pinch.current = null;
    const stretch = drawn.current;
    drawn.current = null;
    onSelect(null);
    if (!stretch || event.type === "pointercancel") return;
    const x = xIn(event);
    if (!stretch.selecting) moveTo(x);
    else if (Math.abs(x - stretch.from) > STILL) {
      const [a, b] = [timeAt(stretch.from), timeAt(x)];
      cursor.zoomTo({ fromS: Math.min(a, b), untilS: Math.max(a, b) });
    }
  };

  const onKeyDown = (event: KeyboardEvent<HTMLElement>) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const rounds = event.shiftKey || event.key.startsWith("Page") ? 10 : 1;
    const at = cursor.timeS / layout.periodS;
    switch (event.key) {
      case "ArrowRight":
      case "PageUp":
        cursor.setPlaying(false);
        cursor.moveTo((Math.floor(at + 1e-6) + rounds) * layout.periodS);
        break;
      case "ArrowLeft":
      case "PageDown":
        cursor.setPlaying(false);
        cursor.moveTo((Math.ceil(at - 1e-6) - rounds) * layout.periodS);
        break;
      case "Home":
        cursor.moveTo(0);
        break;
      case "End":
        cursor.moveTo(layout.endedAtS);
        break;
      case "+":
      case "=":
        cursor.zoomBy(0.5);
        break;
      case "-":
        cursor.zoomBy(2);
        break;
      case "0":
        cursor.resetZoom();
        break;
      case " ":
        cursor.setPlaying(!cursor.playing);
        break;
      case "Escape":
        drawn.current = null;
        onSelect(null);
        break;
      default:
        return;
    }
    event.preventDefault();
  };

  // React listens to the wheel passively; zooming has to keep the page from zooming or scrolling along.
  const onWheel = useRef<(event: WheelEvent) => void>(() => undefined);
  useEffect(() => {
    onWheel.current = (event) => {
      const { fromS, untilS } = cursor.view;
      if (event.ctrlKey || event.metaKey) {
        event.preventDefault();
        cursor.zoomBy(Math.exp(Math.max(-60, Math.min(60, event.deltaY)) * 0.006), timeAt(xIn(event)));
        return;
      }
      const sideways = event.shiftKey ? event.deltaY || event.deltaX : Math.abs(event.deltaX) > Math.abs(event.deltaY) ? event.deltaX : 0;
      if (sideways === 0 || untilS - fromS >= cursor.durationS) return;
      event.preventDefault();
      const shift = (sideways / (layout.right - layout.left)) * (untilS - fromS);
      const inside = Math.min(cursor.durationS - untilS, Math.max(-fromS, shift));
      cursor.zoomTo({ fromS: fromS + inside, untilS: untilS + inside });
    };
  });
  useEffect(() => {
    const element = hand.current;
    const listener = (event: WheelEvent) => onWheel.current(event);
    element?.addEventListener("wheel", listener, { passive: false });
    return () => element?.removeEventListener("wheel", listener);
  }, [hand]);

  return { onPointerDown, onPointerMove, onPointerUp, onPointerCancel: onPointerUp, onKeyDown, onDoubleClick: () => cursor.resetZoom() };
}
