import { useId, useRef } from "react";
import "./drawings.css";
import { measureWith, pageFace, useWidth } from "#src/components/plots/measure.ts";
import { leastLabelPx } from "#src/components/plots/paint-stack.ts";
import { neatScale } from "#src/components/plots/time-scale.ts";
import { fixed, withUnit } from "#src/lib/format.ts";
import {
  linesOf,
  type ReachedShares,
  type RoundPicture,
  ribbonScale,
  ribbonText,
  roundsText,
  type Stair,
  slotName,
  slotsEndS,
  stairOf,
} from "./ribbon-geometry.ts";
import { RibbonLane } from "./ribbon-lane.tsx";
import { lanesLayout, RibbonLanes } from "./ribbon-lanes.tsx";

export interface RoundRibbonProps {
  timing: RoundPicture;
  /** Share of the nodes that have the message after each step, where floods were drawn; else stairs show the hop bound. */
  reachedShare?: ReachedShares;
  /** Id of the slot that is looked at. */
  selected?: string | null;
  /** A press on a slot. Keys reach the same in the table of slots. */
  onSelect?: (slotId: string) => void;
  /** A table of the slots stands below: numbers in the picture are those of its rows. */
  tabled?: boolean;
  /** End of the drawn time, s, to draw several rounds on one scale. */
  untilS?: number;
}

const ms = (seconds: number) => withUnit(fixed(seconds * 1000, 2), "ms");
/** Height of the stairs: of one line, and of each where slots of different rounds share a place. */
const STAIRS = 44;
const STAIRS_OF_MANY = 27;
const LINE_GAP = 18;

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
export function RoundRibbon(props: RoundRibbonProps) {
  const host = useRef<HTMLDivElement>(null);
  const width = Math.max(300, useWidth(host) || 640);
  return (
    <div ref={host} className="ribbon">
      <Ribbon {...props} width={width} />
    </div>
  );
}

