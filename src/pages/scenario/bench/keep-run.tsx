import { useState } from "react";
import { useCreateRun } from "#src/api/runs/create-run.ts";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { Button } from "#src/components/ui/button.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import type { EngineClient } from "#src/workers/pool.ts";
import type { BenchRun } from "./use-bench.ts";

interface KeepRunProps {
  engine: EngineClient | null;
  scenarioId: string;
  revision: number;
  run: BenchRun | null;
  /** Why a run cannot be kept now. */
  impossible: string | null;
}

/** Has the server compute the run of this revision and seed, store it, and compare it with what is on the screen. */
export function KeepRun({ engine, scenarioId, revision, run, impossible }: KeepRunProps) {
  const team = useTeam();
  const create = useCreateRun(team.id, scenarioId);
  const toast = useToast();
  const [computing, setComputing] = useState(false);

  const keep = async () => {
    if (!run) return;
    const { seed } = run.result;
    setComputing(true);
    const digest = (await engine?.digest(run.scenario, seed).catch(() => null)) ?? null;
    setComputing(false);
    create.mutate(
      { revision, seed, digest },
      {
        onSuccess: ({ run: kept, digestMatches }) =>
          toast({
            text:
              digestMatches === false
                ? `Kept, but the server computed another run than this page: ${kept.verdict.word}.`
                : `Kept: revision ${revision}, seed ${seed}, ${kept.verdict.word.toLowerCase()}.`,
            action: { word: "Open the run", to: paths.run(team.id, kept.id) },
          }),
        onError: (error) => toast({ text: `Not kept. ${failureText(error)}` }),
      },
    );
  };

  return (
    <Button small onClick={keep} busy={computing || create.isPending} impossible={impossible ?? (run ? null : "There is no run yet.")}>
      {computing || create.isPending ? "Keeping" : "Keep this run"}
    </Button>
  );
}
