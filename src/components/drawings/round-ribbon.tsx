import { useId, useRef } from "react";
import "./drawings.css";
import { measureWith, pageFace, useWidth } from "#src/components/plots/measure.ts";
import { leastLabelPx } from "#src/components/plots/paint-stack.ts";
import { neatScale } from "#src/components/plots/time-scale.ts";
import { fixed, withUnit } from "#src/lib/format.ts";
import { type RoundPicture, ribbonScale, ribbonText, type Stair, stairOf } from "./ribbon-geometry.ts";
import { RibbonLane } from "./ribbon-lane.tsx";

export interface RoundRibbonProps {
  timing: RoundPicture;
}

const ms = (seconds: number) => withUnit(fixed(seconds * 1000, 2), "ms");
const STAIRS = 44;

interface Head {
  name: string;
  detail: string;
  x: number;
  anchor: "start" | "end";
  row: number;
  coral: boolean;
}

/** Names above their slots, in one row, else in two or three; null when they do not fit and numbers have to stand for them. */
export function placeHeads(items: Omit<Head, "row">[], widthOf: (head: Omit<Head, "row">) => number, left: number, right: number): Head[] | null {
  for (const rows of [1, 2, 3]) {
    const ends = new Array<number>(rows).fill(left - 8);
    const placed = items.map((item, index): Head | null => {
      const row = index % rows;
      const width = widthOf(item);
      const from = item.anchor === "start" ? item.x : item.x - width;
      if (from < (ends[row] ?? 0) + 8 || from + width > right) return null;
      ends[row] = from + width;
      return { ...item, row };
    });
    if (placed.every((head) => head !== null)) return placed;
  }
  return null;
}

/** One round to scale: the slots of its floods as stairs, reserve, and below it the loop from sampling to acting. */
export function RoundRibbon({ timing }: RoundRibbonProps) {
  const host = useRef<HTMLDivElement>(null);
  const width = Math.max(300, useWidth(host) || 640);
  return (
    <div ref={host} className="ribbon">
      <Ribbon timing={timing} width={width} />
    </div>
  );
}

