/** What a link's losses say. */
import { clopperPearson } from "#shared/math/statistics.ts";
import { fitGilbertElliott } from "#shared/reception/fit.ts";
import { countTrace, piece } from "#shared/reception/trace.ts";
import type { LinkTrace } from "#shared/reception/types.ts";
import type { LinkFigures } from "./loss-process.ts";

/** What a loss process needs of a link, of which every so many-th packet stands for a round. */
export function figuresOf({ runs, packets }: LinkTrace, every = 1): LinkFigures {
  const counts = countTrace(every > 1 ? piece(runs, 0, packets, every) : runs);
  return {
    ratio: counts.packets > 0 ? counts.lost / counts.packets : 0,
    upper: clopperPearson(counts.lost, counts.packets)[1],
    chain: fitGilbertElliott(counts),
  };
}
