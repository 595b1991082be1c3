import { type ReactNode, type Ref, useMemo, useRef, useState } from "react";
import "./drawings.css";
import type { RoundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { drawnExtentS } from "#src/components/plots/drawn-extent.ts";
import { useWidth } from "#src/components/plots/measure.ts";
import { createPlotCursor, type PlotCursor, PlotCursorContext } from "#src/components/plots/plot-cursor.ts";
import { usualSignals } from "#src/components/plots/plot-signals.ts";
import { PlotStack, type PlotStackHandle } from "#src/components/plots/plot-stack.tsx";
import { counted, msText } from "#src/lib/format.ts";
import { CursorTable } from "./cursor-table.tsx";
import { LimitStrip } from "./limit-strip.tsx";
import { Machine, trailText } from "./machine.tsx";
import { PlotTools } from "./plot-tools.tsx";
import type { ReachedShares } from "./ribbon-geometry.ts";
import { RoundRibbon, stairsNote } from "./round-ribbon.tsx";
import { deliveredOf } from "./slot-facts.ts";
import { SlotTable } from "./slot-table.tsx";
import { spentText } from "./spent.ts";
import { tellingInstant } from "./telling-instant.ts";
import { Transport } from "./transport.tsx";

export interface RunBenchProps {
  /** The scenario that gave the result (not the one being edited, when that has an error). */
  scenario: Scenario;
  timing: RoundTiming;
  result: RunResult;
  /** The last good result while the set-up has an error: colours are taken out. */
  stale?: boolean;
  /** To move the cursor from outside; else the bench has its own. */
  cursor?: PlotCursor;
  /** Further buttons on the line below the plots. */
  actions?: ReactNode;
  /** Below the values at the cursor: what else happens at that instant. */
  beside?: ReactNode;
  /** What the floods of the run came to, where floods decided. */
  reached?: { reached: ReachedShares; delivered: Readonly<Record<string, number>>; rounds: number } | null;
  stackRef?: Ref<PlotStackHandle>;
}

/** A cursor for this run, at the instant that tells most. Where the screen stays, it stays too. */
export function useRunCursor(result: RunResult): PlotCursor {
  const [cursor] = useState(() => createPlotCursor(drawnExtentS(result), tellingInstant(result)));
  return cursor;
}

/** On a phone the first screen has to hold machine, plots and tapes. */
const NARROW_SIGNALS = 2;

/** "25 ms · 3 hops · 2 transmissions · 6 steps a slot" */
function roundText({ round }: Scenario, timing: RoundTiming): string {
  const steps = timing.slots[0]?.steps;
  return [
    msText(timing.periodS),
    counted(round.hops, "hop"),
    counted(round.transmissions, "transmission"),
    ...(steps === undefined ? [] : [`${counted(steps, "step")} a slot`]),
  ].join(" · ");
}

/** Limits, machine, values at the cursor, plots, tapes, time axis and round ribbon: all that stands below the verdict line. */
export function RunBench({ scenario, timing, result, stale = false, cursor: given, actions, beside, reached, stackRef }: RunBenchProps) {
  const own = useRunCursor(result);
  const host = useRef<HTMLDivElement>(null);
  const narrow = useWidth(host) < 520;
  const [chosen, setChosen] = useState<readonly string[] | null>(null);
  const usual = useMemo(() => usualSignals(scenario, result), [scenario, result]);
  const signals = chosen ?? (narrow ? usual.slice(0, NARROW_SIGNALS) : usual);
  const delivered = useMemo(() => reached?.delivered ?? deliveredOf(scenario, result), [reached, scenario, result]);
  const spent = useMemo(() => spentText(scenario, timing, result), [scenario, timing, result]);
  return (
    <PlotCursorContext value={given ?? own}>
      <div ref={host} className={stale ? "run-bench stale" : "run-bench"}>
        <LimitStrip scenario={scenario} result={result} />
        <div className="bench-scene">
          <div className="bench-machine">
            <Machine scenario={scenario} result={result} />
            <Transport result={result} note={trailText(scenario)} />
            <CursorTable scenario={scenario} result={result} />
            {beside}
          </div>
          <div className="bench-plots">
            <PlotStack scenario={scenario} result={result} signals={signals} stale={stale} ref={stackRef} />
            <PlotTools result={result} signals={signals} chosen={chosen !== null} onSignals={setChosen}>
              {actions}
            </PlotTools>
          </div>
        </div>
        <section className="bench-round" aria-label="Round">
          <div className="hrow">
            <h2>Round</h2>
            <span className="rt">{roundText(scenario, timing)}</span>
          </div>
          <RoundRibbon timing={timing} reachedShare={reached?.reached} tabled />
          <p className="note-line">
            {stairsNote(reached?.reached, reached?.rounds)} {spent}
          </p>
          <SlotTable
            timing={timing}
            floor={scenario.floor}
            delivered={delivered}
            deliveredOver="in the floods of the planned rounds; outages of the losses come on top"
            fileStem={scenario.name}
          />
        </section>
      </div>
    </PlotCursorContext>
  );
}
