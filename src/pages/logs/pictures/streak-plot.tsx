import type { StreakRow } from "#shared/reception/fit.ts";
import { countText } from "#shared/reception/words.ts";
import { significant } from "#src/lib/format.ts";
import { NeatAxis } from "./neat-axis.tsx";
import { usePictureWidth } from "./use-picture-width.ts";

interface StreakPlotProps {
  streaks: readonly StreakRow[];
}

const LEFT = 46;
const TOP = 8;
const PLOT = 128;
const HEIGHT = TOP + PLOT + 44;
/** Below this the logarithmic scale ends: less than half a row is none. */
const FLOOR = 0.5;
const WIDEST = 64;

/** How many rows of losses there were of each length, against what independence would give; counts on a logarithmic scale. */
export function StreakPlot({ streaks }: StreakPlotProps) {
  const [host, width] = usePictureWidth();
  const right = width - 8;
  const longest = Math.max(1, ...streaks.map(({ length }) => length));
  const most = Math.max(1, ...streaks.map(({ count, expectedIndependent }) => Math.max(count, expectedIndependent)));
  const decades = Math.max(1, Math.ceil(Math.log10(most) - 1e-9));
  const top = 10 ** decades;
  const yOf = (value: number) => TOP + PLOT * (1 - Math.log(Math.max(value, FLOOR) / FLOOR) / Math.log(top / FLOOR));
  const slot = Math.min(WIDEST, (right - LEFT) / longest);
  const xOf = (length: number) => LEFT + (length - 1) * slot;
  const gap = Math.min(6, slot * 0.2);
  const stair = (pick: (row: StreakRow) => number) => {
    const shown = streaks.filter((row) => pick(row) >= FLOOR);
    return shown.length === 0 ? "" : `M${shown.map((row) => `${xOf(row.length)} ${yOf(pick(row))}H${xOf(row.length) + slot}`).join("L")}`;
  };
  const more = streaks.find(({ orMore }) => orMore);
  return (
    <figure className="lg-plot">
      <figcaption className="lg-cap">
        <b>Losses in a row</b>, how often; dashed: if independent; dotted: fitted bursts
      </figcaption>
      <div ref={host}>
        <svg width={width} height={HEIGHT} viewBox={`0 0 ${width} ${HEIGHT}`} role="img" aria-label={streakText(streaks)}>
          {Array.from({ length: decades + 1 }, (_, k) => 10 ** k).map((tick) => (
            <g key={tick}>
              <path d={`M${LEFT} ${yOf(tick)}H${right}`} className="hair" />
              <text x={LEFT - 8} y={yOf(tick) + 4} textAnchor="end" className="ax">
                {countText(tick)}
              </text>
            </g>
          ))}
          <path d={`M${LEFT} ${TOP + PLOT}H${LEFT + slot * longest}`} className="hair" />
          {streaks.map(
            ({ length, count }) =>
              count > 0 && (
                <rect
                  key={length}
                  x={xOf(length) + gap / 2}
                  y={yOf(count)}
                  width={Math.max(1, slot - gap)}
                  height={TOP + PLOT - yOf(count)}
                  className="lg-observed"
                />
              ),
          )}
          <path d={stair(({ expectedGilbertElliott }) => expectedGilbertElliott ?? 0)} className="ref" />
          <path d={stair(({ expectedIndependent }) => expectedIndependent)} className="pred" />
          <NeatAxis
            from={0.5}
            until={longest + 0.5}
            left={LEFT}
            right={right}
            y={TOP + PLOT + 3}
            whole
            title={more ? `${more.length} stands for ${more.length} or more` : undefined}
          />
        </svg>
      </div>
    </figure>
  );
}

function streakText(streaks: readonly StreakRow[]): string {
  const there = streaks.filter(({ count }) => count > 0);
  if (there.length === 0) return "No packet was lost.";
  const said = there
    .slice(0, 8)
    .map(
      ({ length, orMore, count, expectedIndependent }) =>
        `${length}${orMore ? " or more" : ""} in a row ${countText(count)} times, ${significant(expectedIndependent, 2)} if independent`,
    );
  return `Losses in a row: ${said.join("; ")}${there.length > 8 ? `; longest ${there[there.length - 1]?.length}` : ""}.`;
}
