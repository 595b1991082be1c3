import { niceStep } from "#src/components/plots/units.ts";
import { significant, withUnit } from "#src/lib/format.ts";
import { HIDDEN } from "./hidden.ts";
import type { PlanScene } from "./plan.tsx";

const WANTED_PX = 90;

/** A length of the plan in round metres, as pieces of the neatline. */
export function ScaleBar({ scene: { view, frame } }: { scene: PlanScene }) {
  const lengthM = niceStep(WANTED_PX / view.scale / 1.9);
  const piece = (lengthM * view.scale) / 2;
  const x = frame.left + frame.width - 2 * piece - 12;
  const y = frame.top + frame.height - 16;
  if (2 * piece > frame.width / 2) return null;
  return (
    <g {...HIDDEN} className="pl-scale">
      <rect x={x - 6} y={y - 18} width={2 * piece + 12} height="28" className="pl-scale-bg" />
      <rect x={x} y={y} width={2 * piece} height="5" className="neat" />
      <rect x={x} y={y} width={piece} height="5" className="neatf" />
      <text x={x + piece} y={y - 5} textAnchor="middle" className="ax">
        {withUnit(significant(lengthM, 3), "m")}
      </text>
    </g>
  );
}
