/** What a link's losses say, computed once for every link that is looked at. */
import { fitLink, type LinkFit } from "#shared/reception/fit.ts";
import { type IndependenceTest, testIndependence } from "#shared/reception/independence.ts";
import { piece } from "#shared/reception/trace.ts";
import type { LinkTrace } from "#shared/reception/types.ts";
import type { LinkFigures } from "./loss-process.ts";

export interface LinkStudy {
  fit: LinkFit;
  independence: IndependenceTest;
}

export const studyLink = (link: LinkTrace): LinkStudy => ({ fit: fitLink(link), independence: testIndependence(link) });

/** What a loss process needs of a link, of which every so many-th packet stands for a round. */
export function figuresOf({ runs, packets }: LinkTrace, every = 1): LinkFigures {
  const { lossRatio, clopperPearson, gilbertElliott } = fitLink({ runs: every > 1 ? piece(runs, 0, packets, every) : runs });
  return { ratio: lossRatio, upper: clopperPearson[1], chain: gilbertElliott };
}
