import { useMemo, useRef } from "react";
import "./drawings.css";
import { roundsOf } from "#shared/scenario/rounds.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { useOnCursor } from "#src/components/plots/plot-cursor.ts";
import { plotSignals, plottable } from "#src/components/plots/plot-signals.ts";
import { valueAt } from "#src/components/plots/series-points.ts";
import { formatNumber, formatTime, timeDecimals } from "#src/components/plots/units.ts";
import { withUnit } from "#src/lib/format.ts";
import { commandFact, type MessageFact, measurementFact, recordsOf } from "./cursor-facts.ts";

export interface CursorTableProps {
  scenario: Scenario;
  result: RunResult;
}

/** States, inputs, and what became of the messages, at the cursor. */
export function CursorTable({ scenario, result }: CursorTableProps) {
  const host = useRef<HTMLDivElement>(null);
  const { t } = result.series;
  const records = useMemo(() => recordsOf(result), [result]);
  const rows = useMemo(
    () =>
      plotSignals(
        scenario,
        result,
        plottable(result).map(({ name }) => name),
      ),
    [scenario, result],
  );
  // Of the network: a loop may sample in some rounds only.
  const rounds = Math.max(1, roundsOf(scenario));
  const decimals = timeDecimals(result.rounds.periodS / 10);

  useOnCursor(({ timeS }) => {
    const root = host.current;
    if (!root) return;
    const write = (name: string, text: string) => {
      const element = root.querySelector(`[data-part="${name}"]`);
      if (element && element.textContent !== text) element.textContent = text;
    };
    write("time", formatTime(timeS, decimals));
    rows.forEach(({ values, stair, factor, decimals: digits, unit }, index) => {
      const value = valueAt(t, values, timeS, stair);
      write(`value${index}`, Number.isFinite(value) ? withUnit(formatNumber(value * factor, digits), unit) : "none");
    });
    const over = timeS > result.endedAtS + 1e-9;
    write("round", over ? "over" : String(Math.min(rounds - 1, Math.floor(timeS / scenario.round.periodS + 1e-9))));
    const tell = (name: string, fact: MessageFact) => {
      write(`${name}-word`, over ? "none" : fact.word);
      write(`${name}-more`, over ? "" : fact.more);
      root.querySelector(`[data-part="${name}-word"]`)?.classList.toggle("lost", fact.lost && !over);
    };
    tell("y", measurementFact(result, records, timeS));
    tell("u", commandFact(scenario, result, records, timeS));
  });

  return (
    <div ref={host} className="at-cursor">
      <p>
        At the cursor, <span data-part="time" />
      </p>
      <dl>
        {rows.map(({ name, label, symbol }, index) => (
          <div key={name}>
            <dt title={label}>
              <i className="it">{symbol}</i>
              {symbol !== label && <span className="vh"> {label}</span>}
            </dt>
            <dd className="strong" data-part={`value${index}`} />
          </div>
        ))}
      </dl>
      <dl className="messages">
        <div>
          <dt>Round</dt>
          <dd>
            <span data-part="round" /> <span className="u">of {rounds}</span>
          </dd>
        </div>
        {(["y", "u"] as const).map((name) => (
          <div key={name}>
            <dt title={name === "y" ? "Measurement" : "Command"}>
              <i className="it">{name}</i>
              <span className="vh">{name === "y" ? " measurement" : " command"}</span>
            </dt>
            <dd>
              <span data-part={`${name}-word`} /> <span data-part={`${name}-more`} />
            </dd>
          </div>
        ))}
      </dl>
    </div>
  );
}
