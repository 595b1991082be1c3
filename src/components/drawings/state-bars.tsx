import { useMemo, useRef } from "react";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { useOnCursor } from "#src/components/plots/plot-cursor.ts";
import { extremes, valueAt } from "#src/components/plots/series-points.ts";
import { shownUnit, significant, withUnit } from "#src/lib/format.ts";

const ROW = 30;
const EARLIER = 8;

/** A plant that is only known by its matrices has no looks: its states, each against its largest value in the run. */
export function StateBars({ scenario, result, width }: { scenario: Scenario; result: RunResult; width: number }) {
  const svg = useRef<SVGSVGElement>(null);
  const { columns, values, t } = result.series;
  const states = useMemo(
    () =>
      columns.flatMap(({ name, kind, unit, symbol }, index) => {
        const own = values[index];
        if (kind !== "state" || !own) return [];
        const range = extremes(own) ?? { min: 0, max: 0 };
        const largest = Math.max(Math.abs(range.min), Math.abs(range.max));
        const limits = scenario.limits.flatMap((limit) =>
          limit.type === "within" && limit.signal === name && limit.of === "signal" ? [limit.lo, limit.hi].filter((edge) => edge !== null) : [],
        );
        return [{ name, symbol, values: own, largest, limits, ...shownUnit(unit) }];
      }),
    [columns, values, scenario],
  );
  const left = 64;
  const right = width - 72;
  const middle = (left + right) / 2;
  const half = (right - left) / 2;
  const xOf = (share: number) => middle + half * Math.max(-1, Math.min(1, share));

  useOnCursor(({ timeS }) => {
    const root = svg.current;
    if (!root) return;
    states.forEach(({ values: own, largest }, index) => {
      const share = (at: number) => (largest > 0 ? valueAt(t, own, Math.min(at, result.endedAtS)) / largest : 0);
      const x = xOf(share(timeS));
      const bar = root.querySelector(`[data-bar="${index}"]`);
      bar?.setAttribute("x", String(Math.min(x, middle)));
      bar?.setAttribute("width", String(Math.abs(x - middle)));
      root.querySelectorAll<SVGElement>(`[data-earlier="${index}"]`).forEach((tick, age) => {
        const at = timeS - (age + 1) * result.rounds.periodS;
        tick.style.display = at < 0 ? "none" : "";
        tick.setAttribute("transform", `translate(${at < 0 ? 0 : xOf(share(at))})`);
      });
    });
  });

  return (
    <svg
      ref={svg}
      width={width}
      height={states.length * ROW + 24}
      role="img"
      aria-label={`${states.length} states at the cursor, each against its largest value in the run. The values stand in the table at the cursor.`}
    >
      <text x={middle} y="14" className="ax" textAnchor="middle">
        states, each to its largest
      </text>
      {states.map(({ name, symbol, largest, unit, factor, limits }, index) => {
        const y = 24 + index * ROW;
        return (
          <g key={name}>
            <text x={left - 10} y={y + 18} className="tx it" textAnchor="end">
              {symbol.length > 8 ? `${symbol.slice(0, 7)}…` : symbol}
            </text>
            <path d={`M${left} ${y + ROW - 1}H${right}`} className="hair" />
            {Array.from({ length: EARLIER }, (_, age) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: a fixed row of ticks that are only moved
              <path key={age} data-earlier={index} d={`M0 ${y + 5}v18`} className="trail-tick" opacity={0.5 - age * 0.05} />
            ))}
            <rect data-bar={index} y={y + 9} height="10" className="bar" />
            <path d={`M${middle} ${y + 4}v20`} className="hair2" />
            {limits
              .filter((limit) => Math.abs(limit) <= largest)
              .map((limit) => (
                <path key={limit} d={`M${xOf(limit / largest)} ${y + 4}v20`} className="lim" />
              ))}
            <text x={right + 10} y={y + 18} className="ax">
              {largest > 0 ? `±${withUnit(significant(largest * factor), unit)}` : withUnit("0", unit)}
            </text>
          </g>
        );
      })}
    </svg>
  );
}
