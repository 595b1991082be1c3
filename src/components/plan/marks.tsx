/** Marks of nodes and interferers; the same in the plan, in its key and in tables. */

/** plain: no flood is shown. sends and receives: at the present step. */
export type NodeState = "plain" | "starts" | "has" | "receives" | "sends" | "waiting" | "lost" | "off";

export const STATE_WORDS: Record<NodeState, string> = {
  plain: "",
  starts: "starts the flood",
  has: "has the message",
  receives: "receives now",
  sends: "sends now",
  waiting: "not yet",
  lost: "lost",
  off: "out of service",
};

/** A disc with a notch cut from its top: lost always looks cut out. Radius r. */
function notched(r: number): string {
  const half = r * 0.36;
  const top = -Math.sqrt(r * r - half * half);
  const f = (value: number) => value.toFixed(2);
  return `M${f(-half)} ${f(top)}V${f(-r * 0.08)}H${f(half)}V${f(top)}A${r} ${r} 0 1 1 ${f(-half)} ${f(top)}Z`;
}

const R = 9.5;

/** The mark around (0, 0), number inside. */
export function NodeShape({ state, label, r: given }: { state: NodeState; label?: number; r?: number }) {
  const lost = state === "lost";
  // Nothing is smaller than 12 px: a number of three figures makes its disc larger.
  const r = given ?? (label !== undefined && label > 99 ? R + 2.5 : R);
  return (
    <>
      {state === "sends" && <circle r={r + 3.5} className="pl-ring" />}
      {lost ? <path d={notched(r)} className="pl-lost" /> : <circle r={r} className={`pl-${state}`} />}
      {state === "off" && <path d={`M${-r * 0.72} ${r * 0.72}L${r * 0.72} ${-r * 0.72}`} className="pl-offbar" />}
      {label !== undefined && (
        <text
          y={4.2}
          x={lost ? r + 5 : 0}
          textAnchor={lost ? "start" : "middle"}
          className={`pl-nt ${state === "starts" || state === "receives" ? "inv" : ""} ${lost ? "out halo2" : ""}`}
        >
          {label}
        </text>
      )}
    </>
  );
}

/** In a line of text or a table. */
export function StateMark({ state, size = 18 }: { state: NodeState; size?: number }) {
  return (
    <svg width={size} height={size} viewBox="-9 -9 18 18" aria-hidden="true" className="mk">
      <NodeShape state={state} r={state === "sends" ? 4.6 : 6.4} />
    </svg>
  );
}

export const InterfererShape = () => (
  <>
    <rect x="-10" y="-10" width="20" height="20" className="pl-int" />
    <path d="M1.4 -6.2L-3.6 0.8H0.2L-1.2 6.2L4.4 -1.4H0.6Z" className="pl-intl" />
  </>
);

export type Glyph = "sensor" | "controller" | "actuator" | "beacon";
export const GLYPH_WORDS: Record<Glyph, string> = { sensor: "sensor", controller: "controller", actuator: "actuator", beacon: "sends the beacon" };

/** What runs on a node, by the marks of the round's lanes: ring = samples, box = computes, triangle = acts; arcs = beacon. */
export function GlyphShape({ glyph }: { glyph: Glyph }) {
  switch (glyph) {
    case "sensor":
      return <circle r="3.4" className="samp" />;
    case "controller":
      return <rect x="-3.6" y="-3.6" width="7.2" height="7.2" className="pl-gbox" />;
    case "actuator":
      return <path d="M-4.4 -3.4H4.4L0 4Z" className="act" />;
    case "beacon":
      return <path d="M-4.4 1.6A5 5 0 0 1 4.4 1.6M-2 3.4A2.3 2.3 0 0 1 2 3.4" className="pl-garc" />;
  }
}

export const GlyphMark = ({ glyph }: { glyph: Glyph }) => (
  <svg width="14" height="14" viewBox="-7 -7 14 14" aria-hidden="true" className="mk">
    <GlyphShape glyph={glyph} />
  </svg>
);
