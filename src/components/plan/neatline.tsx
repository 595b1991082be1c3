import { memo } from "react";
import { neatScale } from "#src/components/plots/time-scale.ts";
import { HIDDEN } from "./hidden.ts";
import type { PlanFrame, PlanView } from "./plan-view.ts";

const THICK = 5;
const OFF = 9;
const LEAST_LABEL_PX = 78;

/** The border of the plan as its scale: one piece is a round number of metres, numbers below and at the left. */
export const Neatline = memo(function Neatline({
  view,
  frame,
  size,
}: {
  view: PlanView;
  frame: PlanFrame;
  size: { widthM: number; depthM: number };
}) {
  const right = view.xM + frame.width / view.scale;
  const bottom = view.yM + frame.height / view.scale;
  const across = neatScale(Math.max(0, view.xM), Math.min(size.widthM, right), LEAST_LABEL_PX / view.scale, "m");
  const down = neatScale(Math.max(0, view.yM), Math.min(size.depthM, bottom), LEAST_LABEL_PX / view.scale, "m");
  const x = (m: number) => frame.left + (m - view.xM) * view.scale;
  const y = (m: number) => frame.top + (m - view.yM) * view.scale;
  const box = {
    left: x(Math.max(0, view.xM)),
    right: x(Math.min(size.widthM, right)),
    top: y(Math.max(0, view.yM)),
    bottom: y(Math.min(size.depthM, bottom)),
  };
  const width = Math.max(0, box.right - box.left);
  const height = Math.max(0, box.bottom - box.top);
  const strips = [
    { x: box.left, y: frame.top - OFF - THICK, width, height: THICK },
    { x: box.left, y: frame.top + frame.height + OFF, width, height: THICK },
    { x: frame.left - OFF - THICK, y: box.top, width: THICK, height },
    { x: frame.left + frame.width + OFF, y: box.top, width: THICK, height },
  ];
  return (
    <g {...HIDDEN}>
      {strips.map((strip, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: four sides in their order
        <rect key={i} {...strip} className="neat" />
      ))}
      {across.inked.flatMap(({ from, until }) =>
        [frame.top - OFF - THICK, frame.top + frame.height + OFF].map((top) => (
          <rect key={`${from} ${top}`} x={x(from)} y={top} width={x(until) - x(from)} height={THICK} className="neatf" />
        )),
      )}
      {down.inked.flatMap(({ from, until }) =>
        [frame.left - OFF - THICK, frame.left + frame.width + OFF].map((left) => (
          <rect key={`${from} ${left}`} x={left} y={y(from)} width={THICK} height={y(until) - y(from)} className="neatf" />
        )),
      )}
      {across.labels.map(({ at, text }) => {
        const px = x(at);
        const anchor = px < frame.left + 12 ? "start" : px > frame.left + frame.width - 20 ? "end" : "middle";
        return (
          <text key={at} x={px} y={frame.top + frame.height + OFF + THICK + 14} className="ax" textAnchor={anchor}>
            {text}
          </text>
        );
      })}
    </g>
  );
});
