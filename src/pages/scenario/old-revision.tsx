import { lazy, Suspense, useCallback, useMemo, useState } from "react";
import { Link, useMatch, useNavigate } from "react-router-dom";
import type { RevisionDetail } from "#shared/api/revisions.ts";
import type { ScenarioResponse } from "#shared/api/scenarios.ts";
import { plantTitle } from "#shared/plants/registry.ts";
import { useRevision } from "#src/api/revisions/get-revision.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths, patterns } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { Button, LinkButton } from "#src/components/ui/button.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { Way } from "#src/components/ui/way.tsx";
import { downloadJson } from "#src/lib/download.ts";
import { counted, instantText } from "#src/lib/format.ts";
import { KeepRun } from "./bench/keep-run.tsx";
import { LiveBench } from "./bench/live-bench.tsx";
import { useBench } from "./bench/use-bench.ts";
import { useBenchCursor } from "./bench/use-bench-cursor.ts";
import { ChangesDialog } from "./dialogs/changes-dialog.tsx";
import { describeChanges } from "./model/changes.ts";
import { cleanDraft } from "./model/draft.ts";
import { judge } from "./model/judge.ts";
import { PhoneBar, type PhoneView } from "./phone-bar.tsx";
import { Setup } from "./setup/setup.tsx";
import { SetupForm } from "./setup/setup-form.tsx";
import { useFolds } from "./setup/use-folds.ts";
import { useEngine } from "./use-engine.ts";

/** A revision as it was saved: to be read and run, not to be changed. */
export function OldRevision({ data, revision }: { data: ScenarioResponse; revision: number }) {
  const team = useTeam();
  const query = useRevision(team.id, data.id, revision);
  if (query.data) return <Shown data={data} detail={query.data} />;
  if (query.isError) {
    return (
      <QueryError error={query.error} what={`Revision ${revision}`} onRetry={() => void query.refetch()}>
        <LinkButton to={paths.scenario(team.id, data.id)}>To revision {data.latest.number}</LinkButton>
      </QueryError>
    );
  }
  return <Loading what={`Revision ${revision} opens`} />;
}

const FloorView = lazy(async () => ({ default: (await import("#src/pages/floor/floor-view.tsx")).FloorView }));

const nothing = () => {};

function Shown({ data, detail }: { data: ScenarioResponse; detail: RevisionDetail }) {
  const team = useTeam();
  const navigate = useNavigate();
  const folds = useFolds();
  const engine = useEngine();
  const [seed, setSeed] = useState<number | null>(null);
  const [view, setView] = useState<PhoneView>("bench");
  const [comparing, setComparing] = useState(false);
  const { scenario } = detail;
  const control = useMemo(() => ({ draft: cleanDraft(scenario), typingAt: null, edit: nothing, endStep: nothing, undo: nothing }), [scenario]);
  const judged = useMemo(() => judge(control.draft), [control]);
  const changes = useMemo(() => describeChanges(scenario, data.latest.scenario), [scenario, data.latest]);
  const bench = useBench(engine, judged.scenario, judged.timing, seed);
  const cursor = useBenchCursor(bench.run?.result ?? null);
  const onFloor = useMatch(patterns.scenarioFloor) !== null;
  const here = paths.scenario(team.id, data.id);
  const atThis = `?revision=${detail.number}`;
  const floorAt = useCallback(
    (round: number, slot: string) =>
      `${paths.scenarioFloor(team.id, data.id)}?revision=${detail.number}&round=${round}&slot=${encodeURIComponent(slot)}`,
    [team.id, data.id, detail.number],
  );
  return (
    <div className="workshop" data-view={onFloor ? "floor" : view}>
      <DocumentTitle>{`${scenario.name}, revision ${detail.number}`}</DocumentTitle>
      <div className="title flex-wrap!">
        <div>
          <p className="trail">
            <Link to={paths.scenarios(team.id)}>Scenarios</Link> / {plantTitle(scenario.loops[0].plant)}
          </p>
          <h1>
            {scenario.name}{" "}
            <span className="rev">
              <Link className="rev-link" to={paths.scenarioRevisions(team.id, data.id)}>
                Revision {detail.number}
              </Link>
              {detail.note && `, ${detail.note}`}
            </span>
          </h1>
        </div>
        <div className="acts flex-wrap! max-md:ml-0!">
          <Button onClick={() => downloadJson(`${scenario.name} revision ${detail.number}`, scenario)}>Export as JSON</Button>
          <Button onClick={() => navigate(here, { state: { restore: { revision: detail.number, scenario } } })}>Restore as a draft</Button>
          <LinkButton kind="go" to={here}>
            To revision {data.latest.number}
          </LinkButton>
        </div>
      </div>
      <Way
        label={scenario.name}
        points={[
          { to: `${here}${atThis}`, word: "Bench", end: true },
          { to: `${paths.scenarioFloor(team.id, data.id)}${atThis}`, word: "Floor" },
          { to: paths.scenarioRuns(team.id, data.id), word: "Runs" },
        ]}
      />
      <Tell calm>
        <span>
          {detail.author.name} saved this revision on {instantText(detail.savedAt)}. It never changes: values can be read here, not edited.
        </span>
        <Button small kind="bare" onClick={() => setComparing(true)}>
          {counted(changes.length, "setting")} changed since
        </Button>
      </Tell>
      <SetupForm control={control} issues={judged.issues} good={judged.scenario} readOnly folds={folds}>
        {onFloor ? (
          <Suspense fallback={<Loading what="The floor opens" />}>
            <FloorView
              {...{ bench, timing: judged.timing, engine, seed, cursor }}
              onSeed={setSeed}
              shown={null}
              onReveal={nothing}
              mayUpload={false}
            />
          </Suspense>
        ) : (
          <div className="lay">
            <Setup timing={judged.timing} />
            <LiveBench
              bench={bench}
              timing={judged.timing}
              issues={judged.issues}
              lastGood={null}
              seed={seed}
              cursor={cursor}
              engine={engine}
              floorAt={floorAt}
              onSeed={setSeed}
              onFirstIssue={() => setView("setup")}
              actions={
                <KeepRun
                  engine={engine}
                  scenarioId={data.id}
                  revision={detail.number}
                  run={bench.run}
                  impossible={team.may("make-runs") ? null : "Your role does not keep runs."}
                />
              }
            />
          </div>
        )}
      </SetupForm>
      <PhoneBar
        name={scenario.name}
        teamId={team.id}
        scenarioId={data.id}
        view={onFloor ? "floor" : view}
        issues={judged.issues.length}
        search={atThis}
        onView={(next) => {
          setView(next);
          if (onFloor) navigate(`${here}${atThis}`);
        }}
      />
      {comparing && (
        <ChangesDialog title={`From revision ${detail.number} to ${data.latest.number}`} changes={changes} onClose={() => setComparing(false)} />
      )}
    </div>
  );
}
