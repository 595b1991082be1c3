import { useEffect, useState } from "react";
import "./drawings.css";
import type { RunResult } from "#shared/simulation/result.ts";
import { useCursorValue, usePlotCursor } from "#src/components/plots/plot-cursor.ts";
import { niceStep } from "#src/components/plots/units.ts";
import { IconButton } from "#src/components/ui/button.tsx";
import { significant } from "#src/lib/format.ts";
import { useMedia } from "#src/lib/use-media.ts";

export interface TransportProps {
  result: RunResult;
  /** Said beside the buttons: what the thin lines of the machine are. */
  note?: string | null;
}

/** Runs of 4 to 40 s play at true speed; others at the round multiple of it that takes about ten seconds. */
export function usualSpeed(durationS: number): number {
  if (durationS >= 4 && durationS <= 40) return 1;
  const wanted = durationS / 10;
  return wanted > 1 ? niceStep(wanted * 0.7) : 1 / niceStep(0.7 / wanted);
}

/** "1/4", "1", "200" */
export function speedText(speed: number): string {
  return speed >= 1 ? significant(speed) : `1/${significant(1 / speed)}`;
}

const FASTER = [0.25, 1, 4] as const;
/** Without motion a press on play goes on by so many rounds. */
const STEP_ROUNDS = 10;

/** To the start, play or pause, speed. Drives the cursor of its PlotCursorContext. */
export function Transport({ result, note }: TransportProps) {
  const cursor = usePlotCursor();
  const playing = useCursorValue((at) => at.playing);
  const reduced = useMedia("(prefers-reduced-motion: reduce)");
  const [times, setTimes] = useState<(typeof FASTER)[number]>(1);
  const usual = usualSpeed(result.durationS);
  const { endedAtS } = result;
  const step = STEP_ROUNDS * result.rounds.periodS;

  useEffect(() => {
    if (!playing) return;
    if (reduced) {
      cursor.moveTo(cursor.timeS >= endedAtS - 1e-9 ? 0 : Math.min(endedAtS, cursor.timeS + step));
      cursor.setPlaying(false);
      return;
    }
    if (cursor.timeS >= endedAtS - 1e-9) cursor.moveTo(0);
    let before: number | null = null;
    let frame = requestAnimationFrame(function go(now) {
      const timeS = cursor.timeS + (before === null ? 0 : ((now - before) / 1000) * usual * times);
      before = now;
      cursor.moveTo(Math.min(endedAtS, timeS));
      if (timeS >= endedAtS) cursor.setPlaying(false);
      else frame = requestAnimationFrame(go);
    });
    return () => cancelAnimationFrame(frame);
  }, [playing, reduced, times, usual, endedAtS, step, cursor]);

  // A run that is left does not play on.
  useEffect(() => () => cursor.setPlaying(false), [cursor]);

  return (
    <div className="transport">
      <IconButton
        icon="to-start"
        label="To the start"
        small
        onClick={() => {
          cursor.setPlaying(false);
          cursor.moveTo(0);
        }}
      />
      <IconButton
        icon={playing ? "pause" : "play"}
        label={reduced ? `Go on by ${STEP_ROUNDS} rounds` : playing ? "Pause" : `Play at ${speedText(usual * times)} times true speed`}
        small
        onClick={() => cursor.setPlaying(!playing)}
      />
      {!reduced && (
        <fieldset className="speeds">
          <legend className="vh">Speed of the playback</legend>
          {FASTER.map((factor) => (
            <label key={factor}>
              <input type="radio" name="speed" checked={times === factor} onChange={() => setTimes(factor)} />
              {speedText(usual * factor)}×
            </label>
          ))}
        </fieldset>
      )}
      {note && <span className="note-line">{note}</span>}
    </div>
  );
}
