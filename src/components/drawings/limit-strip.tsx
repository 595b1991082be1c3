import "./drawings.css";
import type { Limit, Scenario } from "#shared/scenario/schema.ts";
import type { LimitVerdict, RunResult } from "#shared/simulation/result.ts";
import { limitParts, neverSettled } from "#shared/simulation/verdict-text.ts";
import { decimalsFor, formatNumber, formatTime } from "#src/components/plots/units.ts";
import { Mark } from "#src/components/ui/mark.tsx";
import { percentText, shownUnit, withUnit } from "#src/lib/format.ts";

export interface LimitStripProps {
  scenario: Scenario;
  result: RunResult;
}

/** "8.84°", "1.38 s", "0.0 %" */
export function verdictValue(limit: Limit, verdict: LimitVerdict): string {
  if (verdict.value === Number.MAX_VALUE) return "diverged";
  if (limit.type === "saturation") return percentText(verdict.value);
  const { unit, factor } = shownUnit(verdict.unit);
  const shown = verdict.value * factor;
  // Three figures, but not finer than the limit itself is told.
  const scale = limit.type === "within" ? Math.max(Math.abs(limit.lo ?? 0), Math.abs(limit.hi ?? 0)) * factor : Math.abs(shown);
  const three = shown === 0 ? 2 : Math.max(0, 2 - Math.floor(Math.log10(Math.abs(shown))));
  const digits = Math.min(6, three, decimalsFor(scale) + 1);
  return withUnit(formatNumber(shown, digits), unit);
}

function whenText(limit: Limit, verdict: LimitVerdict): string {
  if (limit.type === "saturation") return "of the time";
  if (limit.type === "settle") return limit.afterS > 0 ? `after ${formatTime(limit.afterS, limit.afterS % 1 === 0 ? 0 : 2)}` : "after the start";
  return verdict.atS === null ? "" : `at ${formatTime(verdict.atS, 2)}`;
}

const ALLOWED = 120;
const WIDTH = 150;

/** How much of the limit was used; the rock begins at the limit. */
function UsedBar({ verdict }: { verdict: LimitVerdict }) {
  const used = Math.max(0, Math.min(verdict.used * ALLOWED, WIDTH));
  const percent = Math.round(verdict.used * 100);
  return (
    <svg
      className="used-bar"
      width={WIDTH}
      height="14"
      viewBox={`0 0 ${WIDTH} 14`}
      role="img"
      aria-label={percent > 1000 ? "More than ten times the limit" : `${percent} percent of the limit used`}
    >
      <rect x={ALLOWED} y="2" width={WIDTH - ALLOWED} height="10" className="rockS" />
      <path d={`M${ALLOWED} 1v12`} className="lim" />
      <path d={`M0 9.5H${ALLOWED}`} className="hair2" />
      <rect x="0" y="7" width={used} height="5" className={`used ${verdict.state}`} />
    </svg>
  );
}

/** Every limit with its mark, its decisive figure and how much of it was used. */
export function LimitStrip({ scenario, result }: LimitStripProps) {
  if (result.limits.length === 0) return null;
  return (
    <div className="limit-strip">
      <div className="hrow">
        <h2>Limits</h2>
        <span className="rt">
          {result.limits.filter(({ state }) => state !== "crosses").length} of {result.limits.length} kept
        </span>
      </div>
      <ul aria-label="Limits and what the run used of them">
        {result.limits.map((verdict) => {
          const limit = scenario.limits[verdict.index];
          if (!limit) return null;
          const { name, rule } = limitParts(limit, scenario);
          return (
            <li key={verdict.index}>
              <p className="limit-name">
                {name} <span className="second">{rule}</span>
              </p>
              <p className="limit-value">
                <Mark state={verdict.state} size={14} /> <b>{neverSettled(limit, verdict) ? "not settled" : verdictValue(limit, verdict)}</b>{" "}
                <span className="second">{whenText(limit, verdict)}</span>
              </p>
              <UsedBar verdict={verdict} />
            </li>
          );
        })}
      </ul>
    </div>
  );
}
