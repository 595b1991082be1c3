import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { limitParts, neverSettled } from "#shared/simulation/verdict-text.ts";
import { verdictValue } from "#src/components/drawings/limit-strip.tsx";
import { formatTime } from "#src/components/plots/units.ts";
import { MARK_WORDS, Mark } from "#src/components/ui/mark.tsx";
import { Scroller } from "#src/components/ui/table.tsx";
import { fixed, percentText, quantityText, shownUnit, significant, withUnit } from "#src/lib/format.ts";

interface OfRun {
  scenario: Scenario;
  result: RunResult;
}

export function LimitTable({ scenario, result }: OfRun) {
  if (result.limits.length === 0) return null;
  return (
    <section className="run-part" aria-labelledby="run-limits">
      <div className="hrow">
        <h2 id="run-limits">Limits</h2>
      </div>
      <Scroller label="Table of the limits">
        <table className="t">
          <thead>
            <tr>
              <th scope="col">Limit</th>
              <th scope="col">Verdict</th>
              <th scope="col" className="r">
                Decisive figure
              </th>
              <th scope="col" className="r">
                Used
              </th>
              <th scope="col" className="r">
                First crossed
              </th>
            </tr>
          </thead>
          <tbody>
            {result.limits.map((verdict) => {
              const limit = scenario.limits[verdict.index];
              if (!limit) return null;
              const { name, rule } = limitParts(limit, scenario);
              return (
                <tr key={verdict.index}>
                  <th scope="row">
                    {name} <span className="second">{rule}</span>
                  </th>
                  <td className="nw">
                    <Mark state={verdict.state} size={13} quiet /> {MARK_WORDS[verdict.state]}
                  </td>
                  <td className="r nw strong">{neverSettled(limit, verdict) ? "not settled" : verdictValue(limit, verdict)}</td>
                  <td className="r nw">{verdict.used > 10 ? "over 10 times" : percentText(verdict.used, 0)}</td>
                  <td className="r nw">{verdict.crossedAtS === null ? <span className="muted">never</span> : formatTime(verdict.crossedAtS, 3)}</td>
                </tr>
              );
            })}
          </tbody>
        </table>
      </Scroller>
    </section>
  );
}

/** Radians squared are shown as degrees squared, like the signal itself. */
function squaredText(value: number, unit: string): string {
  const shown = shownUnit(unit);
  const squared = shown.unit === "" ? "s" : /[ /]/.test(shown.unit) ? `(${shown.unit})²\u2009s` : `${shown.unit}²\u2009s`;
  return withUnit(significant(value * shown.factor * shown.factor), squared);
}

export function SignalTable({ scenario, result }: OfRun) {
  const { signals } = result.figures;
  const labelOf = (name: string) => result.series.columns.find((column) => column.name === name);
  const weighted = scenario.loops[0].controller.law.type === "lqr";
  return (
    <section className="run-part" aria-labelledby="run-figures">
      <div className="hrow">
        <h2 id="run-figures">Figures</h2>
        <span className="rt">
          {[
            `saturated ${percentText(result.figures.saturatedShare)} of the time`,
            ...(result.figures.cost !== null && weighted ? [`cost ${significant(result.figures.cost, 4)} a round`] : []),
            ...(scenario.loops[0].actuator.silence ? [`${result.figures.silentReactions} silent reactions`] : []),
          ].join(" · ")}
        </span>
      </div>
      <Scroller label="Table of the figures">
        <table className="t">
          <thead>
            <tr>
              <th scope="col">Signal</th>
              <th scope="col" className="r">
                Lowest
              </th>
              <th scope="col" className="r">
                Highest
              </th>
              <th scope="col" className="r">
                RMS
              </th>
              <th scope="col" className="r">
                <abbr title="Integral of the squared deviation from the reference">ISE</abbr>
              </th>
            </tr>
          </thead>
          <tbody>
            {signals.map(({ name, unit, min, max, rms, ise }) => {
              const column = labelOf(name);
              return (
                <tr key={name}>
                  <th scope="row">
                    {column?.label ?? name} {column && column.symbol !== column.label && <i className="it">{column.symbol}</i>}
                  </th>
                  <td className="r nw">{quantityText(min, unit, 4)}</td>
                  <td className="r nw">{quantityText(max, unit, 4)}</td>
                  <td className="r nw">{quantityText(rms, unit, 4)}</td>
                  <td className="r nw">{squaredText(ise, unit)}</td>
                </tr>
              );
            })}
          </tbody>
        </table>
      </Scroller>
    </section>
  );
}

export function MessageTable({ result }: { result: RunResult }) {
  const { messages } = result.figures;
  if (messages.length === 0) return null;
  return (
    <section className="run-part" aria-labelledby="run-messages">
      <div className="hrow">
        <h2 id="run-messages">Messages</h2>
        <span className="rt">
          {result.rounds.count} rounds of {withUnit(significant(result.rounds.periodS * 1000, 4), "ms")}
        </span>
      </div>
      <Scroller label="Table of the messages">
        <table className="t">
          <thead>
            <tr>
              <th scope="col">Message</th>
              <th scope="col" className="r">
                Sent
              </th>
              <th scope="col" className="r">
                Lost
              </th>
              <th scope="col" className="r">
                Delivered
              </th>
              <th scope="col" className="r">
                Longest loss
              </th>
            </tr>
          </thead>
          <tbody>
            {messages.map(({ message, sent, lost, longestLoss }) => (
              <tr key={message}>
                <th scope="row">
                  {message === "measurement" ? "Measurement" : "Command"} <i className="it">{message === "measurement" ? "y" : "u"}</i>
                </th>
                <td className="r">{sent}</td>
                <td className={lost > 0 ? "r coral" : "r"}>{lost}</td>
                <td className="r nw">{sent > 0 ? percentText(1 - lost / sent, 2) : <span className="muted">none sent</span>}</td>
                <td className="r nw">
                  {longestLoss === 0 ? (
                    <span className="muted">none</span>
                  ) : (
                    `${longestLoss} in a row, ${withUnit(fixed(longestLoss * result.rounds.periodS * 1000, 0), "ms")}`
                  )}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroller>
    </section>
  );
}
