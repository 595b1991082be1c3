import "./drawings.css";
import { useId } from "react";
import { laneParts, linesOf, type RoundPicture, ribbonScale, ribbonText, slotsEndS, stairOf } from "./ribbon-geometry.ts";

export interface SmallRibbonProps {
  timing: RoundPicture;
  width?: number;
}

const STAIRS = 12.2;

/** For tables: the same marks as the large ribbon, no text. Several loops lie below it as lines from sampling to acting. */
export function SmallRibbon({ timing, width = 176 }: SmallRibbonProps) {
  const clip = useId();
  const { loops, slots } = timing;
  const several = loops.length > 1;
  const scale = ribbonScale(timing, 5, width - 5);
  const lines = linesOf(slots);
  const count = Math.max(0, ...lines) + 1;
  const base = several ? 15 : 17;
  const each = several ? 12.2 / count : STAIRS / count;
  const stairs = slots.map((slot, i) => stairOf(slot, timing.hops, scale, { base: base - lines[i] * each, height: each - (count > 1 ? 1.2 : 0) }));
  const slotsEnd = scale.xOf(slotsEndS(timing) + timing.guardS);
  const pitch = Math.max(1.5, Math.min(3, 14 / loops.length));
  const height = several ? Math.max(26, base + 5 + loops.length * pitch) : 26;
  return (
    <svg className="small-ribbon" width={width} height={height} viewBox={`0 0 ${width} ${height}`} role="img" aria-label={ribbonText(timing)}>
      <clipPath id={clip}>
        <rect x={scale.post} y="0" width={Math.max(0, width - scale.post)} height={base + 9} />
      </clipPath>
      {timing.reserveS > 0 && <rect x={slotsEnd} y="3" width={Math.max(0, scale.post - slotsEnd)} height={base - 3} className="stipS" />}
      <path d={`M5 ${base + 0.5}H${scale.right}`} className="ink" />
      {stairs.map(({ slot, path }) => (
        <path key={slot.id} d={path} className={slot.everyRounds > 1 ? "swell some" : "swell"} />
      ))}
      {!timing.fits && (
        <g clipPath={`url(#${clip})`}>
          {stairs.map(({ slot, path }) => (
            <path key={slot.id} d={path} className="swell over" />
          ))}
        </g>
      )}
      <path d={`M5 1.5V${base + 1}M${scale.post} 1.5V${base + 1}`} className="post" />
      {several ? (
        loops.map((loop, i) => {
          const y = base + 4 + i * pitch;
          const [samples, acts] = [scale.xOf(loop.sampleAtS), scale.xOf(loop.actAtS)];
          const tall = Math.min(1.2, pitch / 2);
          return (
            <path
              key={loop.loop}
              d={`M${samples} ${y - tall}v${2 * tall}M${samples} ${y}H${acts}M${acts} ${y - tall}v${2 * tall}`}
              className="small-lane"
            />
          );
        })
      ) : (
        <OneLoop timing={timing} xOf={scale.xOf} />
      )}
    </svg>
  );
}

function OneLoop({ timing, xOf }: { timing: RoundPicture; xOf(s: number): number }) {
  const [own] = timing.loops;
  const [samples, acts] = [xOf(own.sampleAtS), xOf(own.actAtS)];
  const computes = laneParts(timing, own).find(({ kind }) => kind === "computes");
  return (
    <>
      {computes && (
        <rect x={xOf(computes.fromS)} y="11" width={Math.max(3, xOf(computes.untilS) - xOf(computes.fromS))} height="6" className="comp" />
      )}
      <path d={`M${samples} 20.5v4H${acts}v-4`} className="brk" />
      <circle cx={samples} cy="17.5" r="2.3" className="samp" />
      <path d={`M${acts - 3} 13.5h6l-3 4.5z`} className="act" />
    </>
  );
}
