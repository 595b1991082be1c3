import type { ReactNode } from "react";
import type { Template } from "#shared/scenario/templates.ts";

/** A rail of alternate inked pieces. */
function Rail({ x, y, width, pieces }: { x: number; y: number; width: number; pieces: number }) {
  const piece = width / pieces;
  return (
    <>
      <rect x={x} y={y} width={width} height="5" className="neat" />
      {Array.from({ length: Math.ceil(pieces / 2) }, (_, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: the pieces never change places
        <rect key={i} x={x + 2 * i * piece} y={y} width={piece} height="5" className="neatf" />
      ))}
    </>
  );
}

/** Earlier positions as thin lines, as on the bench. */
const Trace = ({ x1, y1, to }: { x1: number; y1: number; to: readonly [number, number][] }) =>
  to.map(([x2, y2], i) => <line key={x2} x1={x1} y1={y1} x2={x2} y2={y2} stroke="var(--tide)" strokeWidth="1" opacity={0.25 + 0.22 * i} />);

const PICTURES: Record<Template["key"], ReactNode> = {
  "pendulum-on-cart": (
    <>
      <Rail x={20} y={58} width={92} pieces={8} />
      <rect x="52" y="42" width="28" height="12" className="body" />
      <circle cx="59" cy="55" r="2.6" className="paper" />
      <circle cx="73" cy="55" r="2.6" className="paper" />
      <Trace
        x1={66}
        y1={43}
        to={[
          [102.4, 9.9],
          [92, 8.8],
          [82.9, 7.8],
        ]}
      />
      <line x1="66" y1="43" x2="74" y2="5" className="ink2" />
      <circle cx="66" cy="43" r="2.4" className="paper" />
    </>
  ),
  "overhead-crane": (
    <>
      <Rail x={12} y={8} width={108} pieces={9} />
      <rect x="50" y="13" width="26" height="9" className="body" />
      <Trace
        x1={63}
        y1={22}
        to={[
          [41, 47.6],
          [48, 49],
          [54.5, 50.3],
        ]}
      />
      <line x1="63" y1="22" x2="60" y2="50" className="ink" />
      <path d="M52 50h16l-2 14H54z" className="body" />
    </>
  ),
};

export const TemplatePicture = ({ template }: { template: Template["key"] }) => (
  <svg width="132" height="70" viewBox="0 0 132 70" aria-hidden="true">
    {PICTURES[template]}
  </svg>
);
