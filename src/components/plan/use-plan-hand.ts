/** What pointers, wheel and keys do on a plan: pan, zoom, pinch, and drags that belong to the tool in hand. */
import { type KeyboardEvent, type PointerEvent, type RefObject, useEffect, useRef } from "react";
import { isWhole, type PlanFrame, type PlanSize, type PlanView, type Point, panned, type Spot, toSpot, wholeView, zoomed } from "./plan-view.ts";

export interface Press {
  spot: Spot;
  /** What was pressed: the nearest `data-thing`, null on open ground. */
  thing: string | null;
  touch: boolean;
  shift: boolean;
}

export interface Drag {
  move(spot: Spot): void;
  /** The pointer was let go; `moved`: by more than a slip. */
  end(spot: Spot, moved: boolean): void;
  cancel(): void;
}

/** The tool in hand. */
export interface Hand {
  /** A press that may become a drag; null: the plan is panned. */
  press(press: Press): Drag | null;
  /** Let go where it was pressed. */
  tap(press: Press): void;
  hover?(spot: Spot | null): void;
}

const SLIP_PX = 4;
const ZOOM_KEY = 1.4;
const PAN_PX = 60;

interface Going {
  pointer: number;
  from: Point;
  last: Point;
  moved: boolean;
  drag: Drag | null;
  press: Press;
}

export interface PlanHandOptions {
  svg: RefObject<SVGSVGElement | null>;
  view: PlanView;
  frame: PlanFrame;
  size: PlanSize;
  setView: (view: PlanView) => void;
  hand: Hand;
  /** Escape on the plan. */
  onEscape: () => void;
}

