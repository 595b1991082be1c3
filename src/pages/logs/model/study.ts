/** What a link's losses say, computed once for every link that is looked at. */
import { fitLink, type LinkFit } from "#shared/reception/fit.ts";
import { type IndependenceTest, testIndependence } from "#shared/reception/independence.ts";
import type { LinkTrace } from "#shared/reception/types.ts";
import type { LinkFigures } from "./loss-process.ts";

export interface LinkStudy {
  fit: LinkFit;
  independence: IndependenceTest;
}

export const studyLink = (link: LinkTrace): LinkStudy => ({ fit: fitLink(link), independence: testIndependence(link) });

/** What a loss process needs of a link. */
export function figuresOf(link: LinkTrace): LinkFigures {
  const { lossRatio, clopperPearson, gilbertElliott } = fitLink(link);
  return { ratio: lossRatio, upper: clopperPearson[1], chain: gilbertElliott };
}
