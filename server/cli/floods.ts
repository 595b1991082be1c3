import { prepareFloor } from "#shared/network/prepare.ts";
import { type FloodSurvey, Survey } from "#shared/network/survey.ts";
import { listed, Refused, readScenario, wholeNumber } from "./input.ts";

const ROUNDS = 2000;
const ROUNDS_AT_ONCE = 500;

/** A survey of the floor by that many rounds, with advice. --steps: also when the floods arrived, step by step. */
export function floods(file: string, options: { rounds?: string; seed?: string; steps?: boolean }): unknown {
  const scenario = readScenario(file);
  const rounds = wholeNumber("rounds", options.rounds, 100, 1_000_000) ?? ROUNDS;
  const seed = wholeNumber("seed", options.seed, 0, 4_294_967_295) ?? scenario.run.seed;
  if (!scenario.floor) throw new Refused(`floor: ${scenario.name} has none; floods need a floor with at least two nodes.`);
  const prepared = prepareFloor(scenario);
  if (!prepared.ok) throw new Refused(listed(prepared.issues));
  const survey = new Survey(scenario, { rounds, seed });
  while (!survey.finished) {
    survey.advance(ROUNDS_AT_ONCE);
    if (process.stderr.isTTY) process.stderr.write(`\r${Math.floor(survey.progress * 100)} %\r`);
  }
  const result = survey.result();
  return { scenario: scenario.name, ...(options.steps ? result : withoutSteps(result)) };
}

const withoutSteps = (survey: FloodSurvey) => ({
  ...survey,
  slots: survey.slots.map(({ reachedShare: _, nodes, ...slot }) => ({ ...slot, nodes: nodes.map(({ hops: __, ...node }) => node) })),
});