export function usePlanHand(options: PlanHandOptions) {
  const now = useRef(options);
  now.current = options;
  const going = useRef<Going | null>(null);
  const touches = useRef(new Map<number, Point>());
  const space = useRef(false);

  const pointOf = (event: { clientX: number; clientY: number }): Point => {
    const box = now.current.svg.current?.getBoundingClientRect();
    return { x: event.clientX - (box?.left ?? 0), y: event.clientY - (box?.top ?? 0) };
  };
  const spotAt = (point: Point): Spot => toSpot(now.current.view, now.current.frame, point);

  useEffect(() => {
    const svg = options.svg.current;
    if (!svg) return;
    const onWheel = (event: WheelEvent) => {
      const { view, frame, size, setView } = now.current;
      const outwards = event.deltaY > 0;
      // The whole plan is seen already: the page scrolls on.
      if (outwards && isWhole(view, frame, size) && !event.ctrlKey) return;
      event.preventDefault();
      const lines = event.deltaMode === 1 ? 16 : 1;
      const factor = Math.exp(-event.deltaY * lines * (event.ctrlKey ? 0.01 : 0.0022));
      setView(zoomed(view, frame, size, Math.min(3, Math.max(1 / 3, factor)), pointOf(event)));
    };
    svg.addEventListener("wheel", onWheel, { passive: false });
    return () => svg.removeEventListener("wheel", onWheel);
    // biome-ignore lint/correctness/useExhaustiveDependencies: the listener reads what is current by reference
  }, [options.svg, pointOf]);

  const pinch = (event: PointerEvent): void => {
    const { view, frame, size, setView } = now.current;
    const before = [...touches.current.values()];
    touches.current.set(event.pointerId, pointOf(event));
    const after = [...touches.current.values()];
    const middle = (points: Point[]) => ({ x: (points[0].x + points[1].x) / 2, y: (points[0].y + points[1].y) / 2 });
    const apart = (points: Point[]) => Math.hypot(points[0].x - points[1].x, points[0].y - points[1].y);
    const factor = apart(before) > 0 ? apart(after) / apart(before) : 1;
    const [from, to] = [middle(before), middle(after)];
    setView(panned(zoomed(view, frame, size, factor, from), frame, size, to.x - from.x, to.y - from.y));
  };

  const onPointerDown = (event: PointerEvent<SVGSVGElement>) => {
    const point = pointOf(event);
    const touch = event.pointerType === "touch";
    if (touch) {
      touches.current.set(event.pointerId, point);
      if (touches.current.size === 2) {
        going.current?.drag?.cancel();
        going.current = null;
        return;
      }
      if (touches.current.size > 2) return;
    }
    if (event.button === 2) return;
    const thing = (event.target as Element).closest("[data-thing]")?.getAttribute("data-thing") ?? null;
    const press: Press = { spot: spotAt(point), thing, touch, shift: event.shiftKey };
    const panning = space.current || event.button === 1;
    const drag = panning ? null : now.current.hand.press(press);
    going.current = { pointer: event.pointerId, from: point, last: point, moved: false, drag, press };
    // Without this a drag would select the words of the plan.
    if (!touch && event.button === 1) event.preventDefault();
  };

  const onPointerMove = (event: PointerEvent<SVGSVGElement>) => {
    if (touches.current.size === 2 && touches.current.has(event.pointerId)) return pinch(event);
    const point = pointOf(event);
    const act = going.current;
    if (!act || act.pointer !== event.pointerId) {
      if (event.pointerType !== "touch") now.current.hand.hover?.(spotAt(point));
      return;
    }
    if (!act.moved && Math.hypot(point.x - act.from.x, point.y - act.from.y) > SLIP_PX) {
      act.moved = true;
      event.currentTarget.setPointerCapture?.(event.pointerId);
    }
    if (!act.moved) return;
    if (act.drag) act.drag.move(spotAt(point));
    else {
      const { view, frame, size, setView } = now.current;
      setView(panned(view, frame, size, point.x - act.last.x, point.y - act.last.y));
    }
    act.last = point;
  };

  const onPointerUp = (event: PointerEvent<SVGSVGElement>) => {
    touches.current.delete(event.pointerId);
    const act = going.current;
    if (!act || act.pointer !== event.pointerId) return;
    going.current = null;
    const spot = spotAt(pointOf(event));
    act.drag?.end(spot, act.moved);
    if (!act.moved && !space.current && event.button !== 1) now.current.hand.tap(act.press);
  };

  const onPointerCancel = (event: PointerEvent<SVGSVGElement>) => {
    touches.current.delete(event.pointerId);
    going.current?.drag?.cancel();
    going.current = null;
  };

  const onKeyDown = (event: KeyboardEvent<HTMLElement>) => {
    const { view, frame, size, setView, onEscape } = now.current;
    if (event.ctrlKey || event.metaKey || event.altKey || (event.target as Element).closest("input, select, textarea")) return;
    const middle = { x: frame.left + frame.width / 2, y: frame.top + frame.height / 2 };
    const zoom = (factor: number) => () => setView(zoomed(view, frame, size, factor, middle));
    const pan = (dx: number, dy: number) => () => setView(panned(view, frame, size, dx, dy));
    const acts = new Map<string, () => void>([
      ["+", zoom(ZOOM_KEY)],
      ["=", zoom(ZOOM_KEY)],
      ["-", zoom(1 / ZOOM_KEY)],
      ["0", () => setView(wholeView(frame, size))],
      [
        "Escape",
        () => {
          going.current?.drag?.cancel();
          going.current = null;
          onEscape();
        },
      ],
    ]);
    // A node takes the arrow keys for itself.
    if (event.target === event.currentTarget) {
      acts.set("ArrowLeft", pan(PAN_PX, 0));
      acts.set("ArrowRight", pan(-PAN_PX, 0));
      acts.set("ArrowUp", pan(0, PAN_PX));
      acts.set("ArrowDown", pan(0, -PAN_PX));
      acts.set(" ", () => {
        space.current = true;
      });
    }
    const act = acts.get(event.key);
    if (!act) return;
    event.preventDefault();
    act();
  };

  return {
    surface: {
      onPointerDown,
      onPointerMove,
      onPointerUp,
      onPointerCancel,
      onPointerLeave: () => now.current.hand.hover?.(null),
    },
    keys: {
      onKeyDown,
      onKeyUp: (event: KeyboardEvent) => {
        if (event.key === " ") space.current = false;
      },
      onBlur: () => {
        space.current = false;
      },
    },
  };
}
