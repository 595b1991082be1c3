import { useEffect, useMemo, useRef, useState } from "react";
import type { Rounds } from "#shared/simulation/result.ts";
import { paintTape } from "./paint-stack.ts";
import { onThemeChange, paletteOf } from "./palette.ts";
import { useOnCursor } from "./plot-cursor.ts";
import { TAPE } from "./stack-layout.ts";
import { lossRecord, tapePieces } from "./tape-pieces.ts";

export interface LossTapeProps {
  rounds: Rounds;
  message: "measurement" | "command";
}

/** One piece of tape per round, lost ones cut out. Alone, without the plots; follows the zoom of its PlotCursorContext. */
export function LossTape({ rounds, message }: LossTapeProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const [, setEpoch] = useState(0);
  const delivered = message === "measurement" ? rounds.measurementDelivered : rounds.commandDelivered;
  const record = useMemo(() => lossRecord(delivered, rounds.count), [delivered, rounds.count]);
  const lost = record.lostBefore[rounds.count] ?? 0;

  useEffect(() => onThemeChange(() => setEpoch((count) => count + 1)), []);
  useOnCursor(({ view }) => {
    const element = canvas.current;
    const ctx = element?.getContext("2d");
    if (!element || !ctx) return;
    const ratio = devicePixelRatio || 1;
    const width = element.clientWidth;
    element.width = Math.round(width * ratio);
    element.height = Math.round((TAPE + 6) * ratio);
    ctx.scale(ratio, ratio);
    const span = { periodS: rounds.periodS, count: rounds.count, ...view, left: 0, right: width, pixel: 1 / ratio };
    paintTape(ctx, tapePieces(record, span), 0, paletteOf(element), 1 / ratio);
  });

  return (
    <canvas
      ref={canvas}
      style={{ width: "100%", height: TAPE + 6, display: "block" }}
      role="img"
      aria-label={`${message === "measurement" ? "Measurements" : "Commands"}: ${lost} of ${rounds.count} lost`}
    />
  );
}
