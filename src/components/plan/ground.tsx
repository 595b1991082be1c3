/** What lies on the floor, drawn in metres. Strokes keep their width whatever the zoom; textures too, by a pattern of their own. */
import { memo } from "react";
import type { FloorNode, Interferer, Obstacle } from "#shared/scenario/floor-schema.ts";
import { HIDDEN } from "./hidden.ts";
import type { PlanSize } from "./plan-view.ts";

const rectOf = (obstacle: Extract<Obstacle, { type: "block" }>) => ({
  x: obstacle.xM,
  y: obstacle.yM,
  width: obstacle.widthM,
  height: obstacle.depthM,
});

/** The sheet on which the floor is drawn, and its outline. */
export const Hall = memo(({ size: { widthM, depthM } }: { size: PlanSize }) => <rect width={widthM} height={depthM} className="paperf" />);
/** Outlines that close outside of the floor are cut at its walls. */
export const HallClip = memo(({ size: { widthM, depthM }, prefix }: { size: PlanSize; prefix: string }) => (
  <clipPath id={`${prefix}-hall`}>
    <rect width={widthM} height={depthM} />
  </clipPath>
));
export const HallOutline = memo(({ size: { widthM, depthM } }: { size: PlanSize }) => <rect width={widthM} height={depthM} className="pl-hall" />);

/** Textures in pixels, though what they fill is drawn in metres. */
export function PlanTextures({ scale, prefix }: { scale: number; prefix: string }) {
  const shrink = `scale(${1 / scale})`;
  return (
    <defs>
      <pattern id={`${prefix}-rack`} width="5" height="5" patternUnits="userSpaceOnUse" patternTransform={shrink}>
        <path d="M0 0L5 5M5 0L0 5" className="p-rack" />
      </pattern>
      <pattern id={`${prefix}-foul`} width="8" height="8" patternUnits="userSpaceOnUse" patternTransform={shrink}>
        <path d="M1 2h2M2 1v2M5 6h2M6 5v2" className="p-foul" />
      </pattern>
    </defs>
  );
}

export interface PictureUnder {
  url: string;
  xM: number;
  yM: number;
  widthM: number;
  depthM: number;
  opacity: number;
}

export const PictureLayer = memo(({ picture }: { picture: PictureUnder }) => (
  <image
    href={picture.url}
    x={picture.xM}
    y={picture.yM}
    width={picture.widthM}
    height={picture.depthM}
    opacity={picture.opacity}
    preserveAspectRatio="none"
    data-thing="picture"
    className="pl-picture"
  />
));

export interface Contour {
  step: number;
  /** Ground that has the message by this step in half of the floods, m; even-odd. */
  fill: string;
  line: string;
  /** Where its number stands. */
  label: { xM: number; yM: number } | null;
}

/** Reached water up to the present step, fuller near the sender; the present front is thick, later ones are dotted. */
export const WaterLayer = memo(({ contours, step }: { contours: readonly Contour[]; step: number }) => {
  const reached = contours.filter((contour) => contour.step <= step);
  return (
    <g {...HIDDEN}>
      {reached.toReversed().map((contour, i, { length }) => (
        <path key={contour.step} d={contour.fill} fillRule="evenodd" className={`c${waterTone(length - 1 - i, length)}`} />
      ))}
    </g>
  );
});

/** Four tones from the sender outwards; the front keeps the thinnest. */
function waterTone(fromSender: number, count: number): 1 | 2 | 3 | 4 {
  if (count <= 1) return 4;
  const tone = 4 - Math.round((fromSender * Math.min(count - 1, 3)) / (count - 1));
  return Math.max(1, Math.min(4, tone)) as 1 | 2 | 3 | 4;
}

export const FrontLayer = memo(({ contours, step }: { contours: readonly Contour[]; step: number }) => (
  <g {...HIDDEN}>
    {contours.map((contour) => (
      <path key={contour.step} d={contour.line} className={contour.step === step ? "iso isob" : contour.step > step ? "iso future" : "iso"} />
    ))}
  </g>
));

export interface FoulGround {
  index: number;
  path: string;
}

export const FoulLayer = memo(({ fouled, prefix }: { fouled: readonly FoulGround[]; prefix: string }) => (
  <g {...HIDDEN}>
    {fouled.map(({ index, path }) => (
      <g key={index}>
        <path d={path} fill={`url(#${prefix}-foul)`} className="pl-foul" />
        <path d={path} className="pl-foull" />
      </g>
    ))}
  </g>
));

interface ObstaclesProps {
  obstacles: readonly Obstacle[];
  selected: number | null;
  prefix: string;
}

export const ObstacleLayer = memo(({ obstacles, selected, prefix }: ObstaclesProps) => (
  <g>
    {obstacles.map((obstacle, i) =>
      obstacle.type === "block" ? (
        // biome-ignore lint/suspicious/noArrayIndexKey: obstacles have no other name
        <g key={i} data-thing={`obstacle:${i}`} className={i === selected ? "pl-thing on" : "pl-thing"}>
          <rect {...rectOf(obstacle)} className="pl-rackbg" />
          <rect {...rectOf(obstacle)} className="pl-rack" fill={`url(#${prefix}-rack)`} />
        </g>
      ) : (
        // biome-ignore lint/suspicious/noArrayIndexKey: obstacles have no other name
        <g key={i} data-thing={`obstacle:${i}`} className={i === selected ? "pl-thing on" : "pl-thing"}>
          <line x1={obstacle.fromXM} y1={obstacle.fromYM} x2={obstacle.toXM} y2={obstacle.toYM} className="pl-hit" />
          <line x1={obstacle.fromXM} y1={obstacle.fromYM} x2={obstacle.toXM} y2={obstacle.toYM} className="pl-wall" />
        </g>
      ),
    )}
  </g>
));

/** Ways of nodes that move. */
export const WayLayer = memo(({ nodes, selected }: { nodes: readonly FloorNode[]; selected: number | null }) => (
  <g {...HIDDEN}>
    {nodes
      .filter(({ wayPoints }) => wayPoints.length > 0)
      .map(({ id, xM, yM, wayPoints }) => (
        <path
          key={id}
          d={`M${xM} ${yM}${wayPoints.map((point) => `L${point.xM} ${point.yM}`).join("")}`}
          className={id === selected ? "pl-way on" : "pl-way"}
        />
      ))}
  </g>
));

export interface DrawnLink {
  to: number;
  prr: number;
  from: { xM: number; yM: number };
  until: { xM: number; yM: number };
}
/** Good links drawn through, weak ones broken; what is hardly ever received is not drawn. */
export const LEAST_DRAWN = 0.05;
export const GOOD_LINK = 0.9;

export const LinkLayer = memo(({ links }: { links: readonly DrawnLink[] }) => (
  <g {...HIDDEN}>
    {links.map(({ to, prr, from, until }) => (
      <line
        key={to}
        x1={from.xM}
        y1={from.yM}
        x2={until.xM}
        y2={until.yM}
        className={prr >= GOOD_LINK ? "pl-link" : prr >= 0.5 ? "pl-link weak" : "pl-link faint"}
      />
    ))}
  </g>
));

export const interfererWords = ({ name }: Interferer, index: number): string => name || `Interferer ${index + 1}`;
