import { type KeyboardEvent, type PointerEvent, useMemo, useState } from "react";
import type { LinkTrace } from "#shared/reception/types.ts";
import { countText, durationText } from "#shared/reception/words.ts";
import { Button, ButtonPair, IconButton } from "#src/components/ui/button.tsx";
import { lossText, packetsText, scaleOf } from "../model/log-words.ts";
import { type Rolling, rollingWithInterval } from "../model/rolling.ts";
import { burstFrom, longestBurst, longestLossIn, lostBetween, type RunIndex } from "../model/run-index.ts";
import { NeatAxis } from "./neat-axis.tsx";
import { RollingPlot } from "./rolling-plot.tsx";
import { TapeStrip } from "./tape-strip.tsx";
import { usePictureWidth } from "./use-picture-width.ts";

export interface LossPictureProps {
  link: LinkTrace;
  index: RunIndex;
}

const PLOT_TOP = 8;
const PLOT = 110;
const TAPE = 14;
const TAPE_TOP = PLOT_TOP + PLOT + 16;
const AXIS = TAPE_TOP + TAPE + 12;
const STRETCH_TOP = AXIS + 56;
const STRETCH_TAPE = 24;
const STRETCH_AXIS = STRETCH_TOP + STRETCH_TAPE + 12;
const HEIGHT = STRETCH_AXIS + 40;
/** Pixels that a packet of the enlarged stretch takes at first. */
const PER_PACKET = 6;
const FEWEST = 20;
const LONGEST = 20_000;
/** Keys, and by how many stretches they move. */
const MOVES = new Map([
  ["ArrowRight", 0.5],
  ["ArrowUp", 0.5],
  ["ArrowLeft", -0.5],
  ["ArrowDown", -0.5],
  ["PageUp", 5],
  ["PageDown", -5],
  ["Home", Number.NEGATIVE_INFINITY],
  ["End", Number.POSITIVE_INFINITY],
]);
const ZOOMS = new Map([
  ["+", 0.5],
  ["-", 2],
]);

