import type { LoopTiming } from "#shared/network/round.ts";
import type { Measure } from "#src/components/plots/measure.ts";
import { fixed, withUnit } from "#src/lib/format.ts";
import { laneParts, type RibbonScale, type RoundPicture, roundsText } from "./ribbon-geometry.ts";

const ms = (seconds: number) => withUnit(fixed(seconds * 1000, 2), "ms");

export interface LanesLayout {
  /** Names stand before the lanes, not above them. */
  beside: boolean;
  nameWidth: number;
  figureWidth: number;
  pitch: number;
  height: number;
}

const LONGEST_NAME = 148;

/** "Name of a loop", cut so that it fits. */
export function cutToFit(text: string, width: number, measure: Measure): string {
  if (measure(text, "axis") <= width) return text;
  let end = text.length - 1;
  while (end > 1 && measure(`${text.slice(0, end)}…`, "axis") > width) end--;
  return `${text.slice(0, end).trimEnd()}…`;
}

const nameOf = (loop: LoopTiming): string => (loop.everyRounds > 1 ? `${loop.name}, rounds ${roundsText(loop)}` : loop.name);

/** Room that the lanes of several loops take. */
export function lanesLayout(timing: RoundPicture, width: number, measure: Measure): LanesLayout {
  const beside = width >= 560;
  const nameWidth = beside
    ? Math.min(
        LONGEST_NAME,
        Math.max(
          ...timing.loops.map((loop) =>
            Math.max(measure(loop.name, "strong"), loop.everyRounds > 1 ? measure(`rounds ${roundsText(loop)}`, "axis") : 0),
          ),
        ),
      )
    : 0;
  const figureWidth = Math.max(measure("latency τ", "axis"), ...timing.loops.map(({ latencyS }) => measure(ms(latencyS), "strong"))) + 4;
  const pitch = beside ? (timing.loops.some(({ everyRounds }) => everyRounds > 1) ? 34 : 25) : 38;
  return { beside, nameWidth, figureWidth, pitch, height: timing.loops.length * pitch + 18 };
}

interface RibbonLanesProps {
  timing: RoundPicture;
  scale: RibbonScale;
  layout: LanesLayout;
  y: number;
  width: number;
  measure: Measure;
}

/** Several loops below one round: a lane each, from sampling to acting, with its latency at its end. */
export function RibbonLanes({ timing, scale, layout, y, width, measure }: RibbonLanesProps) {
  return (
    <g>
      <text x={width} y={y + 4} className="ax" textAnchor="end">
        latency <tspan className="it">τ</tspan>
      </text>
      {timing.loops.map((loop, i) => (
        <Lane
          key={loop.loop}
          {...{ timing, loop, scale, layout, width, measure }}
          y={y + 18 + i * layout.pitch + (layout.beside ? 0 : 12)}
          top={y + 18 + i * layout.pitch - 12}
        />
      ))}
    </g>
  );
}

function Lane({ timing, loop, scale, layout, y, top, width, measure }: RibbonLanesProps & { loop: LoopTiming; top: number }) {
  const { xOf } = scale;
  const [samples, acts] = [xOf(loop.sampleAtS), xOf(loop.actAtS)];
  const tooEarly = loop.earliestActS > loop.actAtS + 1e-9;
  const rounds = loop.everyRounds > 1 ? `rounds ${roundsText(loop)}` : null;
  return (
    <g>
      <path d={`M${layout.beside ? 0 : scale.left} ${top}H${width}`} className="lane-rule" />
      {layout.beside ? (
        <>
          <text x="0" y={y + (rounds ? -1 : 4)} className="tx">
            {cutToFit(loop.name, layout.nameWidth, measure)}
          </text>
          {rounds && (
            <text x="0" y={y + 13} className="ax">
              {rounds}
            </text>
          )}
        </>
      ) : (
        <text x={scale.left} y={y - 9} className="tx">
          {cutToFit(nameOf(loop), width - scale.left - layout.figureWidth - 8, measure)}
        </text>
      )}
      {laneParts(timing, loop).map(({ kind, fromS, untilS }) =>
        kind === "computes" ? (
          <rect key={`${kind}${fromS}`} x={xOf(fromS)} y={y - 4} width={Math.max(3, xOf(untilS) - xOf(fromS))} height="8" className="comp" />
        ) : (
          <path key={`${kind}${fromS}`} d={`M${xOf(fromS)} ${y}H${xOf(untilS)}`} className={kind === "way" ? "lane" : "laned"} />
        ),
      )}
      <circle cx={samples} cy={y} r="3.4" className="samp" />
      <path d={`M${acts - 4.5} ${y - 7}h9l-4.5 7.5z`} className={tooEarly ? "act over" : "act"} />
      <path d={`M${samples} ${y + 5}v3.5H${acts}v-3.5`} className="brk thin" />
      <text x={width} y={y + 4} className={tooEarly ? "txc" : "txb"} textAnchor="end">
        {tooEarly ? `late by ${ms(loop.earliestActS - loop.actAtS)}` : ms(loop.latencyS)}
      </text>
    </g>
  );
}
