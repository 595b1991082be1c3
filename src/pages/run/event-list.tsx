import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import type { PlotCursor } from "#src/components/plots/plot-cursor.ts";
import { formatTime, timeDecimals } from "#src/components/plots/units.ts";
import { counted } from "#src/lib/format.ts";
import { eventText, eventWord, isLoss } from "./run-words.ts";

interface EventListProps {
  scenario: Scenario;
  result: RunResult;
  cursor: PlotCursor;
}

/** What happened when; a press moves the cursor of the pictures there. */
export function EventList({ scenario, result, cursor }: EventListProps) {
  const { events } = result;
  const decimals = timeDecimals(result.rounds.periodS / 10);
  const go = (atS: number) => {
    cursor.setPlaying(false);
    cursor.moveTo(atS);
  };
  return (
    <section className="run-part" aria-labelledby="run-events">
      <div className="hrow">
        <h2 id="run-events">Events</h2>
        <span className="rt">{events.length > 0 ? `${counted(events.length, "event")} · press one to go there` : ""}</span>
      </div>
      {events.length === 0 ? (
        <p className="second">Nothing was scripted, no limit was crossed and the actuator never fell silent.</p>
      ) : (
        <ol className="event-list">
          {events.map((event, index) => (
            // biome-ignore lint/suspicious/noArrayIndexKey: the events of a kept run never change
            <li key={index}>
              <button type="button" onClick={() => go(event.atS)} className={isLoss(event) ? "loss" : undefined}>
                <span className="at">{formatTime(event.atS, decimals)}</span> <b>{eventWord(event)}</b>{" "}
                <span>{eventText(event, scenario, result)}</span>
              </button>
            </li>
          ))}
        </ol>
      )}
    </section>
  );
}
