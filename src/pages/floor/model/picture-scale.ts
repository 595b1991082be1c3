/** Scaling a picture by two of its points and their distance on the floor. */
import type { Floor } from "#shared/scenario/floor-schema.ts";

type Placed = NonNullable<Floor["picture"]>;
interface Spot {
  xM: number;
  yM: number;
}

const LEAST = 1e-5;
const MOST = 100;

/** The first point stays where it is. */
export function rescaled(picture: Placed, a: Spot, b: Spot, distanceM: number): { ok: true; picture: Placed } | { ok: false } {
  const now = Math.hypot(a.xM - b.xM, a.yM - b.yM);
  const ratio = distanceM / now;
  const metresPerPixel = Number((picture.metresPerPixel * ratio).toPrecision(8));
  if (!(now > 0) || metresPerPixel < LEAST || metresPerPixel > MOST) return { ok: false };
  const on = (value: number) => Number(value.toFixed(3));
  return {
    ok: true,
    picture: { ...picture, metresPerPixel, xM: on(a.xM - (a.xM - picture.xM) * ratio), yM: on(a.yM - (a.yM - picture.yM) * ratio) },
  };
}
