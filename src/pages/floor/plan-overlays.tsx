import { crosses } from "#shared/network/geometry.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import type { Contour } from "#src/components/plan/ground.tsx";
import { HIDDEN } from "#src/components/plan/hidden.ts";
import type { PlanScene } from "#src/components/plan/plan.tsx";
import type { Spot } from "#src/components/plan/plan-view.ts";
import { counted, fixed, significant, withUnit } from "#src/lib/format.ts";
import type { usePlanTools } from "./use-plan-tools.ts";
import type { Selection } from "./use-studio.ts";

interface OverlaysProps {
  scene: PlanScene;
  floor: Floor;
  tools: ReturnType<typeof usePlanTools>;
  selection: Selection;
  readOnly: boolean;
  contours: readonly Contour[] | null;
  step: number;
  scalingPoints: readonly Spot[];
}

/** What lies over the floor and under the nodes: numbers of contours, way-points, handles, what is being drawn or measured. */
export function Overlays({ scene, floor, tools, selection, readOnly, contours, step, scalingPoints }: OverlaysProps) {
  const { preview, begun, measured } = tools;
  const line = preview?.kind === "line" ? preview : null;
  const ruler = line?.as === "measure" ? line : measured;
  return (
    <>
      {contours && (
        <g {...HIDDEN}>
          {contours.map(({ step: at, label }) => {
            if (!label) return null;
            const { x, y } = scene.at(label);
            return (
              <text key={at} x={x} y={y + 4} textAnchor="middle" className={at === step ? "isot strong" : "isot"}>
                {at}
              </text>
            );
          })}
        </g>
      )}
      {floor.nodes.flatMap(({ id, wayPoints }) =>
        wayPoints.map((point, i) => {
          const { x, y } = scene.at(point);
          return (
            <circle
              key={`${id} ${point.atS} ${point.xM} ${point.yM}`}
              cx={x}
              cy={y}
              r="3.5"
              className={readOnly ? "pl-point" : "pl-point pl-grab"}
              data-thing={`way:${id}:${i}`}
            />
          );
        }),
      )}
      {selection?.kind === "obstacle" && !readOnly && <Handles scene={scene} floor={floor} index={selection.index} />}
      {line && line.as !== "measure" && <Drawn scene={scene} from={line.from} until={line.until} as={line.as} />}
      {begun && !line && <Dot scene={scene} spot={begun} />}
      {ruler && <Ruler scene={scene} floor={floor} from={ruler.from} until={ruler.until} />}
      {scalingPoints.map((spot) => (
        <Dot key={`${spot.xM} ${spot.yM}`} scene={scene} spot={spot} />
      ))}
      {scalingPoints.length === 2 && <Drawn scene={scene} from={scalingPoints[0]} until={scalingPoints[1]} as="wall" />}
    </>
  );
}

function Dot({ scene, spot }: { scene: PlanScene; spot: Spot }) {
  const { x, y } = scene.at(spot);
  return <path d={`M${x - 6} ${y}h12M${x} ${y - 6}v12`} className="pl-drawn" strokeDasharray="none" />;
}

function Drawn({ scene, from, until, as }: { scene: PlanScene; from: Spot; until: Spot; as: "wall" | "block" }) {
  const a = scene.at(from);
  const b = scene.at(until);
  const words =
    as === "wall"
      ? withUnit(fixed(Math.hypot(until.xM - from.xM, until.yM - from.yM), 1), "m")
      : `${fixed(Math.abs(until.xM - from.xM), 1)} × ${withUnit(fixed(Math.abs(until.yM - from.yM), 1), "m")}`;
  return (
    <g {...HIDDEN}>
      {as === "wall" ? (
        <path d={`M${a.x} ${a.y}L${b.x} ${b.y}`} className="pl-drawn" />
      ) : (
        <rect x={Math.min(a.x, b.x)} y={Math.min(a.y, b.y)} width={Math.abs(a.x - b.x)} height={Math.abs(a.y - b.y)} className="pl-drawn" />
      )}
      <text x={(a.x + b.x) / 2} y={(a.y + b.y) / 2 - 8} textAnchor="middle" className="txb halo">
        {words}
      </text>
    </g>
  );
}

/** A straight line with its length and what it crosses. */
function Ruler({ scene, floor, from, until }: { scene: PlanScene; floor: Floor; from: Spot; until: Spot }) {
  const a = scene.at(from);
  const b = scene.at(until);
  const crossed = floor.obstacles.filter((obstacle) => crosses(obstacle, from.xM, from.yM, until.xM, until.yM));
  const loss = crossed.reduce((sum, { lossDb }) => sum + lossDb, 0);
  const words = `${withUnit(fixed(Math.hypot(until.xM - from.xM, until.yM - from.yM), 1), "m")}${
    crossed.length > 0 ? `, through ${counted(crossed.length, "obstacle")}: ${withUnit(significant(loss, 3), "dB")}` : ", clear"
  }`;
  const length = Math.hypot(b.x - a.x, b.y - a.y) || 1;
  const across = { x: (-(b.y - a.y) / length) * 6, y: ((b.x - a.x) / length) * 6 };
  return (
    <g>
      <path
        d={`M${a.x} ${a.y}L${b.x} ${b.y}M${a.x - across.x} ${a.y - across.y}L${a.x + across.x} ${a.y + across.y}M${b.x - across.x} ${b.y - across.y}L${b.x + across.x} ${b.y + across.y}`}
        className="pl-measure"
      />
      <text x={(a.x + b.x) / 2} y={(a.y + b.y) / 2 - 10} textAnchor="middle" className="txb halo">
        {words}
      </text>
    </g>
  );
}

function Handles({ scene, floor, index }: { scene: PlanScene; floor: Floor; index: number }) {
  const obstacle = floor.obstacles[index];
  if (!obstacle) return null;
  const corners: [string, Spot][] =
    obstacle.type === "wall"
      ? [
          ["from", { xM: obstacle.fromXM, yM: obstacle.fromYM }],
          ["to", { xM: obstacle.toXM, yM: obstacle.toYM }],
        ]
      : [
          ["nw", { xM: obstacle.xM, yM: obstacle.yM }],
          ["ne", { xM: obstacle.xM + obstacle.widthM, yM: obstacle.yM }],
          ["sw", { xM: obstacle.xM, yM: obstacle.yM + obstacle.depthM }],
          ["se", { xM: obstacle.xM + obstacle.widthM, yM: obstacle.yM + obstacle.depthM }],
        ];
  return (
    <>
      {corners.map(([corner, spot]) => {
        const { x, y } = scene.at(spot);
        return (
          <rect key={corner} x={x - 4.5} y={y - 4.5} width="9" height="9" className="pl-handle pl-grab" data-thing={`handle:${index}:${corner}`} />
        );
      })}
    </>
  );
}
