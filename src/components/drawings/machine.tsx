import { type RefObject, useMemo, useRef } from "react";
import "./drawings.css";
import { plantTitle } from "#shared/plants/registry.ts";
import type { PendulumSpec } from "#shared/plants/schema.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { useWidth } from "#src/components/plots/measure.ts";
import { useOnCursor } from "#src/components/plots/plot-cursor.ts";
import { valueAt } from "#src/components/plots/series-points.ts";
import { significant, withUnit } from "#src/lib/format.ts";
import { bodyOf, fromPivot, type MachinePicture, machinePicture, poseAt, railShift, specAt, TRAIL, trailStepS } from "./machine-geometry.ts";
import { MachineRail } from "./machine-rail.tsx";
import { StateBars } from "./state-bars.tsx";

export interface MachineProps {
  scenario: Scenario;
  result: RunResult;
}

const DEGREES = 180 / Math.PI;

/** "every 50 ms of the last 0.6 s": what the thin lines are. null for a machine that has none. */
export function trailText(scenario: Scenario): string | null {
  const { plant } = scenario.loops[0];
  if (plant.type !== "pendulum-on-cart") return null;
  const step = trailStepS(plant);
  const apart = step < 1 ? withUnit(significant(step * 1000), "ms") : withUnit(significant(step), "s");
  return `every ${apart} of the last ${withUnit(significant(step * TRAIL), "s")}`;
}

/** The machine at the cursor. What has no drawing of its own shows its states as bars. */
export function Machine({ scenario, result }: MachineProps) {
  const host = useRef<HTMLDivElement>(null);
  const width = useWidth(host);
  const { plant } = scenario.loops[0];
  return (
    <div ref={host} className="machine">
      {plant.type === "pendulum-on-cart" ? (
        <Pendulum scenario={scenario} result={result} plant={plant} width={Math.min(380, width || 272)} />
      ) : (
        <StateBars scenario={scenario} result={result} width={Math.max(220, width || 272)} />
      )}
    </div>
  );
}

interface PendulumProps extends MachineProps {
  plant: PendulumSpec;
  width: number;
}

function Pendulum({ scenario, result, plant, width }: PendulumProps) {
  const svg = useRef<SVGSVGElement>(null);
  const picture = useMemo(() => machinePicture(plant, scenario, result, width), [plant, scenario, result, width]);
  const step = trailStepS(plant);
  usePose(svg, picture, plant, { scenario, result });
  const { hanging, pivotY } = picture;
  return (
    <svg
      ref={svg}
      width={picture.width}
      height={picture.height}
      viewBox={`0 0 ${picture.width} ${picture.height}`}
      role="img"
      aria-label={`${plantTitle(plant)} at the cursor, to scale, with its positions of the last ${significant(step * TRAIL)} seconds. The values stand in the table at the cursor.`}
    >
      <MachineRail picture={picture} reference={result.series.columns.some(({ name }) => name === "reference:position")} />
      <g data-part="trail">
        {Array.from({ length: TRAIL }, (_, age) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: a fixed row of lines that are only moved
          <g key={age} className="swing">
            <line opacity={0.49 - age * 0.033} />
            <circle r="1.6" opacity={0.64 - age * 0.033} />
          </g>
        ))}
      </g>
      <Fan picture={picture} />
      <path data-part="plumb" className="dash" />
      <g data-part="cart">{hanging ? <Trolley pivotY={pivotY} railY={picture.railY} /> : <Cart pivotY={pivotY} />}</g>
      <path data-part="rod-back" className="rod-back" />
      <path data-part="rod-front" className="rod-front" />
      <path data-part="load" className="body" />
      <circle data-part="pivot" cy={pivotY} r="4.6" className="paper" />
      <circle data-part="pivot" cy={pivotY} r="1.5" className="inkf" />
    </svg>
  );
}

