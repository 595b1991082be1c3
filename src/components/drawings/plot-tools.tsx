import type { ReactNode } from "react";
import type { RunResult } from "#shared/simulation/result.ts";
import { useCursorValue, usePlotCursor } from "#src/components/plots/plot-cursor.ts";
import { plottable } from "#src/components/plots/plot-signals.ts";
import { timeDecimals } from "#src/components/plots/units.ts";
import { Button, IconButton } from "#src/components/ui/button.tsx";
import { fixed } from "#src/lib/format.ts";

interface PlotToolsProps {
  result: RunResult;
  /** Those that are shown. */
  signals: readonly string[];
  /** By hand, not the usual ones. */
  chosen: boolean;
  onSignals(signals: readonly string[] | null): void;
  children?: ReactNode;
}

/** Zoom, which signals are shown, and what the page adds. */
export function PlotTools({ result, signals, chosen, onSignals, children }: PlotToolsProps) {
  const cursor = usePlotCursor();
  const decimals = timeDecimals(result.rounds.periodS / 10);
  const zoomed = useCursorValue(({ view, durationS }) =>
    view.fromS === 0 && view.untilS === durationS ? "" : `${fixed(view.fromS, decimals)} to ${fixed(view.untilS, decimals)} s`,
  );
  const columns = plottable(result);
  const toggle = (name: string) => {
    const next = columns.map((column) => column.name).filter((other) => (other === name) !== signals.includes(other));
    if (next.length > 0) onSignals(next);
  };
  return (
    <div className="plot-tools">
      <div className="zoom">
        <IconButton icon="minus" label="Zoom out" small onClick={() => cursor.zoomBy(2)} impossible={zoomed ? null : "The whole run is shown"} />
        <IconButton icon="plus" label="Zoom in around the cursor" small onClick={() => cursor.zoomBy(0.5)} />
        {zoomed ? (
          <>
            <Button kind="bare" small onClick={() => cursor.resetZoom()}>
              Whole run
            </Button>
            <span className="note-line">{zoomed}</span>
          </>
        ) : (
          <span className="note-line hint">drag across the plots to zoom</span>
        )}
      </div>
      <details className="signals">
        <summary>
          Signals{" "}
          <span className="second">
            {signals.length} of {columns.length}
          </span>
        </summary>
        <fieldset>
          <legend className="vh">Signals in the plots</legend>
          {columns.map(({ name, label }) => (
            <label key={name}>
              <input type="checkbox" checked={signals.includes(name)} onChange={() => toggle(name)} /> {label}
            </label>
          ))}
          {chosen && (
            <Button kind="bare" small onClick={() => onSignals(null)}>
              The usual ones
            </Button>
          )}
        </fieldset>
      </details>
      {children}
    </div>
  );
}
