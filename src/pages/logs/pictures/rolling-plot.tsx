import { niceStep } from "#src/components/plots/units.ts";
import { lossText } from "../model/log-words.ts";
import type { Rolling } from "../model/rolling.ts";

interface RollingPlotProps {
  rolling: Rolling;
  /** Of the whole log. */
  ratio: number;
  left: number;
  right: number;
  top: number;
  height: number;
  xOf: (packet: number) => number;
  /** Without the word at the right. */
  narrow: boolean;
}

/** Share of losses along the log: line, band of its interval, and the whole log's share as the reference. */
export function RollingPlot({ rolling: { points, highest }, ratio, left, right, top, height, xOf, narrow }: RollingPlotProps) {
  const most = Math.min(1, roundUp(highest));
  const yOf = (share: number) => top + height * (1 - Math.min(share, most) / most);
  // A log that is one window: its figures from end to end.
  const [only] = points;
  const shown =
    points.length === 1 && only
      ? [
          { ...only, x: left },
          { ...only, x: right },
        ]
      : points.map((point) => ({ ...point, x: xOf(point.at) }));
  const line = (pick: (point: (typeof shown)[number]) => number, order = shown) =>
    order.map((point) => `${point.x.toFixed(1)} ${yOf(pick(point)).toFixed(1)}`).join("L");
  return (
    <g>
      <path d={`M${left} ${yOf(0)}H${right}M${left} ${yOf(most)}H${right}`} className="hair" />
      <path d={`M${line(({ high }) => high)}L${line(({ low }) => low, shown.toReversed())}Z`} className="band" />
      <path d={`M${left} ${yOf(ratio)}H${right}`} className="ref" />
      <path d={`M${line((point) => point.ratio)}`} className="sig" />
      {!narrow && (
        <text x={right + 8} y={yOf(ratio) + 4} className="ax lg-sand">
          all {lossText(ratio)}
        </text>
      )}
      <text x={left - 8} y={yOf(0) + 4} textAnchor="end" className="ax">
        0
      </text>
      <text x={left - 8} y={yOf(most) + 4} textAnchor="end" className="ax">
        {Number((most * 100).toPrecision(3))}
      </text>
    </g>
  );
}

/** A round number of percent above the highest end. */
function roundUp(highest: number): number {
  const least = Math.max(highest, 1e-4);
  const step = niceStep(least / 4);
  return Math.ceil(least / step - 1e-9) * step;
}
