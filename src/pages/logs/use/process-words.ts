/** What a loss process sets, message by message, in words. */
import { countText } from "#shared/reception/words.ts";
import type { LossProcess } from "#shared/scenario/schema.ts";
import { percentText, significant, withUnit } from "#src/lib/format.ts";
import { lossText } from "../model/log-words.ts";

interface Line {
  name: string;
  text: string;
}

const MESSAGES = [
  ["measurement", "Measurement"],
  ["command", "Command"],
] as const;

function replayText({ link, runs }: { link: string; runs: readonly number[] }): string {
  const packets = runs.reduce((sum, length) => sum + length, 0);
  const lost = runs.reduce((sum, length, i) => sum + (i % 2 === 1 ? length : 0), 0);
  return `${link}: ${countText(lost)} of ${countText(packets)} packets lost (${packets > 0 ? lossText(lost / packets) : "none"}), ${countText(runs.length)} run lengths`;
}

function chainText({ goodToBad, badToGood }: { goodToBad: number; badToGood: number }): string {
  const ratio = goodToBad / (goodToBad + badToGood);
  const percent = (share: number) => withUnit(significant(share * 100, 3), "%");
  return `good to bad ${percent(goodToBad)}, bad to good ${percent(badToGood)} a round: ${percentText(ratio)} lost, in bursts of ${significant(1 / badToGood)} on average`;
}

export function processLines(process: LossProcess): Line[] {
  switch (process.type) {
    case "replay":
      return MESSAGES.map(([key, name]) => ({ name, text: replayText(process[key]) }));
    case "gilbert-elliott":
      return MESSAGES.map(([key, name]) => ({ name, text: chainText(process[key]) }));
    case "bernoulli":
      return MESSAGES.map(([key, name]) => ({ name, text: `${lossText(process[key])} lost, each by itself` }));
    default:
      return [];
  }
}
