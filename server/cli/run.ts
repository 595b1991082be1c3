import { roundsCsv, seriesCsv } from "#shared/simulation/csv.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import { explicitScenario } from "#shared/simulation/explicit.ts";
import { simulate } from "#shared/simulation/simulate.ts";
import { verdictSentence } from "#shared/simulation/verdict-text.ts";
import { listed, Refused, readScenario, save, wholeNumber } from "./input.ts";

export interface RunOptions {
  seed?: string;
  series?: string;
  rounds?: string;
  explicit?: string;
}

/** One run: verdict, figures, events and digest; the tables go to the files that are named. */
export function run(file: string, options: RunOptions): unknown {
  const scenario = readScenario(file);
  const outcome = simulate(scenario, wholeNumber("seed", options.seed, 0, 4_294_967_295));
  if (!outcome.ok) throw new Refused(listed(outcome.issues));
  const { result } = outcome;
  if (options.series) save(options.series, seriesCsv(result));
  if (options.rounds) save(options.rounds, roundsCsv(result, scenario));
  if (options.explicit) save(options.explicit, `${JSON.stringify(explicitScenario(scenario, result), null, 2)}\n`);
  const { engine, seed, durationS, endedAtS, ended, verdict, limits, figures, events, rounds } = result;
  return {
    scenario: scenario.name,
    engine,
    seed,
    durationS,
    endedAtS,
    ended,
    verdict,
    ...verdictSentence(scenario, result),
    limits: limits.map((limit) => ({ ...limit, limit: scenario.limits[limit.index] })),
    figures,
    events,
    rounds: {
      count: rounds.count,
      periodS: rounds.periodS,
      sampleAtS: rounds.sampleAtS,
      latencyS: rounds.latencyS,
      commandDelay: rounds.commandDelay,
    },
    digest: digestRun(result),
  };
}
