import { useEffect, useMemo, useState } from "react";
import type { LinkTrace } from "#shared/reception/types.ts";
import { createLogClient } from "#src/workers/log-client.ts";
import type { LinkStudy } from "#src/workers/log-contract.ts";
import { studyRuns } from "#src/workers/log-study.ts";

/** So many run lengths are studied within a frame or two; more of them in a worker, so that the page stays quick. */
const AT_ONCE = 30_000;

/** Fit and tests of a link; null while they are computed. */
export function useStudy({ runs }: LinkTrace): LinkStudy | null {
  const atOnce = useMemo(() => (runs.length <= AT_ONCE ? studyRuns(runs) : null), [runs]);
  const [later, setLater] = useState<{ runs: number[]; study: LinkStudy } | null>(null);
  useEffect(() => {
    if (runs.length <= AT_ONCE) return;
    const client = createLogClient();
    let wanted = true;
    const show = (study: LinkStudy) => wanted && setLater({ runs, study });
    client.study(runs).then(
      (outcome) => outcome.ok && show(outcome.study),
      // A worker that does not start: rather slow than nothing.
      () => show(studyRuns(runs)),
    );
    return () => {
      wanted = false;
      client.dispose();
    };
  }, [runs]);
  return atOnce ?? (later?.runs === runs ? later.study : null);
}
