/** Where nodes are at an instant, and what a straight line between two of them crosses. Lengths in m, times in s. */
import type { FloorNode, Obstacle } from "#shared/scenario/floor-schema.ts";

/** A node's way: a polyline over time, from its place at t = 0. */
export interface Way {
  times: Float64Array;
  x: Float64Array;
  y: Float64Array;
  /** Way covered until each point, m. */
  covered: Float64Array;
  heightM: number;
  moves: boolean;
}

export function wayOf(node: FloorNode): Way {
  const points = [{ atS: 0, xM: node.xM, yM: node.yM }, ...node.wayPoints];
  const x = Float64Array.from(points, (point) => point.xM);
  const y = Float64Array.from(points, (point) => point.yM);
  const covered = new Float64Array(points.length);
  for (let i = 1; i < points.length; i++) covered[i] = covered[i - 1] + distance(x[i] - x[i - 1], y[i] - y[i - 1], 0);
  return { times: Float64Array.from(points, (point) => point.atS), x, y, covered, heightM: node.heightM, moves: covered[points.length - 1] > 0 };
}

export const distance = (dx: number, dy: number, dz: number): number => Math.sqrt(dx * dx + dy * dy + dz * dz);

/** Last point at or before the instant; of several at one instant the last, so that a jump is made at once. */
function pieceAt(way: Way, atS: number): number {
  let i = way.times.length - 1;
  while (i > 0 && way.times[i] > atS) i--;
  return i;
}

/** Writes x, y and the way covered to out[0..2]. */
export function placeAt(way: Way, atS: number, out: Float64Array): void {
  const i = pieceAt(way, atS);
  const { times, x, y, covered } = way;
  const next = i + 1;
  const part = next < times.length ? Math.max(0, atS - times[i]) / (times[next] - times[i]) : 0;
  out[0] = part > 0 ? x[i] + part * (x[next] - x[i]) : x[i];
  out[1] = part > 0 ? y[i] + part * (y[next] - y[i]) : y[i];
  out[2] = part > 0 ? covered[i] + part * (covered[next] - covered[i]) : covered[i];
}

/** Speed, m/s. 0 before t = 0 and after the last point. */
export function speedAt(way: Way, atS: number): number {
  const i = pieceAt(way, atS);
  if (atS < 0 || i + 1 >= way.times.length) return 0;
  return (way.covered[i + 1] - way.covered[i]) / (way.times[i + 1] - way.times[i]);
}

/** Twice the signed area of the triangle a, b, c. */
const turn = (ax: number, ay: number, bx: number, by: number, cx: number, cy: number): number => (bx - ax) * (cy - ay) - (by - ay) * (cx - ax);

/** Do the closed segments a-b and c-d have a point in common? Touching ends do, so do pieces of one line that overlap. */
function segmentsMeet(ax: number, ay: number, bx: number, by: number, cx: number, cy: number, dx: number, dy: number): boolean {
  if (Math.max(ax, bx) < Math.min(cx, dx) || Math.max(cx, dx) < Math.min(ax, bx)) return false;
  if (Math.max(ay, by) < Math.min(cy, dy) || Math.max(cy, dy) < Math.min(ay, by)) return false;
  // Each segment's ends lie on both sides of the other's line, or on it; that their boxes meet settles the case of one common line.
  const c = turn(ax, ay, bx, by, cx, cy);
  const d = turn(ax, ay, bx, by, dx, dy);
  if ((c > 0 && d > 0) || (c < 0 && d < 0)) return false;
  const a = turn(cx, cy, dx, dy, ax, ay);
  const b = turn(cx, cy, dx, dy, bx, by);
  return !((a > 0 && b > 0) || (a < 0 && b < 0));
}

/** Does the closed segment have a point in the closed rectangle? By clipping it (Liang and Barsky, ACM TOG 3(1), 1984). */
function meetsRectangle(ax: number, ay: number, bx: number, by: number, left: number, top: number, right: number, bottom: number): boolean {
  let from = 0;
  let until = 1;
  const dx = bx - ax;
  const dy = by - ay;
  if (dx === 0) {
    if (ax < left || ax > right) return false;
  } else {
    const p = (left - ax) / dx;
    const q = (right - ax) / dx;
    from = Math.max(from, Math.min(p, q));
    until = Math.min(until, Math.max(p, q));
  }
  if (dy === 0) {
    if (ay < top || ay > bottom) return false;
  } else {
    const p = (top - ay) / dy;
    const q = (bottom - ay) / dy;
    from = Math.max(from, Math.min(p, q));
    until = Math.min(until, Math.max(p, q));
  }
  return from <= until;
}

/**
 * Does the straight line a-b on the plan cross the obstacle? Touching counts, a wall that the line runs along counts once, a
 * line that ends in a block counts; a wall without length is not there.
 */
export function crosses(obstacle: Obstacle, ax: number, ay: number, bx: number, by: number): boolean {
  if (obstacle.type === "block")
    return meetsRectangle(ax, ay, bx, by, obstacle.xM, obstacle.yM, obstacle.xM + obstacle.widthM, obstacle.yM + obstacle.depthM);
  const { fromXM, fromYM, toXM, toYM } = obstacle;
  if (fromXM === toXM && fromYM === toYM) return false;
  return segmentsMeet(ax, ay, bx, by, fromXM, fromYM, toXM, toYM);
}

/** Sum of the losses of the obstacles that the line crosses, dB. */
export function obstacleLossDb(obstacles: readonly Obstacle[], ax: number, ay: number, bx: number, by: number): number {
  let sum = 0;
  for (const obstacle of obstacles) if (crosses(obstacle, ax, ay, bx, by)) sum += obstacle.lossDb;
  return sum;
}
