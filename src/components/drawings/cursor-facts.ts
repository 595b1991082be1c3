/** What is to be said of the messages at an instant. */
import type { Scenario } from "#shared/scenario/schema.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { type LossRecord, lossRecord } from "#src/components/plots/tape-pieces.ts";
import { counted } from "#src/lib/format.ts";

export interface MessageFact {
  lost: boolean;
  /** "delivered", "lost," */
  word: string;
  /** "3 in a row", "plan 4 of 6" */
  more: string;
}

export interface RunRecords {
  measurement: LossRecord;
  command: LossRecord;
}

export const recordsOf = ({ rounds }: RunResult): RunRecords => ({
  measurement: lossRecord(rounds.measurementDelivered, rounds.count),
  command: lossRecord(rounds.commandDelivered, rounds.count),
});

/** The round that an instant belongs to; the last one at the very end. */
export const roundAt = ({ rounds }: RunResult, timeS: number): number =>
  Math.max(0, Math.min(rounds.count - 1, Math.floor(timeS / rounds.periodS + 1e-9)));

export function measurementFact(result: RunResult, records: RunRecords, timeS: number): MessageFact {
  if (!result.rounds.hasMeasurementSlot) return { lost: false, word: "read directly", more: "" };
  const inRow = records.measurement.streak[roundAt(result, timeS)] ?? 0;
  if (inRow === 0) return { lost: false, word: "delivered", more: "" };
  return { lost: true, word: inRow > 1 ? "lost," : "lost", more: inRow > 1 ? `${inRow} in a row` : "" };
}

/** The command message that travels in the round, and what the actuator makes of its loss. */
export function commandFact(scenario: Scenario, result: RunResult, records: RunRecords, timeS: number): MessageFact {
  const { rounds } = result;
  if (!rounds.hasCommandSlot) return { lost: false, word: "acts directly", more: "" };
  const round = roundAt(result, timeS);
  const inRow = records.command.streak[round] ?? 0;
  if (inRow === 0) return { lost: false, word: "delivered", more: "" };
  const silence = result.events.findLast(({ kind, atS }) => atS <= timeS && (kind === "silence" || kind === "resumed"));
  if (silence?.kind === "silence") return { lost: true, word: "lost,", more: `silent, ${counted(inRow, "loss", "losses")}` };
  const { onLoss } = scenario.loops[0].actuator;
  const everDelivered = (records.command.lostBefore[round + 1] ?? 0) < round + 1;
  if (!everDelivered) return { lost: true, word: "lost,", more: "none yet" };
  if (onLoss.policy === "plan") {
    const more = inRow < onLoss.length ? `plan ${inRow + 1} of ${onLoss.length}` : `plan over, ${onLoss.end}`;
    return { lost: true, word: "lost,", more };
  }
  return { lost: true, word: "lost,", more: onLoss.policy === "hold" ? "last one held" : "zero" };
}
