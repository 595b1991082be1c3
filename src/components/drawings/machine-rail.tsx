import { neatScale } from "#src/components/plots/time-scale.ts";
import type { MachinePicture } from "./machine-geometry.ts";

/** The rail as a neatline, with rock where the track ends, limits of the position and the reference. Drawn for a rail around the middle. */
export function MachineRail({ picture, reference }: { picture: MachinePicture; reference: boolean }) {
  const { width, halfM, pixelsPerM, ends, railY, labelY, hanging, positionLimits } = picture;
  const xOf = (metres: number) => width / 2 + metres * pixelsPerM;
  const [left, right] = [xOf(-halfM), xOf(halfM)];
  const { inked, labels } = neatScale(-halfM, halfM, 35 / pixelsPerM, "m");
  const rockTop = hanging ? railY - 2 : railY - 22;
  const arrow = hanging ? `M-5 ${labelY - 22}h10l-5 7z` : `M-5 ${labelY + 12}h10l-5 -7z`;
  return (
    <g data-part="rail">
      {ends && (
        <>
          <rect x={left - 16} y={rockTop} width="16" height="30" className="rock" />
          <rect x={right} y={rockTop} width="16" height="30" className="rock" />
          <path d={`M${left} ${rockTop}v30M${right} ${rockTop}v30`} className="lim" />
        </>
      )}
      <rect x={left} y={railY} width={right - left} height="6" className="neat" />
      {inked.map(({ from, until }) => (
        <rect key={from} x={xOf(from)} y={railY} width={xOf(until) - xOf(from)} height="6" className="neatf" />
      ))}
      {labels.map(({ at, text }) => (
        <text key={at} x={xOf(at)} y={labelY} className="ax" textAnchor="middle">
          {text}
        </text>
      ))}
      {positionLimits.map((limit) => (
        <path key={limit} d={`M${xOf(limit)} ${railY - 4}v14`} className="lim" />
      ))}
      {reference && (
        <g data-part="reference">
          <path d={arrow} className="sandf" />
          <text x="9" y={hanging ? labelY - 14 : labelY + 16} className="txs">
            reference
          </text>
        </g>
      )}
    </g>
  );
}
