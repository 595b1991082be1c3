import { PHY_TIMINGS } from "#shared/network/phy.ts";
import type { RoundTiming, Saving } from "#shared/network/round.ts";
import { getAt, setAt } from "./json-path.ts";

/** Periods are offered on this grid, s. */
const PERIOD_GRID_S = 1e-4;

/** The scenario with the saving taken; null when it cannot be taken by one setting. */
export function applySaving(json: unknown, { change }: Saving, timing: RoundTiming): unknown | null {
  const number = (path: string[]) => Number(getAt(json, path));
  const less = (path: string[]) => setAt(json, path, number(path) - 1);
  switch (change) {
    case "transmissions":
      return less(["round", "transmissions"]);
    case "hops":
      return less(["round", "hops"]);
    case "bytes":
      // Every message carries the header: a byte less there is a byte less in each.
      return number(["radio", "headerBytes"]) > 0 ? less(["radio", "headerBytes"]) : null;
    case "phy": {
      const at = PHY_TIMINGS.findIndex(({ phy }) => phy === getAt(json, ["radio", "phy"]));
      const faster = PHY_TIMINGS[at + 1];
      return faster ? setAt(json, ["radio", "phy"], faster.phy) : null;
    }
    case "period":
      return setAt(json, ["round", "periodS"], Number((Math.ceil(timing.shortestPeriodS / PERIOD_GRID_S - 1e-9) * PERIOD_GRID_S).toFixed(4)));
  }
}
