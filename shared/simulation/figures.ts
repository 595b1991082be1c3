import { toNs } from "#shared/network/schedule.ts";
import type { Trace } from "./assemble.ts";
import type { MessageFigures, SignalFigures } from "./result.ts";

/** Largest and smallest value on grid and events; RMS and integral squared error on the grid alone (equal weights). */
export function signalFigures(trace: Trace, t: Float64Array): SignalFigures {
  const { grid, extra, reference, column } = trace;
  let max = Number.NEGATIVE_INFINITY;
  let min = Number.POSITIVE_INFINITY;
  let squares = 0;
  let errors = 0;
  for (let i = 0; i < grid.length; i++) {
    const value = grid[i];
    if (value > max) max = value;
    if (value < min) min = value;
    squares += value * value;
  }
  if (reference) {
    for (let i = 0; i < grid.length; i++) {
      const error = grid[i] - reference(toNs(t[i]));
      errors += error * error;
    }
  } else errors = squares;
  for (let i = 0; i < extra.length; i++) {
    if (extra[i] > max) max = extra[i];
    if (extra[i] < min) min = extra[i];
  }
  const count = Math.max(1, grid.length);
  const span = grid.length > 1 ? t[grid.length - 1] : 0;
  return {
    name: column.name,
    unit: column.unit,
    max: Number.isFinite(max) ? max : 0,
    min: Number.isFinite(min) ? min : 0,
    rms: Math.sqrt(squares / count),
    ise: (errors / count) * span,
  };
}

export function messageFigures(message: MessageFigures["message"], delivered: Uint8Array): MessageFigures {
  let lost = 0;
  let streak = 0;
  let longestLoss = 0;
  for (let k = 0; k < delivered.length; k++) {
    streak = delivered[k] ? 0 : streak + 1;
    lost += delivered[k] ? 0 : 1;
    longestLoss = Math.max(longestLoss, streak);
  }
  return { message, sent: delivered.length, lost, longestLoss };
}
