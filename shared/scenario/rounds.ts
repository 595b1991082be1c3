/** How many rounds a run has, and in how many of them a loop samples. */
import type { Scenario } from "./schema.ts";

export const roundsOf = (scenario: Scenario): number =>
  Math.ceil(Math.round(scenario.run.durationS * 1e9) / Math.round(scenario.round.periodS * 1e9));

export const samplingsOf = (rounds: number, { everyRounds, firstRound }: { everyRounds: number; firstRound: number }): number =>
  Math.max(0, Math.ceil((rounds - firstRound) / everyRounds));
