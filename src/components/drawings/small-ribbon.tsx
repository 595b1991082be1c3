import "./drawings.css";
import { useId } from "react";
import { laneParts, type RoundPicture, ribbonScale, ribbonText, stairOf } from "./ribbon-geometry.ts";

export interface SmallRibbonProps {
  timing: RoundPicture;
  width?: number;
}

const BASE = 17;

/** For tables: the same marks as the large ribbon, no text. */
export function SmallRibbon({ timing, width = 176 }: SmallRibbonProps) {
  const clip = useId();
  const [own] = timing.loops;
  const scale = ribbonScale(timing, 5, width - 5);
  const stairs = timing.slots.map((slot) => stairOf(slot, timing.hops, scale, BASE, 12.2));
  const slotsEnd = scale.xOf((timing.slots.at(-1)?.endS ?? 0) + timing.guardS);
  const [samples, acts] = [scale.xOf(own.sampleAtS), scale.xOf(own.actAtS)];
  const computes = laneParts(timing, own).find(({ kind }) => kind === "computes");
  const computeWidth = computes ? Math.max(3, scale.xOf(computes.untilS) - scale.xOf(computes.fromS)) : 0;
  return (
    <svg className="small-ribbon" width={width} height="26" viewBox={`0 0 ${width} 26`} role="img" aria-label={ribbonText(timing)}>
      <clipPath id={clip}>
        <rect x={scale.post} y="0" width={Math.max(0, width - scale.post)} height="26" />
      </clipPath>
      {timing.reserveS > 0 && <rect x={slotsEnd} y="3" width={Math.max(0, scale.post - slotsEnd)} height="14" className="stipS" />}
      <path d={`M5 17.5H${scale.right}`} className="ink" />
      {stairs.map(({ slot, path }) => (
        <path key={slot.id} d={path} className="swell" />
      ))}
      {!timing.fits && (
        <g clipPath={`url(#${clip})`}>
          {stairs.map(({ slot, path }) => (
            <path key={slot.id} d={path} className="swell over" />
          ))}
        </g>
      )}
      {computes && <rect x={scale.xOf(computes.fromS)} y="11" width={computeWidth} height="6" className="comp" />}
      <path d={`M5 1.5V18M${scale.post} 1.5V18`} className="post" />
      <path d={`M${samples} 20.5v4H${acts}v-4`} className="brk" />
      <circle cx={samples} cy="17.5" r="2.3" className="samp" />
      <path d={`M${acts - 3} 13.5h6l-3 4.5z`} className="act" />
    </svg>
  );
}
