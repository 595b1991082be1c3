import { type ReactNode, type Ref, useCallback, useId, useImperativeHandle, useLayoutEffect, useRef, useState } from "react";
import { useWidth } from "#src/components/plots/measure.ts";
import { Neatline } from "./neatline.tsx";
import {
  frameFor,
  isWhole,
  type PlanFrame,
  type PlanSize,
  type PlanView,
  type Point,
  pictureHeight,
  refitted,
  type Spot,
  toPoint,
  wholeView,
  withInSight,
  zoomed,
} from "./plan-view.ts";
import { type Hand, usePlanHand } from "./use-plan-hand.ts";
import "./plan.css";

export interface PlanScene {
  view: PlanView;
  frame: PlanFrame;
  size: PlanSize;
  /** Where a place of the plan lies in the picture. */
  at(spot: Spot): Point;
}

export interface PlanHandle {
  zoomBy(factor: number): void;
  whole(): void;
  /** Moves the view until the place is in sight. */
  show(spot: Spot): void;
  focus(): void;
}

export interface PlanProps {
  size: PlanSize;
  /** What the plan shows, in words. */
  label: string;
  /** How the plan is used by keys, for those who cannot see the tools. */
  help: string;
  mostHeightPx: number;
  hand: Hand;
  /** Shape of the pointer. */
  pointer?: "select" | "draw";
  onEscape: () => void;
  /** Drawn in metres, under the marks: strokes keep their width. */
  ground: (scene: PlanScene) => ReactNode;
  /** Drawn in pixels. */
  marks: (scene: PlanScene) => ReactNode;
  onView?: (whole: boolean) => void;
  ref?: Ref<PlanHandle>;
}

const FIRST_WIDTH = 860;

/** A plan to scale that can be panned and zoomed. It knows nothing of what stands on it. */
export function Plan({ size, label, help, mostHeightPx, hand, pointer = "select", onEscape, ground, marks, onView, ref }: PlanProps) {
  const host = useRef<HTMLDivElement>(null);
  const svg = useRef<SVGSVGElement>(null);
  const clip = useId();
  const helpId = useId();
  const width = useWidth(host) || FIRST_WIDTH;
  const frame = frameFor(width, mostHeightPx, size);
  const [view, setViewState] = useState(() => wholeView(frame, size));
  const whole = useRef(true);
  const before = useRef({ frame, size });

  const setView = useCallback(
    (next: PlanView) => {
      setViewState(next);
      const isNow = isWhole(next, before.current.frame, before.current.size);
      if (isNow !== whole.current) {
        whole.current = isNow;
        onView?.(isNow);
      }
    },
    [onView],
  );

  useLayoutEffect(() => {
    const last = before.current;
    const same = last.frame.width === frame.width && last.frame.height === frame.height;
    if (same && last.size.widthM === size.widthM && last.size.depthM === size.depthM) return;
    before.current = { frame, size };
    setViewState((present) => refitted(present, last.frame, frame, size, whole.current));
  });

  useImperativeHandle(
    ref,
    () => ({
      zoomBy: (factor) => setView(zoomed(view, frame, size, factor, { x: frame.left + frame.width / 2, y: frame.top + frame.height / 2 })),
      whole: () => setView(wholeView(frame, size)),
      show: (spot) => setView(withInSight(view, frame, size, spot)),
      focus: () => host.current?.focus({ preventScroll: true }),
    }),
    [view, frame, size, setView],
  );

  const { surface, keys } = usePlanHand({ svg, view, frame, size, setView, hand, onEscape });
  const scene: PlanScene = { view, frame, size, at: (spot) => toPoint(view, frame, spot) };
  const height = pictureHeight(frame);
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: the plan takes the keys that pan and zoom it
    // biome-ignore lint/a11y/useSemanticElements: a plan with things on it is a group, not a set of fields
    <div ref={host} className="plan" role="group" aria-label={label} aria-describedby={helpId} tabIndex={0} {...keys}>
      <p id={helpId} hidden>
        {help}
      </p>
      {/* biome-ignore lint/a11y/noSvgWithoutTitle: named by the group around it */}
      <svg
        ref={svg}
        width={width}
        height={height}
        viewBox={`0 0 ${width} ${height}`}
        className={`plan-svg ${pointer}`}
        style={{ touchAction: whole.current && pointer === "select" ? "pan-y" : "none" }}
        {...surface}
      >
        <clipPath id={clip}>
          <rect x={frame.left - 3} y={frame.top - 3} width={frame.width + 6} height={frame.height + 6} />
        </clipPath>
        <rect x={frame.left} y={frame.top} width={frame.width} height={frame.height} className="pl-table" />
        <g clipPath={`url(#${clip})`}>
          <g
            transform={`translate(${frame.left - view.xM * view.scale} ${frame.top - view.yM * view.scale}) scale(${view.scale})`}
            className="pl-ground"
          >
            {ground(scene)}
          </g>
          {marks(scene)}
        </g>
        <Neatline view={view} frame={frame} size={size} />
      </svg>
    </div>
  );
}