/** The whole log over time, and a stretch of it enlarged, packet by packet. */
export function LossPicture({ link, index }: LossPictureProps) {
  const { intervalS } = link;
  const [host, width] = usePictureWidth();
  const narrow = width < 520;
  const left = narrow ? 38 : 46;
  const right = width - (narrow ? 10 : 74);
  const { packets } = index;
  const rolling = useMemo(() => rollingWithInterval(link), [link]);

  const [length, setLength] = useState<number | null>(null);
  const stretch = Math.min(packets, length ?? Math.max(FEWEST, Math.round((right - left) / PER_PACKET)));
  const [centre, setCentre] = useState(() => {
    const burst = longestBurst(index);
    return burst ? burst.from + burst.length / 2 : 0;
  });
  const from = Math.round(Math.min(packets - stretch, Math.max(0, centre - stretch / 2)));
  const until = from + stretch;
  const show = (middle: number) => setCentre(Math.min(packets - stretch / 2, Math.max(stretch / 2, middle)));
  const zoom = (factor: number) => setLength(Math.round(Math.min(packets, LONGEST, Math.max(FEWEST, stretch * factor))));

  const xOf = (packet: number) => left + ((right - left) * packet) / packets;
  const lost = lostBetween(index, from, until);
  const when = intervalS === null ? "" : `, from ${durationText(from * intervalS)} on`;
  const said = `Packets ${countText(from)} to ${countText(until - 1)}${when}: ${
    lost === 0 ? "none lost" : `${countText(lost)} lost, at most ${countText(longestLossIn(index, from, until))} in a row`
  }.`;

  const onKeyDown = (event: KeyboardEvent) => {
    if (event.altKey || event.ctrlKey || event.metaKey) return;
    const move = MOVES.get(event.key);
    const factor = ZOOMS.get(event.key);
    if (move === undefined && factor === undefined) return;
    event.preventDefault();
    if (factor !== undefined) zoom(factor);
    else show(from + stretch / 2 + Math.max(-packets, Math.min(packets, (move ?? 0) * stretch)));
  };
  const toPointer = (event: PointerEvent<HTMLElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    show(((event.clientX - box.left) / Math.max(1, box.width)) * packets);
  };

  const longest = longestBurst(index);
  const middle = from + stretch / 2;
  const before = burstFrom(index, Math.floor(middle), -1);
  const after = burstFrom(index, Math.floor(middle), 1);
  const noBurst = longest ? null : "No packet was lost.";
  const scale = intervalS === null ? null : scaleOf(packets * intervalS);

  return (
    <div className="lg-loss">
      <p className="lg-cap">
        <b>Lost</b> <i>p</i>, % over {packetsText(rolling.window)}
        {intervalS !== null && `, ${durationText(rolling.window * intervalS)}`} at a time; band: 95 % interval
      </p>
      <div ref={host} />
      <div className="relative">
        <svg width={width} height={HEIGHT} viewBox={`0 0 ${width} ${HEIGHT}`} role="img" aria-label={pictureText(index, rolling)}>
          <RollingPlot
            rolling={rolling}
            ratio={packets > 0 ? index.lost / packets : 0}
            left={left}
            right={right}
            top={PLOT_TOP}
            height={PLOT}
            xOf={xOf}
            narrow={narrow}
          />
          {!narrow && (
            <text x={right + 8} y={TAPE_TOP + TAPE - 2} className={index.lost > 0 ? "axc" : "ax"}>
              {index.lost > 0 ? `${countText(index.lost)} lost` : "none lost"}
            </text>
          )}
          <TapeStrip index={index} fromPacket={0} untilPacket={packets} left={left} right={right} y={TAPE_TOP} height={TAPE} />
          {scale ? (
            <NeatAxis from={0} until={packets * (intervalS ?? 1)} left={left} right={right} y={AXIS} unit={scale.unit} factor={scale.factor} />
          ) : (
            <NeatAxis from={0} until={packets} left={left} right={right} y={AXIS} whole title="packets" />
          )}
          <path
            d={`M${xOf(from)} ${PLOT_TOP}V${AXIS + 5}L${left} ${STRETCH_TOP - 6}M${xOf(until)} ${PLOT_TOP}V${AXIS + 5}L${right} ${STRETCH_TOP - 6}`}
            className="lead"
          />
          <TapeStrip index={index} fromPacket={from} untilPacket={until} left={left} right={right} y={STRETCH_TOP} height={STRETCH_TAPE} />
          <NeatAxis from={from} until={until} left={left} right={right} y={STRETCH_AXIS} whole title="packet of the log" />
        </svg>
        <div
          className="lg-hand"
          style={{ left, width: right - left, top: PLOT_TOP, height: AXIS + 5 - PLOT_TOP }}
          role="slider"
          tabIndex={0}
          aria-label="Stretch that is enlarged below"
          aria-orientation="horizontal"
          aria-valuemin={0}
          aria-valuemax={packets - stretch}
          aria-valuenow={from}
          aria-valuetext={said}
          aria-keyshortcuts="ArrowLeft ArrowRight PageUp PageDown Home End + -"
          onKeyDown={onKeyDown}
          onPointerDown={(event) => {
            event.currentTarget.setPointerCapture?.(event.pointerId);
            toPointer(event);
          }}
          onPointerMove={(event) => event.buttons > 0 && toPointer(event)}
        >
          <span className="lg-window" style={{ left: xOf(from) - left, width: Math.max(3, xOf(until) - xOf(from)) }} />
        </div>
      </div>
      <div className="lg-tools">
        <p className="small" role="status">
          {said}
        </p>
        <span className="lg-buttons">
          <Button
            small
            impossible={noBurst ?? (before ? null : "There is no loss before this.")}
            onClick={() => before && show(before.from + before.length / 2)}
          >
            Loss before
          </Button>
          <Button
            small
            impossible={noBurst ?? (after ? null : "There is no loss after this.")}
            onClick={() => after && show(after.from + after.length / 2)}
          >
            Next loss
          </Button>
          <Button small impossible={noBurst} onClick={() => longest && show(longest.from + longest.length / 2)}>
            Longest
          </Button>
          <ButtonPair label="Length of the stretch">
            <IconButton
              small
              icon="minus"
              label="Show a longer stretch"
              impossible={stretch >= Math.min(packets, LONGEST) ? "This is the longest." : null}
              onClick={() => zoom(2)}
            />
            <IconButton
              small
              icon="plus"
              label="Show a shorter stretch"
              impossible={stretch <= FEWEST ? "This is the shortest." : null}
              onClick={() => zoom(0.5)}
            />
          </ButtonPair>
        </span>
      </div>
    </div>
  );
}

const pictureText = ({ packets, lost }: RunIndex, { window, highest }: Rolling): string =>
  `Loss over the whole log: ${countText(lost)} of ${packetsText(packets)} lost. Over ${packetsText(window)} at a time, at most ${lossText(highest)} at the upper end of the 95 percent interval.`;
