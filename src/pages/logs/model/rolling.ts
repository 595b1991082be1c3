/** Loss ratio over a window that moves along the log, with its interval. */
import { wilson } from "#shared/math/statistics.ts";
import { rollingLoss } from "#shared/reception/trace.ts";
import type { LinkTrace } from "#shared/reception/types.ts";
import { niceStep } from "#src/components/plots/units.ts";

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

export function rollingWithInterval(link: Pick<LinkTrace, "runs" | "packets" | "intervalS">): Rolling {
  const wanted = Math.max(LEAST, niceStep(link.packets / WINDOWS));
  const { window, points } = rollingLoss(link, { points: POINTS, window: wanted });
  const shown = points.map(({ packet, loss }): RollingPoint => {
    const [low, high] = wilson(loss * window, window);
    return { at: packet, ratio: loss, low, high };
  });
  return { window, points: shown, highest: Math.max(0, ...shown.map(({ high }) => high)) };
}
