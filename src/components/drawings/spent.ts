/** What radios spend, in one sentence. */
import { energyBound } from "#shared/network/energy.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import { roundsOf } from "#shared/scenario/rounds.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { NodeFigures, RunResult } from "#shared/simulation/result.ts";
import { msText, significant, withUnit } from "#src/lib/format.ts";

/** "290 days", "2.4 years": as long as a battery lasts. */
export function lifeText(days: number | null): string {
  if (days === null) return "without end";
  if (days >= 730) return `${significant(days / 365.25, 3)} years`;
  return days >= 2 ? `${significant(days, 3)} days` : withUnit(significant(days * 24, 3), "h");
}

/** "78.2 \u00b5C" */
export function chargeText(coulomb: number): string {
  const [factor, unit] = coulomb >= 0.1 ? [1, "C"] : coulomb >= 1e-3 ? [1e3, "mC"] : [1e6, "\u00b5C"];
  return withUnit(significant(coulomb * factor, 3), unit);
}

/** Of runs that were kept before nodes had figures there are none. */
export const nodesOf = (result: RunResult): readonly NodeFigures[] => result.figures.nodes ?? [];

/** The node that spends most, as simulated; without floods the bound that holds for any node. */
export function spentText(scenario: Scenario, timing: RoundTiming, result: RunResult): string {
  const nodes = nodesOf(result);
  const [first] = nodes;
  if (first) {
    const most = nodes.reduce((a, b) => (b.chargeC > a.chargeC ? b : a), first);
    const rounds = roundsOf(scenario);
    return `Node ${most.node}${most.name ? ` ${most.name}` : ""} spends most: radio on ${msText(most.radioOnS / rounds)} and ${chargeText(most.chargeC / rounds)} a round; its battery lasts ${lifeText(most.batteryDays)}.`;
  }
  const bound = energyBound(scenario, timing);
  return `Any node, wherever it stands: radio on at most ${msText(bound.radioOnS)} and ${chargeText(bound.chargeC)} a round; its battery lasts at least ${lifeText(bound.batteryDays)}.`;
}
