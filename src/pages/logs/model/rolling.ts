/** Loss ratio over a window that moves along the log. */
import { niceStep } from "#src/components/plots/units.ts";
import { lostBetween, type RunIndex } from "./run-index.ts";

const POINTS = 240;
/** Windows of which about this many lie side by side in the log. */
const WINDOWS = 40;
const LEAST = 20;

export interface RollingPoint {
  /** Packet in the middle of the window. */
  at: number;
  ratio: number;
  low: number;
  high: number;
}
export interface Rolling {
  window: number;
  points: RollingPoint[];
  /** Of all upper ends. */
  highest: number;
}

export type RatioInterval = (lost: number, packets: number) => { low: number; high: number };

export function rollingLoss(index: RunIndex, interval: RatioInterval): Rolling {
  const { packets } = index;
  const window = Math.min(packets, Math.max(LEAST, niceStep(packets / WINDOWS)));
  const room = packets - window;
  const count = Math.min(POINTS, room + 1);
  const points = Array.from({ length: Math.max(1, count) }, (_, i): RollingPoint => {
    const from = count > 1 ? Math.round((i * room) / (count - 1)) : 0;
    const lost = lostBetween(index, from, from + window);
    return { at: from + window / 2, ratio: window > 0 ? lost / window : 0, ...interval(lost, Math.max(1, window)) };
  });
  return { window, points, highest: Math.max(...points.map(({ high }) => high)) };
}
