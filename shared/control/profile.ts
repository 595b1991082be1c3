import { sin } from "#shared/math/elementary.ts";
import type { Profile } from "#shared/scenario/schema.ts";

/** Value of a signal known ahead at an instant in whole nanoseconds. Points are taken in order of time; steps are closed on the left. */
export function profileAt(profile: Profile): (tNs: number) => number {
  if (profile.type === "sine") {
    const { offset, amplitude, frequencyHz, phaseRad } = profile;
    const omega = 2 * Math.PI * frequencyHz;
    return (t) => offset + amplitude * sin(omega * (t / 1e9) + phaseRad);
  }
  const points = [...profile.points].sort((a, b) => a.atS - b.atS);
  const times = Float64Array.from(points, (point) => Math.round(point.atS * 1e9));
  const values = Float64Array.from(points, (point) => point.value);
  const last = times.length - 1;
  const ramps = profile.type === "ramps";
  let at = -1;
  return (t) => {
    if (at >= 0 && times[at] > t) at = -1;
    while (at < last && times[at + 1] <= t) at++;
    if (!ramps) return at < 0 ? 0 : values[at];
    if (at < 0) return values[0];
    if (at === last) return values[last];
    return values[at] + ((values[at + 1] - values[at]) * (t - times[at])) / (times[at + 1] - times[at]);
  };
}
