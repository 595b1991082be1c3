/** A run as it is stored: figures, verdict, digest and the compressed record. */
import { promisify } from "node:util";
import { gzip } from "node:zlib";
import type { VerdictLine } from "#shared/api/common.ts";
import { encodeSeries } from "#shared/api/series.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { digestRun } from "#shared/simulation/digest.ts";
import type { RunResult } from "#shared/simulation/result.ts";
import { verdictSentence } from "#shared/simulation/verdict-text.ts";

const compress = promisify(gzip);

function counted(result: RunResult): { sent: number; lost: number } {
  const { messages } = result.figures;
  return { sent: messages.reduce((sum, { sent }) => sum + sent, 0), lost: messages.reduce((sum, { lost }) => sum + lost, 0) };
}

export async function recordOf(scenario: Scenario, result: RunResult) {
  const { bytes, header } = encodeSeries(result);
  const compressed = new Uint8Array(await compress(bytes));
  const { word, sentence } = verdictSentence(scenario, result);
  return {
    bytes: compressed,
    row: {
      verdict: result.verdict as VerdictLine["state"],
      verdictWord: word,
      verdictSentence: sentence,
      ended: result.ended,
      endedAtS: result.endedAtS,
      durationS: result.durationS,
      ...counted(result),
      figures: result.figures,
      limits: result.limits,
      events: result.events,
      digest: digestRun(result),
      points: header.points,
      keptPoints: header.blocks[0].length,
      keptEvery: header.keptEvery,
      compressedBytes: compressed.length,
    },
  };
}
export type RunRecord = Awaited<ReturnType<typeof recordOf>>;
