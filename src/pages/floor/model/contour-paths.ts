/** The wave's water and shores as paths of the plan, and where the number of each shore stands. */
import type { FloodContours } from "#shared/network/contours.ts";
import type { Contour } from "#src/components/plan/ground.tsx";

interface Spot {
  xM: number;
  yM: number;
}

const f = (value: number): string => String(Math.round(value * 100) / 100);

function linePath(line: readonly number[], closed: boolean): string {
  let path = "";
  for (let i = 0; i + 1 < line.length; i += 2) path += `${i === 0 ? "M" : "L"}${f(line[i])} ${f(line[i + 1])}`;
  return closed ? `${path}Z` : path;
}
export const areaPath = (rings: readonly (readonly number[])[]): string => rings.map((ring) => linePath(ring, true)).join("");
const shorePath = (shores: readonly (readonly number[])[]): string => shores.map((shore) => linePath(shore, false)).join("");

/** A point of the shores inside the floor, as far as can be had from what stands there already. */
function labelSpot(shores: readonly (readonly number[])[], size: { widthM: number; depthM: number }, taken: readonly Spot[]): Spot | null {
  const airX = size.widthM * 0.04;
  const airY = size.depthM * 0.06;
  let best: Spot | null = null;
  let most = Math.min(size.widthM, size.depthM) * 0.06;
  for (const shore of shores)
    for (let i = 0; i + 1 < shore.length; i += 2) {
      const [xM, yM] = [shore[i], shore[i + 1]];
      if (xM < airX || yM < airY || xM > size.widthM - airX || yM > size.depthM - airY) continue;
      let away = Number.POSITIVE_INFINITY;
      for (const other of taken) away = Math.min(away, Math.hypot(other.xM - xM, other.yM - yM));
      if (away > most) {
        most = away;
        best = { xM, yM };
      }
    }
  return best;
}

/** `marks`: nodes, which the numbers keep away from. */
export function contoursOf({ steps }: FloodContours, size: { widthM: number; depthM: number }, marks: readonly Spot[]): Contour[] {
  const taken = [...marks];
  return steps.map(({ step, rings, shores }) => {
    const label = labelSpot(shores, size, taken);
    if (label) taken.push(label);
    return { step, fill: areaPath(rings), line: shorePath(shores), label };
  });
}
