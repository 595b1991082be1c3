/** Loss over the hours of the day: which of them a log covers, and whether they differ. */
import { clopperPearson } from "#shared/math/statistics.ts";
import type { LinkTrace } from "./types.ts";

type Hours = NonNullable<LinkTrace["hours"]>;

/** "5 to 14 h and 22 to 23 h"; null when every hour is covered. */
export function hoursCovered(hours: Hours): string | null {
  const ranges: [number, number][] = [];
  hours.forEach(({ packets }, hour) => {
    if (packets === 0) return;
    const last = ranges.at(-1);
    if (last && last[1] === hour) last[1] = hour + 1;
    else ranges.push([hour, hour + 1]);
  });
  if (ranges.length === 0 || (ranges.length === 1 && ranges[0][1] - ranges[0][0] === 24)) return null;
  return ranges.map(([from, until]) => `${from} to ${until} h`).join(" and ");
}

/** Fewer packets in an hour say little. */
const ENOUGH = 200;
/** Of 24 hours some pair differs by chance: each interval is wide enough that this happens in about one log of a hundred. */
const CONFIDENCE = 0.9995;

/** The hours of least and of most loss, when their intervals do not overlap. */
export function hoursThatDiffer(hours: Hours): Record<"best" | "worst", { hour: number; loss: number }> | null {
  const known = hours
    .map(({ packets, lost }, hour) => ({ hour, packets, lost, loss: packets > 0 ? lost / packets : 0 }))
    .filter(({ packets }) => packets >= ENOUGH)
    .sort((a, b) => a.loss - b.loss);
  const best = known[0];
  const worst = known.at(-1);
  if (!best || !worst || clopperPearson(best.lost, best.packets, CONFIDENCE)[1] >= clopperPearson(worst.lost, worst.packets, CONFIDENCE)[0])
    return null;
  return { best: { hour: best.hour, loss: best.loss }, worst: { hour: worst.hour, loss: worst.loss } };
}
