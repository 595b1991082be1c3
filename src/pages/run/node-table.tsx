import { roundsOf } from "#shared/scenario/rounds.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { lifeText, nodesOf } from "#src/components/drawings/spent.ts";
import { Scroller } from "#src/components/ui/table.tsx";
import { fixed, percentText, withUnit } from "#src/lib/format.ts";

/** What each node's radio spent; runs that no flood decided have no such figures. */
export function NodeTable({ scenario, result }: { scenario: Scenario; result: RunResult }) {
  const nodes = nodesOf(result);
  if (nodes.length === 0) return null;
  const rounds = roundsOf(scenario);
  const { periodS } = scenario.round;
  return (
    <section className="run-part" aria-labelledby="run-nodes">
      <div className="hrow">
        <h2 id="run-nodes">Nodes</h2>
        <span className="rt">radio alone, {scenario.radio.power.device}</span>
      </div>
      <Scroller label="Table of the nodes">
        <table className="t">
          <thead>
            <tr>
              <th scope="col">Node</th>
              <th scope="col" className="r">
                Radio on a round
              </th>
              <th scope="col" className="r">
                Of the time
              </th>
              <th scope="col" className="r">
                Charge a round
              </th>
              <th scope="col" className="r">
                Battery
              </th>
            </tr>
          </thead>
          <tbody>
            {nodes.map(({ node, name, radioOnS, chargeC, batteryDays }) => (
              <tr key={node}>
                <th scope="row">
                  {node} {name}
                </th>
                <td className="r nw">{withUnit(fixed((radioOnS / rounds) * 1000, 2), "ms")}</td>
                <td className="r nw">{percentText(radioOnS / (rounds * periodS))}</td>
                <td className="r nw">{withUnit(fixed((chargeC / rounds) * 1e6, 1), "µC")}</td>
                <td className="r nw">{lifeText(batteryDays)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroller>
    </section>
  );
}
