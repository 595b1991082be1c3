import type { RoundTiming } from "#shared/network/round.ts";
import type { Report } from "./report.ts";
import { roundsOf, samplingsOf } from "./rounds.ts";
import type { Scenario } from "./schema.ts";

/** Given sequences and recordings last as long as the run, and outages end after they begin. */
export function checkSequences(report: Report, scenario: Scenario, timing: RoundTiming): void {
  const loop = scenario.loops[0];
  const rounds = roundsOf(scenario);
  const { process, outages } = scenario.losses;
  if (process.type === "given") {
    for (const message of ["measurement", "command"] as const) {
      const needed = timing.slots.some((slot) => slot.message === message && slot.loop === loop.id);
      const length = process[message].length;
      if (needed && length === 0)
        report.add(
          "sequence-too-short",
          `losses.process.${message}`,
          `No deliveries are given for the ${message}; ${rounds} are needed, one a round.`,
        );
      else if (needed && process.then === "error" && length < rounds) {
        report.add(
          "sequence-too-short",
          `losses.process.${message}`,
          `${length} deliveries are given for ${rounds} rounds. Give one for every round, or say what follows: "then": "delivered" or "repeat".`,
        );
      }
    }
  }
  if (process.type === "replay") {
    for (const message of ["measurement", "command"] as const) {
      const { runs } = process[message];
      if (!timing.slots.some((slot) => slot.message === message && slot.loop === loop.id)) continue;
      const packets = runs.reduce((sum, run) => sum + run, 0);
      if (packets === 0)
        report.add(
          "sequence-too-short",
          `losses.process.${message}.runs`,
          `Nothing is recorded for the ${message}; ${rounds} packets are needed, one a round.`,
        );
      else if (process.then === "error" && packets < rounds) {
        report.add(
          "sequence-too-short",
          `losses.process.${message}.runs`,
          `${packets} packets are recorded for ${rounds} rounds. Shorten the run, or say what follows: "then": "delivered" or "repeat".`,
        );
      }
    }
  }
  outages.forEach((outage, i) => {
    report.ordered(`losses.outages[${i}].untilS`, outage.fromS, outage.untilS);
  });
  const samplings = samplingsOf(rounds, loop.timing);
  const { noise, signals } = loop.sensor;
  if (noise.type === "given") {
    if (noise.then === "error" && noise.values.length < samplings) {
      report.add(
        "sequence-too-short",
        "loops[0].sensor.noise.values",
        `${noise.values.length} rows of sensor noise are given for ${samplings} samplings. Give one for each, or say what follows: "then": "zero" or "repeat".`,
      );
    }
    const wrong = noise.values.findIndex((row) => row.length !== signals.length);
    if (wrong >= 0) {
      report.length(
        `loops[0].sensor.noise.values[${wrong}]`,
        `Row ${wrong + 1} of the sensor noise`,
        noise.values[wrong].length,
        signals.length,
        "one number for each measured signal",
      );
    }
  }
}
