import { useQuery, useQueryClient } from "@tanstack/react-query";
import { useCallback, useEffect, useMemo, useRef, useState } from "react";
import type { FloodSurvey } from "#shared/network/survey.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { sameJson } from "#src/pages/scenario/model/json-path.ts";
import type { EngineClient } from "#src/workers/pool.ts";
import type { SurveyControl } from "./survey-sheet.tsx";

interface Kept {
  survey: FloodSurvey;
  of: Scenario;
}

/** One survey at a time; its figures outlive a look at the bench. */
export function useSurvey(engine: EngineClient | null, scenario: Scenario | null, seed: number, scenarioId: string): SurveyControl {
  const client = useQueryClient();
  const kept = useQuery({
    queryKey: ["floor-survey", scenarioId],
    queryFn: (): Kept | null => null,
    enabled: false,
    initialData: null as Kept | null,
    staleTime: Number.POSITIVE_INFINITY,
  });
  const [share, setShare] = useState<number | null>(null);
  const [broken, setBroken] = useState(false);
  const turn = useRef(0);
  useEffect(
    () => () => {
      turn.current++;
      engine?.cancelTask("survey");
    },
    [engine],
  );
  const { data } = kept;
  const stale = useMemo(() => data !== null && !sameJson(data.of, scenario), [data, scenario]);
  const run = useCallback(
    (rounds: number) => {
      if (!engine || !scenario) return;
      const mine = ++turn.current;
      setShare(0);
      setBroken(false);
      engine
        .survey(scenario, { rounds, seed }, (now) => turn.current === mine && setShare(now))
        .then(
          (outcome) => {
            if (turn.current !== mine) return;
            // Progress that is told late is no progress any more.
            turn.current++;
            setShare(null);
            if (outcome.ok) client.setQueryData(["floor-survey", scenarioId], { survey: outcome.value, of: scenario } satisfies Kept);
          },
          () => {
            if (turn.current !== mine) return;
            setShare(null);
            setBroken(true);
          },
        );
    },
    [engine, scenario, seed, client, scenarioId],
  );
  const cancel = useCallback(() => {
    turn.current++;
    setShare(null);
    engine?.cancelTask("survey");
  }, [engine]);
  return useMemo(() => ({ survey: data?.survey ?? null, stale, share, broken, run, cancel }), [data, stale, share, broken, run, cancel]);
}
