import { energyBound, utilisationHint } from "#shared/network/energy.ts";
import { prepareFloor } from "#shared/network/prepare.ts";
import { roundTiming } from "#shared/network/round.ts";
import { type FloodSurvey, surveyFloods } from "#shared/network/survey.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { listed, readScenario, wholeNumber } from "./input.ts";

/** Floods of which the nodes' radio-on times are the mean. */
const ROUNDS = 2000;

/** Slot table, latencies and energy. Exit code 1 when the round does not fit or has another issue. */
export function round(file: string, options: { seed?: string }): unknown {
  const scenario = readScenario(file);
  const seed = wholeNumber("seed", options.seed, 0, 4_294_967_295) ?? scenario.run.seed;
  const { issues, ns: _, ...timing } = roundTiming(scenario);
  if (!timing.fits || issues.length > 0) process.exitCode = 1;
  if (issues.length > 0) process.stderr.write(`${listed(issues)}\n`);
  return { scenario: scenario.name, ...timing, energy: energy(scenario, seed) };
}

/** The bound that holds on any floor, and with a floor what each node spends on it, per round. */
function energy(scenario: Scenario, seed: number): unknown {
  const { power, battery, txPowerDbm } = scenario.radio;
  const bound = energyBound(scenario, roundTiming(scenario));
  const prepared = scenario.floor ? prepareFloor(scenario) : null;
  const survey = prepared?.ok ? surveyFloods(scenario, { rounds: ROUNDS, seed, withoutAdvice: true }) : null;
  return {
    ...power,
    battery,
    bound,
    floor: survey && {
      rounds: survey.rounds,
      seed,
      outagesLeftOut: survey.outagesLeftOut,
      deeperThanHopBound: deeper(survey, scenario.round.hops),
      nodes: survey.nodes,
    },
    floorNeeds: prepared && !prepared.ok ? prepared.issues.map(({ path, message }) => `${path}: ${message}`) : [],
    cautions: cautions(scenario, survey, utilisationHint(bound.sendDutyCycle, txPowerDbm)),
  };
}

/** Nodes that half of some message's floods reach later than in step H. */
const deeper = ({ slots }: FloodSurvey, hops: number): number[] => [
  ...new Set(slots.flatMap(({ nodes }) => nodes.filter(({ medianStep }) => (medianStep ?? 0) > hops).map(({ node }) => node))),
];

function cautions({ floor, radio }: Scenario, survey: FloodSurvey | null, atMost: ReturnType<typeof utilisationHint>): string[] {
  if (!survey) return atMost ? [atMost.text] : [];
  return survey.nodes.flatMap(({ node, sendDutyCycle }) => {
    const hint = utilisationHint(sendDutyCycle, floor?.nodes.find(({ id }) => id === node)?.txPowerDbm ?? radio.txPowerDbm);
    return hint ? [`Node ${node}: ${hint.text}`] : [];
  });
}
