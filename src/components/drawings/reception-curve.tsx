import "./drawings.css";
import { useRef } from "react";
import { useWidth } from "#src/components/plots/measure.ts";
import { fixed, withUnit } from "#src/lib/format.ts";

interface ReceptionCurveProps {
  /** PRR at an SNR in dB. */
  ratio: (snrDb: number) => number;
  /** Measured rows that the curve goes through. */
  points?: readonly { snrDb: number; prr: number }[];
  note: string;
}

const HEIGHT = 84;
const LEFT = 30;
const SPAN_DB = 0.1;

/** Where the curve leaves 0 and where it has reached 1, with a margin. */
function rangeOf(ratio: (snrDb: number) => number, points: ReceptionCurveProps["points"]): { from: number; until: number } {
  if (points && points.length > 1) return { from: Math.floor(points[0]?.snrDb ?? -10) - 1, until: Math.ceil(points.at(-1)?.snrDb ?? 10) + 1 };
  let from = -30;
  while (from < 20 && ratio(from + 1) < 0.001) from++;
  let until = from;
  while (until < 40 && ratio(until) < 0.999) until++;
  return { from: from - 1, until: until + 1 };
}

/** Packet reception ratio over SNR, with the SNR at which half of the packets arrive. */
export function ReceptionCurve({ ratio, points, note }: ReceptionCurveProps) {
  const host = useRef<HTMLDivElement>(null);
  const width = Math.max(220, useWidth(host) || 320);
  const { from, until } = rangeOf(ratio, points);
  const x = (db: number) => LEFT + ((db - from) / (until - from)) * (width - LEFT - 4);
  const y = (prr: number) => 10 + (1 - prr) * HEIGHT;
  const path: string[] = [];
  let half: number | null = null;
  for (let db = from; db <= until + 1e-9; db += SPAN_DB) {
    const prr = ratio(db);
    if (half === null && prr >= 0.5) half = db;
    path.push(`${path.length === 0 ? "M" : "L"}${x(db).toFixed(1)} ${y(prr).toFixed(1)}`);
  }
  const step = until - from > 24 ? 10 : until - from > 10 ? 5 : 2;
  const labels: number[] = [];
  for (let at = Math.ceil(from / step) * step; at <= until; at += step) labels.push(at);
  const words = half === null ? "It never reaches one half." : `Half of the packets arrive at ${withUnit(fixed(half, 1), "dB")}.`;
  return (
    <div ref={host} className="reception-curve">
      <svg
        width={width}
        height={HEIGHT + 34}
        viewBox={`0 0 ${width} ${HEIGHT + 34}`}
        role="img"
        aria-label={`Packet reception ratio over SNR. ${words}`}
      >
        <path d={`M${LEFT} ${y(0)}H${width - 4}M${LEFT} ${y(1)}H${width - 4}`} className="hair" />
        <path d={`M${LEFT} ${y(0.5)}H${width - 4}`} className="dash" />
        {[0, 0.5, 1].map((at) => (
          <text key={at} x={LEFT - 6} y={y(at) + 4} className="ax" textAnchor="end">
            {at}
          </text>
        ))}
        <path d={path.join("")} className="sig" />
        {points && points.length <= 80 && points.map(({ snrDb, prr }) => <circle key={snrDb} cx={x(snrDb)} cy={y(prr)} r="2" className="paper" />)}
        {labels.map((at, i) => (
          <text key={at} x={x(at)} y={HEIGHT + 28} className="ax" textAnchor={x(at) > width - 30 ? "end" : "middle"}>
            {fixed(at, 0)}
            {i === labels.length - 1 && "\u2009dB"}
          </text>
        ))}
      </svg>
      <p className="note second pb-1">
        {words} {note}
      </p>
    </div>
  );
}