/** Drawn around x = 0; moved as a whole. */
const Cart = ({ pivotY }: { pivotY: number }) => (
  <>
    <rect x="-27" y={pivotY - 2} width="54" height="24" className="body" />
    <circle cx="-15" cy={pivotY + 25.5} r="4.5" className="paper" />
    <circle cx="15" cy={pivotY + 25.5} r="4.5" className="paper" />
    <circle cx="18" cy={pivotY + 9} r="2.6" className="inkf" />
    <path d={`M13 ${pivotY + 4}a7 7 0 0 1 10 0`} className="ink" />
  </>
);

const Trolley = ({ pivotY, railY }: { pivotY: number; railY: number }) => (
  <>
    <path d={`M-15 ${railY + 3}V${pivotY - 14}M15 ${railY + 3}V${pivotY - 14}`} className="ink" />
    <circle cx="-15" cy={railY + 2} r="4.5" className="paper" />
    <circle cx="15" cy={railY + 2} r="4.5" className="paper" />
    <rect x="-27" y={pivotY - 16} width="54" height="17" className="body" />
    <circle cx="18" cy={pivotY - 6} r="2.6" className="inkf" />
    <path d={`M13 ${pivotY - 11}a7 7 0 0 1 10 0`} className="ink" />
  </>
);

/** Limits of the angle: a dotted ray each, rock at its end. Drawn around the pivot at x = 0. */
function Fan({ picture }: { picture: MachinePicture }) {
  const { angleLimits, hanging, pivotY, reach } = picture;
  const turn = hanging ? Math.PI : 0;
  const outer = reach + 14;
  return (
    <g data-part="fan">
      {angleLimits.map((limit) => {
        const at = (radius: number, beyond = 0) => fromPivot(0, pivotY, limit + turn + Math.sign(limit || 1) * beyond, radius);
        const point = ([x, y]: [number, number]) => `${x.toFixed(1)} ${y.toFixed(1)}`;
        const inner = Math.max(outer - 26, outer * 0.6);
        const beyond = 11.5 / outer;
        const [labelX, labelY] = at(hanging ? outer : inner - 4);
        const right = labelX > 0;
        // Sweep of the outer arc: away from the allowed side.
        const sweep = limit > 0 ? 1 : 0;
        return (
          <g key={limit}>
            <path d={`M${point(at(outer * 0.2))}L${point(at(outer))}`} className="lim" strokeDasharray="1 4" />
            <path
              d={`M${point(at(inner))}L${point(at(outer))}A${outer} ${outer} 0 0 ${sweep} ${point(at(outer, beyond))}L${point(at(inner, beyond))}A${inner} ${inner} 0 0 ${1 - sweep} ${point(at(inner))}Z`}
              className="rock"
            />
            <path d={`M${point(at(inner))}L${point(at(outer))}`} className="lim" />
            <text
              data-part="limit"
              data-x={labelX + (right ? 1 : -1) * (hanging ? 18 : 8)}
              data-side={right ? 1 : -1}
              x={labelX + (right ? 1 : -1) * (hanging ? 18 : 8)}
              y={labelY + (hanging ? 2 : 10)}
              className="axc"
              textAnchor={right ? "start" : "end"}
            >
              {limit > 0 ? "+" : ""}
              {withUnit(significant(limit * DEGREES), "°")}
            </text>
          </g>
        );
      })}
    </g>
  );
}

