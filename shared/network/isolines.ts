/**
 * Lines of equal value on a grid: marching squares, closed at the border of the plan (after Lorensen and Cline, SIGGRAPH 1987, in
 * the plane; a saddle goes by the mean of its corners). Pure arithmetic.
 */

/** Points row by row, the first at (0, 0), the last at (widthM, depthM). */
export interface Grid {
  columns: number;
  rows: number;
  widthM: number;
  depthM: number;
}

/** Coordinates x, y, x, y, ... in m. */
export interface Isoline {
  /** Around every area at or above the level, closed along the border; holes by the even-odd rule. The first point is not repeated. */
  rings: number[][];
  /** The rings' pieces that do not run along the border; one that touches it nowhere repeats its first point at the end. */
  shores: number[][];
}

export const gridX = ({ columns, widthM }: Grid, column: number): number => (column >= columns - 1 ? widthM : (column * widthM) / (columns - 1));
export const gridY = ({ rows, depthM }: Grid, row: number): number => (row >= rows - 1 ? depthM : (row * depthM) / (rows - 1));

export function isolines(grid: Grid, values: ArrayLike<number>, level: number): Isoline {
  const { columns, rows } = grid;
  // A frame of points below every level, in the same places as the outermost ones, closes every ring.
  const width = columns + 2;
  const x = (column: number) => gridX(grid, Math.min(columns - 1, Math.max(0, column - 1)));
  const y = (row: number) => gridY(grid, Math.min(rows - 1, Math.max(0, row - 1)));
  const value = (column: number, row: number) =>
    column < 1 || row < 1 || column > columns || row > rows ? Number.NEGATIVE_INFINITY : values[(row - 1) * columns + column - 1];
  const inside = (column: number, row: number) => value(column, row) >= level;

  /** Edges have numbers: twice the point's, and one more for the edge downwards. From each crossed edge to the next, with the inside at the right. */
  const next = new Map<number, number>();
  for (let row = 0; row <= rows; row++) {
    for (let column = 0; column <= columns; column++) {
      const tl = inside(column, row);
      const tr = inside(column + 1, row);
      const br = inside(column + 1, row + 1);
      const bl = inside(column, row + 1);
      if (tl === tr && tr === br && br === bl) continue;
      const top = 2 * (row * width + column);
      const left = top + 1;
      const right = top + 3;
      const bottom = top + 2 * width;
      if (tl === br && tr === bl && tl !== tr) {
        const mean = (value(column, row) + value(column + 1, row) + value(column + 1, row + 1) + value(column, row + 1)) / 4;
        const joined = mean >= level;
        if (tl) {
          next.set(top, joined ? right : left);
          next.set(bottom, joined ? left : right);
        } else {
          next.set(right, joined ? bottom : top);
          next.set(left, joined ? top : bottom);
        }
        continue;
      }
      const from = tl && !tr ? top : tr && !br ? right : br && !bl ? bottom : left;
      const to = tl && !bl ? left : tr && !tl ? top : br && !tr ? right : bottom;
      next.set(from, to);
    }
  }

  const point = (edge: number, out: number[]): void => {
    const at = edge >> 1;
    const column = at % width;
    const row = Math.floor(at / width);
    const down = (edge & 1) === 1;
    const [a, b] = [value(column, row), down ? value(column, row + 1) : value(column + 1, row)];
    // Where one of the two is the frame, the crossing is at the other.
    const part = a === Number.NEGATIVE_INFINITY ? 1 : b === Number.NEGATIVE_INFINITY ? 0 : (level - a) / (b - a);
    const px = down ? x(column) : x(column) + part * (x(column + 1) - x(column));
    const py = down ? y(row) + part * (y(row + 1) - y(row)) : y(row);
    if (out.length > 0 && out[out.length - 2] === px && out[out.length - 1] === py) return;
    out.push(px, py);
  };

  // Half a cell is as little as the grid can tell from nothing.
  const speck = (grid.widthM * grid.depthM) / (columns - 1) / (rows - 1) / 2;
  const rings: number[][] = [];
  const done = new Set<number>();
  for (const start of next.keys()) {
    if (done.has(start)) continue;
    const ring: number[] = [];
    for (let edge = start; !done.has(edge); edge = next.get(edge) ?? start) {
      done.add(edge);
      point(edge, ring);
    }
    if (ring.length > 2 && ring[0] === ring[ring.length - 2] && ring[1] === ring[ring.length - 1]) ring.length -= 2;
    if (Math.abs(areaOf(ring)) >= speck) rings.push(ring);
  }
  return { rings, shores: rings.flatMap((ring) => shoresOf(ring, grid)) };
}

/** Signed, m². */
function areaOf(ring: readonly number[]): number {
  let twice = 0;
  for (let i = 0; i < ring.length; i += 2) {
    const j = (i + 2) % ring.length;
    twice += ring[i] * ring[j + 1] - ring[j] * ring[i + 1];
  }
  return twice / 2;
}

function shoresOf(ring: readonly number[], { widthM, depthM }: Grid): number[][] {
  const count = ring.length / 2;
  const x = (i: number) => ring[2 * (i % count)];
  const y = (i: number) => ring[2 * (i % count) + 1];
  const alongBorder = (i: number) => (x(i) === x(i + 1) && (x(i) === 0 || x(i) === widthM)) || (y(i) === y(i + 1) && (y(i) === 0 || y(i) === depthM));
  let start = 0;
  while (start < count && !alongBorder(start)) start++;
  if (start === count) return [[...ring, ring[0], ring[1]]];
  const shores: number[][] = [];
  let shore: number[] = [];
  for (let i = start + 1; i <= start + count; i++) {
    shore.push(x(i), y(i));
    if (!alongBorder(i)) continue;
    if (shore.length > 2) shores.push(shore);
    shore = [];
  }
  return shores;
}