function Ribbon({ timing, reachedShare, selected, onSelect, tabled, untilS, width }: RoundRibbonProps & { width: number }) {
  const clip = useId();
  const measure = measureWith(pageFace());
  const wide = width >= 480;
  const several = timing.loops.length > 1;
  const lanes = several ? lanesLayout(timing, width, measure) : null;
  const actsLater = timing.loops.some(({ actAtS }) => actAtS > timing.periodS + 1e-9);
  const left = 12 + (lanes?.nameWidth ?? 0);
  const nextShown = timing.fits && !actsLater && wide;
  const right = width - (lanes ? lanes.figureWidth + 18 : nextShown ? 34 : 12);
  const scale = ribbonScale(timing, left, right, untilS);
  const slotsEnd = slotsEndS(timing);
  const lines = linesOf(timing.slots);
  const lineCount = Math.max(0, ...lines) + 1;

  const items: Omit<Head, "row">[] = timing.slots.map((slot) => ({
    name: slotName(timing, slot),
    detail: [
      ...(slot.everyRounds > 1 ? [`rounds ${roundsText(slot)}`] : []),
      withUnit(String(slot.payloadBytes), "B"),
      ms(slot.endS - slot.startS),
    ].join(" · "),
    x: scale.xOf(slot.startS) + 2,
    anchor: "start",
    coral: slot.endS > timing.periodS + 1e-12,
  }));
  const reserve: Omit<Head, "row"> = timing.fits
    ? { name: "Reserve", detail: ms(timing.reserveS), x: scale.post - 2, anchor: "end", coral: false }
    : { name: "Too long", detail: `by ${ms(-timing.reserveS)}`, x: scale.right, anchor: "end", coral: true };
  const widthOf = ({ name, detail }: Omit<Head, "row">) => Math.max(measure(name, "strong"), measure(detail, "axis"));
  const heads = lineCount > 1 ? null : placeHeads([...items, reserve], widthOf, 12, width);
  const rows = heads ? Math.max(...heads.map(({ row }) => row)) + 1 : 0;
  const stairsHeight = lineCount > 1 ? STAIRS_OF_MANY : STAIRS;
  const top = heads ? 6 + rows * 34 : lineCount > 1 ? 8 : 24;
  const area = lineCount > 1 ? lineCount * (stairsHeight + LINE_GAP) + 6 : STAIRS + 10;
  const base = top + area;
  const baseOf = (line: number) => base - line * (stairsHeight + LINE_GAP);

  const placeOf = (index: number) => ({
    base: baseOf(lines[index] ?? 0),
    height: stairsHeight,
    shares: reachedShare?.[timing.slots[index]?.id ?? ""],
  });
  const stairs = timing.slots.map((slot, i) => stairOf(slot, timing.hops, scale, placeOf(i)));
  const next = actsLater
    ? timing.slots.map((slot, i) => stairOf(slot, timing.hops, scale, { ...placeOf(i), shiftS: timing.periodS })).filter((_, i) => lines[i] === 0)
    : [];
  const axis = scale.right - left;
  const neat = neatScale(0, scale.endS, (scale.endS * leastLabelPx(axis)) / axis, "ms", 1000, timing.periodS);
  const inLabels = neat.labels.filter(({ at }) => scale.xOf(at) <= width - 2);
  const height = base + (lanes ? 40 + lanes.height : 98);
  return (
    <>
      <svg width={width} height={height} viewBox={`0 0 ${width} ${height}`} role="img" aria-label={ribbonText(timing)}>
        <clipPath id={clip}>
          <rect x={scale.post} y="0" width={Math.max(0, width - scale.post)} height={base} />
        </clipPath>
        {timing.reserveS > 0 && (
          <rect
            x={scale.xOf(slotsEnd + timing.guardS)}
            y={top}
            width={Math.max(0, scale.post - scale.xOf(slotsEnd + timing.guardS))}
            height={area}
            className="stip"
          />
        )}
        <rect
          x={scale.xOf(slotsEnd)}
          y={top}
          width={Math.max(0, scale.xOf(slotsEnd + timing.guardS) - scale.xOf(slotsEnd))}
          height={area}
          className="guard"
        />
        {Array.from({ length: lineCount - 1 }, (_, line) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: lines have no other name than their place
          <path key={line} d={`M${left} ${baseOf(line + 1) + 0.5}H${scale.post}`} className="hair2" />
        ))}
        {heads?.map(
          ({ name, x, anchor, row }) =>
            row < rows - 1 && (
              <path key={`${name} ${x}`} d={`M${anchor === "start" ? x - 1.5 : x + 1.5} ${37 + row * 34}V${top + 4}`} className="lead" />
            ),
        )}
        {heads?.map(({ name, detail, x, anchor, row, coral }) => (
          <g key={`${name} ${x}`}>
            <text x={x} y={18 + row * 34} className={`${coral ? "txc" : "txb"} halo2`} textAnchor={anchor}>
              {name}
            </text>
            <text x={x} y={33 + row * 34} className={`${coral ? "axc" : "ax"} halo2`} textAnchor={anchor}>
              {detail}
            </text>
          </g>
        ))}
        {stairs.map((stair, index) => (
          <StairShape
            key={stair.slot.id}
            stair={stair}
            base={baseOf(lines[index] ?? 0)}
            height={stairsHeight}
            number={heads ? null : index + 1}
            selected={stair.slot.id === selected}
            onSelect={onSelect}
            known={reachedShare?.[stair.slot.id] !== undefined}
          />
        ))}
        {next.map(({ slot, path }) => (
          <path key={slot.id} d={path} className={slot.message === "command" ? "swell ghost" : "swelln"} />
        ))}
        {!timing.fits && (
          <g clipPath={`url(#${clip})`}>
            {stairs.map((stair) => (
              <path key={stair.slot.id} d={stair.path} className="swell over" />
            ))}
          </g>
        )}
        <path d={`M${left} ${base + 0.5}H${actsLater ? scale.right : scale.post}`} className="ink" />
        {!timing.fits && <path d={`M${scale.post} ${base + 0.5}H${scale.right}`} className="lim" />}
        {nextShown && untilS === undefined && (
          <NextRound timing={timing} post={scale.post} base={base} xOf={scale.xOf} width={lanes ? right + 30 : width} />
        )}
        <rect x={left} y={base + 8} width={axis} height="5" className="neat" />
        {neat.inked.map(({ from, until }) => (
          <rect key={from} x={scale.xOf(from)} y={base + 8} width={scale.xOf(until) - scale.xOf(from)} height="5" className="neatf" />
        ))}
        {inLabels.map(({ at, text }, index) => (
          <text
            key={at}
            x={Math.min(scale.xOf(at) + (index === inLabels.length - 1 && scale.xOf(at) > scale.right - 16 ? 3 : 0), width)}
            y={base + 27}
            className="ax"
            textAnchor={at === 0 ? "start" : scale.xOf(at) > scale.right - 16 ? "end" : "middle"}
          >
            {text}
          </text>
        ))}
        <path
          d={`M${left} ${top - 6}V${base + 13}M${scale.post} ${top - 6}V${base + 13}${actsLater ? `M${scale.xOf(2 * timing.periodS)} ${top - 6}V${base + 13}` : ""}`}
          className="post"
        />
        {lanes ? (
          <RibbonLanes timing={timing} scale={scale} layout={lanes} y={base + 42} width={width} measure={measure} />
        ) : (
          <RibbonLane timing={timing} scale={scale} y={base + 52} width={width} measure={measure} />
        )}
      </svg>
      {!heads && !tabled && (
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

/** What the heights of the stairs stand for, in one sentence. `rounds`: over how many the shares were counted. */
export function stairsNote(reachedShare: ReachedShares | undefined, rounds?: number): string {
  return reachedShare
    ? `Stairs: the share of nodes that have the message after each step${rounds === undefined ? "" : `, over ${rounds} rounds`}; the dotted line is all of them.`
    : "Stairs: the hop that the flood has reached after each step, at the latest, on a line of nodes without loss.";
}

interface StairShapeProps {
  stair: Stair;
  base: number;
  height: number;
  number: number | null;
  selected: boolean;
  onSelect?: (slotId: string) => void;
  /** Its shares were computed: all nodes is a line that it may stay below. */
  known: boolean;
}

function StairShape({ stair, base, height, number, selected, onSelect, known }: StairShapeProps) {
  const { slot, path, divisions, treads, wake, left, right } = stair;
  const tread = treads.length > 1 ? (treads[1]?.x ?? 0) - (treads[0]?.x ?? 0) : 0;
  return (
    // biome-ignore lint/a11y/noStaticElementInteractions: a picture; the table of slots below it does the same by key
    <g onClick={onSelect && (() => onSelect(slot.id))} className={onSelect ? "stair pressed" : "stair"}>
      {(selected || onSelect) && (
        <rect x={left} y={base - height - 8} width={Math.max(1, right - left)} height={height + 8} className={selected ? "slot-on" : "slot-any"} />
      )}
      {known && <path d={`M${left} ${base - height}H${right}`} className="lead" />}
      <path d={path} className={slot.everyRounds > 1 ? "swell some" : "swell"} />
      <path d={divisions.map(({ x, top: from }) => `M${x.toFixed(1)} ${from.toFixed(1)}V${base}`).join("")} className="swells" />
      {tread >= 11 &&
        treads.map(({ x, top: at, hop }) => (
          <text key={hop} x={x} y={at + 12 > base - 2 ? at - 3 : at + 12} className="ax" textAnchor="middle">
            {hop}
          </text>
        ))}
      <path d={`M${wake.from.toFixed(1)} ${base + 0.5}H${wake.until.toFixed(1)}`} className="wake" />
      {number !== null && (right - left >= (number > 9 ? 18 : 11) || (number % 5 === 0 && right - left >= 4)) && (
        <text x={(left + right) / 2} y={base - height - 3} className="txb halo2" textAnchor="middle">
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