/** Moves the parts to where the run has them at the cursor. */
function usePose(svg: RefObject<SVGSVGElement | null>, picture: MachinePicture, plant: PendulumSpec, { scenario, result }: MachineProps): void {
  const { hanging, pivotY, pixelsPerM } = picture;
  const step = trailStepS(plant);
  useOnCursor(({ timeS }) => {
    const root = svg.current;
    const pose = poseAt(result, hanging, timeS);
    if (!root || !pose) return;
    const find = (name: string) => root.querySelectorAll<SVGElement>(`[data-part="${name}"]`);
    const body = bodyOf(specAt(plant, scenario.changes, timeS));
    const shift = railShift(picture, pose.x);
    const xOf = (metres: number) => shift + metres * pixelsPerM;
    const cartX = xOf(pose.x);
    const move = (name: string, x: number) => {
      for (const element of find(name)) element.setAttribute("transform", `translate(${x.toFixed(2)})`);
    };
    move("rail", shift - picture.width / 2);
    move("cart", cartX);
    move("fan", cartX);
    for (const label of find("limit")) {
      const x = cartX + Number(label.getAttribute("data-x"));
      const far = x + Number(label.getAttribute("data-side")) * (label.textContent ?? "").length * 6.4;
      label.style.display = far < 0 || far > picture.width ? "none" : "";
    }
    const line = (x: number, theta: number, fromM: number, toM: number) => {
      const [x1, y1] = fromPivot(x, pivotY, theta, fromM * pixelsPerM);
      const [x2, y2] = fromPivot(x, pivotY, theta, toM * pixelsPerM);
      return { x1, y1, x2, y2, d: `M${x1.toFixed(2)} ${y1.toFixed(2)}L${x2.toFixed(2)} ${y2.toFixed(2)}` };
    };
    const set = (name: string, d: string) => find(name)[0]?.setAttribute("d", d);
    // A body that fills less than half of its arm is a load on a rope (or a bob on a pole).
    const load = body.fromM > body.massCentreM / 2;
    const rod = line(cartX, pose.theta, 0, load ? body.fromM : body.toM);
    set("rod-back", rod.d);
    root.classList.toggle("rope", load);
    set("rod-front", load ? "M0 0" : rod.d);
    set("load", load ? loadPath(cartX, picture, pose.theta, body) : "M0 0");
    set("plumb", `M${cartX.toFixed(2)} ${pivotY}V${hanging ? pivotY + picture.reach + 14 : Math.max(0, pivotY - picture.reach - 14)}`);
    for (const pivot of find("pivot")) pivot.setAttribute("cx", cartX.toFixed(2));
    const trail = find("trail")[0]?.children ?? [];
    for (let age = 0; age < TRAIL; age++) {
      const group = trail[age] as SVGElement | undefined;
      const earlier = poseAt(result, hanging, timeS - (age + 1) * step);
      if (!group) continue;
      group.style.display = earlier ? "" : "none";
      if (!earlier) continue;
      const { x1, y1, x2, y2 } = line(xOf(earlier.x), earlier.theta, 0, load ? body.massCentreM : body.toM);
      const [ray, tip] = group.children;
      for (const [name, value] of Object.entries({ x1, y1, x2, y2 })) ray?.setAttribute(name, value.toFixed(1));
      tip?.setAttribute("cx", x2.toFixed(1));
      tip?.setAttribute("cy", y2.toFixed(1));
    }
    const reference = result.series.values[result.series.columns.findIndex(({ name }) => name === "reference:position")];
    if (reference) move("reference", valueAt(result.series.t, reference, Math.min(timeS, result.endedAtS)) * pixelsPerM + picture.width / 2);
  });
}

/** A block along the arm, as long as the body, at least large enough to be seen. */
function loadPath(
  cartX: number,
  { pivotY, pixelsPerM }: MachinePicture,
  theta: number,
  body: { fromM: number; toM: number; massCentreM: number },
): string {
  const half = Math.min(26, Math.max(8, ((body.toM - body.fromM) / 2) * pixelsPerM));
  const across = Math.min(22, Math.max(9, half * 1.25));
  const [x, y] = fromPivot(cartX, pivotY, theta, body.massCentreM * pixelsPerM);
  const along = [Math.sin(theta), -Math.cos(theta)] as const;
  const corner = (a: number, b: number) =>
    `${(x + along[0] * a * half - along[1] * b * across).toFixed(2)} ${(y + along[1] * a * half + along[0] * b * across).toFixed(2)}`;
  return `M${corner(-1, -1)}L${corner(-1, 1)}L${corner(1, 1)}L${corner(1, -1)}Z`;
}
