import { NEAT } from "#src/components/plots/stack-layout.ts";
import { neatScale } from "#src/components/plots/time-scale.ts";

export interface NeatAxisProps {
  from: number;
  until: number;
  left: number;
  right: number;
  y: number;
  unit?: string;
  /** Turns the axis' own unit into the shown one. */
  factor?: number;
  /** Labels stand on whole numbers only. */
  whole?: boolean;
  title?: string;
}

/** A scale as a strip of alternate inked pieces. */
export function NeatAxis({ from, until, left, right, y, unit = "", factor = 1, whole = false, title }: NeatAxisProps) {
  const perUnit = (right - left) / (until - from);
  const xOf = (value: number) => left + (value - from) * perUnit;
  const apart = (until - from) * (Math.max(56, (right - left) / 12) / (right - left));
  const { inked, labels } = neatScale(from, until, whole ? Math.max(1, apart) : apart, unit, factor);
  const shown = labels.filter(({ at }) => at >= from - 1e-9 && at <= until + 1e-9);
  return (
    <g>
      <rect x={left} y={y} width={right - left} height={NEAT} className="neat" />
      {inked.map((piece) => (
        <rect key={piece.from} x={xOf(piece.from)} y={y} width={xOf(piece.until) - xOf(piece.from)} height={NEAT} className="neatf" />
      ))}
      {shown.map(({ at, text }) => (
        <text key={at} x={xOf(at)} y={y + NEAT + 14} textAnchor="middle" className="ax">
          {text}
        </text>
      ))}
      {title && (
        <text x={right} y={y + NEAT + 29} textAnchor="end" className="axm">
          {title}
        </text>
      )}
    </g>
  );
}
