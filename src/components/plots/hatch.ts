/** The rock: diagonal hatch outside what is allowed. Lines keep their place on the paper, so neighbouring pieces join. */
import type { Palette } from "./palette.ts";

/** Distance of the lines along an axis: 6 px across the lines. */
const PITCH = 6 * Math.SQRT2;

/** Fills the current clip of the rectangle with rock. */
export function hatch(ctx: CanvasRenderingContext2D, x: number, y: number, width: number, height: number, palette: Palette): void {
  if (!(width > 0) || !(height > 0)) return;
  ctx.save();
  ctx.beginPath();
  ctx.rect(x, y, width, height);
  ctx.clip();
  ctx.strokeStyle = palette.coral;
  ctx.globalAlpha = Number(palette.rockStrength) || 0.55;
  ctx.lineWidth = 1.3;
  ctx.beginPath();
  // Lines x + y = constant, rising to the right.
  for (let sum = Math.floor((x + y) / PITCH) * PITCH; sum <= x + width + y + height; sum += PITCH) {
    ctx.moveTo(sum - y, y);
    ctx.lineTo(sum - (y + height), y + height);
  }
  ctx.stroke();
  ctx.restore();
}
