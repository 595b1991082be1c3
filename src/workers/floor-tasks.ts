/** Longer jobs on a floor, cut into pieces between which a worker hears messages. A job yields how far it is, 0 to 1. */
import { type ContourOptions, type FloodContours, floodContours } from "#shared/network/contours.ts";
import { type FloodRecord, FloodRecorder } from "#shared/network/floods.ts";
import { type LinkRow, meanLinks } from "#shared/network/link-table.ts";
import type { PreparedFloor } from "#shared/network/prepare.ts";
import { type FloodSurvey, Survey, type SurveyOptions } from "#shared/network/survey.ts";
import { roundsOf } from "#shared/scenario/rounds.ts";

export type Job<T> = Generator<number, T>;
export type Prepared = Extract<PreparedFloor, { ok: true }>;

/** Rounds between two looks at the clock. */
const ROUNDS_AT_ONCE = 20;

/** Every flood of a run: what the page draws, and what decided the run's deliveries when floods did. */
export function* floodsJob({ scenario, timing }: Prepared, seed: number | null): Job<FloodRecord> {
  const rounds = roundsOf(scenario);
  const recorder = new FloodRecorder(scenario, timing, rounds, seed ?? scenario.run.seed);
  while (!recorder.advance(ROUNDS_AT_ONCE)) yield recorder.done / rounds;
  return recorder.record();
}

/** Many floods in figures, and what would help. */
export function* surveyJob({ scenario }: Prepared, options: SurveyOptions): Job<FloodSurvey> {
  const survey = new Survey(scenario, options);
  while (!survey.finished) {
    survey.advance(ROUNDS_AT_ONCE);
    yield survey.progress;
  }
  return survey.result();
}

export function* contoursJob({ scenario, timing }: Prepared, slotId: string, options: ContourOptions): Job<FloodContours | null> {
  yield 0;
  return floodContours(scenario, timing, slotId, options);
}

export function* linksJob({ scenario, timing }: Prepared, atS: number): Job<LinkRow[]> {
  yield 0;
  const longest = timing.slots.reduce((most, { payloadBytes }) => Math.max(most, payloadBytes), 0);
  return meanLinks(scenario, atS, longest);
}