function Ribbon({ timing, width }: RoundRibbonProps & { width: number }) {
  const clip = useId();
  const measure = measureWith(pageFace());
  const wide = width >= 480;
  const actsLater = timing.loops[0].actAtS > timing.periodS + 1e-9;
  const right = width - (wide && !actsLater && timing.fits ? 34 : 12);
  const scale = ribbonScale(timing, 12, right);
  const slotsEnd = timing.slots.at(-1)?.endS ?? 0;

  const items: Omit<Head, "row">[] = timing.slots.map(({ label, payloadBytes, startS, endS }) => ({
    name: label,
    detail: `${withUnit(String(payloadBytes), "B")} · ${ms(endS - startS)}`,
    x: scale.xOf(startS) + 2,
    anchor: "start",
    coral: endS > timing.periodS + 1e-12,
  }));
  const reserve: Omit<Head, "row"> = timing.fits
    ? { name: "Reserve", detail: ms(timing.reserveS), x: scale.post - 2, anchor: "end", coral: false }
    : { name: "Too long", detail: `by ${ms(-timing.reserveS)}`, x: right, anchor: "end", coral: true };
  const widthOf = ({ name, detail }: Omit<Head, "row">) => Math.max(measure(name, "strong"), measure(detail, "axis"));
  const heads = placeHeads([...items, reserve], widthOf, 12, width);
  const rows = heads ? Math.max(...heads.map(({ row }) => row)) + 1 : 0;
  const top = heads ? 6 + rows * 34 : 24;
  const base = top + STAIRS + 10;

  const stairs = timing.slots.map((slot) => stairOf(slot, timing.hops, scale, base, STAIRS));
  const next = actsLater ? timing.slots.map((slot) => stairOf(slot, timing.hops, scale, base, STAIRS, timing.periodS)) : [];
  const neat = neatScale(0, scale.endS, (scale.endS * leastLabelPx(right - 12)) / (right - 12), "ms", 1000, timing.periodS);
  const inLabels = neat.labels.filter(({ at }) => scale.xOf(at) <= width - 2);
  return (
    <>
      <svg width={width} height={base + 98} viewBox={`0 0 ${width} ${base + 98}`} role="img" aria-label={ribbonText(timing)}>
        <clipPath id={clip}>
          <rect x={scale.post} y="0" width={Math.max(0, width - scale.post)} height={base} />
        </clipPath>
        {timing.reserveS > 0 && (
          <rect
            x={scale.xOf(slotsEnd + timing.guardS)}
            y={top}
            width={Math.max(0, scale.post - scale.xOf(slotsEnd + timing.guardS))}
            height={STAIRS + 10}
            className="stip"
          />
        )}
        <rect
          x={scale.xOf(slotsEnd)}
          y={top}
          width={Math.max(0, scale.xOf(slotsEnd + timing.guardS) - scale.xOf(slotsEnd))}
          height={STAIRS + 10}
          className="guard"
        />
        {heads?.map(
          ({ name, x, anchor, row }) =>
            row < rows - 1 && <path key={name} d={`M${anchor === "start" ? x - 1.5 : x + 1.5} ${37 + row * 34}V${top + 4}`} className="lead" />,
        )}
        {heads?.map(({ name, detail, x, anchor, row, coral }) => (
          <g key={name}>
            <text x={x} y={18 + row * 34} className={`${coral ? "txc" : "txb"} halo2`} textAnchor={anchor}>
              {name}
            </text>
            <text x={x} y={33 + row * 34} className={`${coral ? "axc" : "ax"} halo2`} textAnchor={anchor}>
              {detail}
            </text>
          </g>
        ))}
        {stairs.map((stair, index) => (
          <StairShape key={stair.slot.message} stair={stair} base={base} number={heads ? null : index + 1} top={top} />
        ))}
        {next.map(({ slot, path }) => (
          <path key={slot.message} d={path} className={slot.message === "command" ? "swell ghost" : "swelln"} />
        ))}
        {!timing.fits && (
          <g clipPath={`url(#${clip})`}>
            {stairs.map((stair) => (
              <path key={stair.slot.message} d={stair.path} className="swell over" />
            ))}
          </g>
        )}
        <path d={`M12 ${base + 0.5}H${actsLater ? right : scale.post}`} className="ink" />
        {!timing.fits && <path d={`M${scale.post} ${base + 0.5}H${right}`} className="lim" />}
        {timing.fits && !actsLater && wide && <NextRound timing={timing} post={scale.post} base={base} xOf={scale.xOf} width={width} />}
        <rect x="12" y={base + 8} width={right - 12} height="5" className="neat" />
        {neat.inked.map(({ from, until }) => (
          <rect key={from} x={scale.xOf(from)} y={base + 8} width={scale.xOf(until) - scale.xOf(from)} height="5" className="neatf" />
        ))}
        {inLabels.map(({ at, text }, index) => (
          <text
            key={at}
            x={Math.min(scale.xOf(at) + (index === inLabels.length - 1 && scale.xOf(at) > right - 16 ? 3 : 0), width)}
            y={base + 27}
            className="ax"
            textAnchor={at === 0 ? "start" : scale.xOf(at) > right - 16 ? "end" : "middle"}
          >
            {text}
          </text>
        ))}
        <path
          d={`M12 ${top - 6}V${base + 13}M${scale.post} ${top - 6}V${base + 13}${actsLater ? `M${scale.xOf(2 * timing.periodS)} ${top - 6}V${base + 13}` : ""}`}
          className="post"
        />
        <RibbonLane timing={timing} scale={scale} y={base + 52} width={width} measure={measure} />
      </svg>
      {!heads && (
        <ol className="ribbon-key">
          {items.map(({ name, detail, coral }) => (
            <li key={name}>
              <span className={coral ? "coral" : undefined}>{name}</span> <span className="second">{detail}</span>
            </li>
          ))}
          <li className="plain">
            <span className={reserve.coral ? "coral" : undefined}>{reserve.name}</span> <span className="second">{reserve.detail}</span>
          </li>
        </ol>
      )}
    </>
  );
}

function StairShape({ stair, base, top, number }: { stair: Stair; base: number; top: number; number: number | null }) {
  const { path, divisions, treads, wake, left, right } = stair;
  const tread = treads.length > 1 ? (treads[1]?.x ?? 0) - (treads[0]?.x ?? 0) : 0;
  return (
    <g>
      <path d={path} className="swell" />
      <path d={divisions.map(({ x, top: from }) => `M${x.toFixed(1)} ${from.toFixed(1)}V${base}`).join("")} className="swells" />
      {tread >= 11 &&
        treads.map(({ x, top: at, hop }) => (
          <text key={hop} x={x} y={at + 12 > base - 2 ? at - 3 : at + 12} className="ax" textAnchor="middle">
            {hop}
          </text>
        ))}
      <path d={`M${wake.from.toFixed(1)} ${base + 0.5}H${wake.until.toFixed(1)}`} className="wake" />
      {number !== null && (
        <text x={(left + right) / 2} y={top - 8} className="txb" textAnchor="middle">
          {number}
        </text>
      )}
    </g>
  );
}

/** The beginning of the round that follows. */
function NextRound({ timing, post, base, xOf, width }: { timing: RoundPicture; post: number; base: number; xOf(s: number): number; width: number }) {
  const first = timing.slots[0];
  if (!first) return null;
  const from = xOf(timing.periodS + first.floodStartS);
  const until = Math.min(width - 4, xOf(timing.periodS + first.floodStartS + first.stepS));
  const height = STAIRS / Math.min(timing.hops, first.steps);
  return (
    <>
      <path d={`M${post} ${base + 0.5}H${width}`} className="dash" />
      {until > from && <path d={`M${from} ${base}V${base - height}H${until}V${base}Z`} className="swelln" />}
      <text x={width} y={base - STAIRS + 2} className="ax" textAnchor="end">
        next
      </text>
    </>
  );
}
