import { useEffect, useMemo, useRef, useState } from "react";
import { Link, useParams } from "react-router-dom";
import "./run.css";
import type { RunDetail } from "#shared/api/runs.ts";
import type { SeriesRecord } from "#shared/api/series.ts";
import { type RoundTiming, roundTiming } from "#shared/network/round.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import { useRevision } from "#src/api/revisions/get-revision.ts";
import { useRun } from "#src/api/runs/get-run.ts";
import { useSeries } from "#src/api/runs/get-series.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { RunBench, useRunCursor } from "#src/components/drawings/run-bench.tsx";
import type { PlotStackHandle } from "#src/components/plots/plot-stack.tsx";
import { LinkButton } from "#src/components/ui/button.tsx";
import { VerdictLine } from "#src/components/ui/mark.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { Way } from "#src/components/ui/way.tsx";
import { instantText, significant, withUnit } from "#src/lib/format.ts";
import type { EngineClient } from "#src/workers/pool.ts";
import { DigestCheck } from "./digest-check.tsx";
import { EventList } from "./event-list.tsx";
import { ExportMenu } from "./export-menu.tsx";
import { LimitTable, MessageTable, SignalTable } from "./figure-tables.tsx";
import { FloodAtCursor, floodsDecide, useRunFloods } from "./flood-at-cursor.tsx";
import { NodeTable } from "./node-table.tsx";
import { isWhole, resultOf } from "./run-record.ts";
import { runName } from "./run-words.ts";
import { useRunEngine } from "./use-run-engine.ts";

export function RunPage() {
  const { runId = "" } = useParams();
  const team = useTeam();
  const run = useRun(team.id, runId);
  if (run.data) return <OfRun key={run.data.id} run={run.data} />;
  return (
    <>
      <DocumentTitle>Run</DocumentTitle>
      {run.isError ? (
        <QueryError error={run.error} what="The run" onRetry={() => void run.refetch()}>
          <LinkButton to={paths.scenarios(team.id)}>To the scenarios</LinkButton>
        </QueryError>
      ) : (
        <Loading what="The run opens" />
      )}
    </>
  );
}

/** The run is known; its scenario and its record, which are larger, follow. */
function OfRun({ run }: { run: RunDetail }) {
  const team = useTeam();
  const revision = useRevision(team.id, run.scenarioId, run.revision);
  const record = useSeries(team.id, run.id);
  const bench = paths.scenario(team.id, run.scenarioId);
  const runs = paths.scenarioRuns(team.id, run.scenarioId);
  const failed = revision.data ? record.error : revision.error;
  const again = () => {
    void revision.refetch();
    void record.refetch();
  };
  return (
    <>
      <DocumentTitle>{`${run.scenarioName}, run`}</DocumentTitle>
      {revision.data && record.data ? (
        <Whole run={run} scenario={revision.data.scenario} record={record.data} />
      ) : (
        <>
          <div className="title">
            <RunTitle run={run} />
          </div>
          <Way
            label={run.scenarioName}
            points={[
              { to: bench, word: "Bench", end: true },
              { to: paths.scenarioFloor(team.id, run.scenarioId), word: "Floor" },
              { to: runs, word: "Runs" },
            ]}
          />
          {failed ? (
            <QueryError error={failed} what="The record of this run" onRetry={again}>
              <LinkButton to={runs}>To the runs</LinkButton>
            </QueryError>
          ) : (
            <Loading what="The record of this run opens" />
          )}
        </>
      )}
    </>
  );
}

function RunTitle({ run }: { run: RunDetail }) {
  const team = useTeam();
  return (
    <div>
      <p className="trail">
        <Link to={paths.scenarios(team.id)}>Scenarios</Link> / <Link to={paths.scenario(team.id, run.scenarioId)}>{run.scenarioName}</Link> /{" "}
        <Link to={paths.scenarioRuns(team.id, run.scenarioId)}>Runs</Link>
      </p>
      <h1>
        Run{" "}
        <span className="rev">
          {runName(run.revision, run.seed)} · {run.author.name}, {instantText(run.createdAt)}
        </span>
      </h1>
    </div>
  );
}

