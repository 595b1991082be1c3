import { fitLink } from "#shared/reception/fit.ts";
import { testIndependence } from "#shared/reception/independence.ts";
import type { LinkStudy } from "./log-contract.ts";

/** Fit and tests of a link's run lengths: in the worker where there are many, else in the page. */
export function studyRuns(runs: number[]): LinkStudy {
  return { fit: fitLink({ runs }), independence: testIndependence({ runs }) };
}
