import { memo } from "react";
import { lossTicks } from "#src/components/plots/tape-pieces.ts";
import { logTape, TINTS, tapePaths } from "../model/log-tape.ts";
import type { RunIndex } from "../model/run-index.ts";

export interface TapeStripProps {
  index: RunIndex;
  fromPacket: number;
  untilPacket: number;
  left: number;
  right: number;
  y: number;
  height: number;
}

/** From this width on, packets are divided by hairlines. */
const DIVIDED = 5;

/** A stretch of a log as loss tape: lost packets cut out, deeper with each further one in a row, a coral tick below. */
export const TapeStrip = memo(function TapeStrip({ index, fromPacket, untilPacket, left, right, y, height }: TapeStripProps) {
  const pieces = logTape(index, { fromPacket, untilPacket, left, right, pixel: 1 });
  const { whole, tints } = tapePaths(pieces, height);
  const perPacket = (right - left) / (untilPacket - fromPacket);
  const first = pieces[0];
  const last = pieces[pieces.length - 1];
  const divided = perPacket >= DIVIDED && first && last;
  const between = divided
    ? Array.from({ length: Math.max(0, Math.round((last.untilX - first.x) / perPacket) - 1) }, (_, i) => first.x + (i + 1) * perPacket)
    : [];
  return (
    <g transform={`translate(0 ${y})`}>
      {TINTS.map((tint, i) => tints[i] && <path key={tint} d={tints[i]} className="tape" opacity={tint} />)}
      <path d={whole} className="tape" />
      {between.length > 0 && <path d={between.map((x) => `M${x.toFixed(2)} 0V${height}`).join("")} className="lg-between" />}
      {first && last && <path d={`M${first.x} ${height + 0.5}H${last.untilX}`} className="tapeb" />}
      {lossTicks(pieces, 1.5).map(({ x, width }) => (
        <rect key={x} x={x + 0.2} y={height + 2.5} width={width} height="3" className="cut" />
      ))}
    </g>
  );
});