function Whole({ run, scenario, record }: { run: RunDetail; scenario: Scenario; record: SeriesRecord }) {
  const team = useTeam();
  const result = useMemo(() => resultOf(run, record), [run, record]);
  const timing = useMemo(() => roundTiming(scenario), [scenario]);
  const cursor = useRunCursor(result);
  const stack = useRef<PlotStackHandle>(null);
  const engine = useRunEngine();
  const bench = paths.scenario(team.id, run.scenarioId);
  const { flood, reached } = useRunFlood(run, scenario, timing, engine);
  return (
    <>
      <div className="title">
        <RunTitle run={run} />
        <div className="acts">
          <LinkButton to={`${bench}?revision=${run.revision}`}>Open revision {run.revision}</LinkButton>
          <ExportMenu {...{ run, scenario, record, result, cursor, stack, engine }} />
        </div>
      </div>
      <Way
        label={run.scenarioName}
        points={[
          { to: bench, word: "Bench", end: true },
          { to: paths.scenarioFloor(team.id, run.scenarioId), word: "Floor" },
          { to: paths.scenarioRuns(team.id, run.scenarioId), word: "Runs" },
          { to: paths.run(team.id, run.id), word: "This run" },
        ]}
      />
      <section className="bench sheet doc run-sheet" aria-label="Run">
        <div className="pad">
          <VerdictLine
            state={run.verdict.state}
            word={run.verdict.word}
            sentence={run.verdict.sentence}
            meta={
              <>
                seed {run.seed} · {withUnit(significant(run.durationS, 4), "s")} long
                <br />
                engine {run.engine}
              </>
            }
          />
          {!isWhole(record) && (
            <Tell calm>
              {record.keptEvery > 1 && `Of this long run one point in ${record.keptEvery} is kept and drawn. `}
              {!record.detailed && "Of its rounds only delivered and lost are kept. "}
              Files are computed anew and are whole.
            </Tell>
          )}
          <RunBench scenario={scenario} timing={timing} result={result} cursor={cursor} stackRef={stack} beside={flood} reached={reached} />
        </div>
      </section>
      <div className="run-parts">
        <div>
          <EventList scenario={scenario} result={result} cursor={cursor} />
          <MessageTable result={result} />
          <DigestCheck run={run} scenario={scenario} engine={engine} />
        </div>
        <div>
          <LimitTable scenario={scenario} result={result} />
          <SignalTable scenario={scenario} result={result} />
          <NodeTable scenario={scenario} result={result} />
        </div>
      </div>
    </>
  );
}

/** The flood under the cursor, drawn anew from revision and seed; only the engine that made the run would draw the same. */
function useRunFlood(run: RunDetail, scenario: Scenario, timing: RoundTiming, engine: () => EngineClient) {
  const team = useTeam();
  const same = run.engine === ENGINE_VERSION;
  const [client, setClient] = useState<EngineClient | null>(null);
  const wanted = floodsDecide(scenario) && same;
  // biome-ignore lint/correctness/useExhaustiveDependencies: the worker starts once, and only where a flood is drawn
  useEffect(() => {
    if (wanted) setClient(engine());
  }, [wanted]);
  const floods = useRunFloods(
    client,
    useMemo(() => ({ scenario, timing, seed: run.seed }), [scenario, timing, run.seed]),
  );
  const flood = useMemo(() => {
    if (!floodsDecide(scenario)) return null;
    if (!same) {
      return (
        <p className="note second">
          The floods of this run were drawn by engine {run.engine}; this page has engine {ENGINE_VERSION}, which may draw others. They are not shown.
        </p>
      );
    }
    const floor = paths.scenarioFloor(team.id, run.scenarioId);
    const floorAt = (round: number, slot: string) => `${floor}?revision=${run.revision}&round=${round}&slot=${encodeURIComponent(slot)}`;
    return <FloodAtCursor scenario={scenario} timing={timing} floods={floods} floorAt={run.seed === scenario.run.seed ? floorAt : null} />;
  }, [scenario, timing, run, floods, same, team.id]);
  return { flood, reached: floods.shares };
}
