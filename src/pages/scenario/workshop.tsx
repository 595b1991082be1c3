import { lazy, Suspense, useCallback, useEffect, useMemo, useRef, useState } from "react";
import { useLocation, useMatch, useNavigate } from "react-router-dom";
import { rolesThatMay } from "#shared/api/permissions.ts";
import type { ScenarioResponse } from "#shared/api/scenarios.ts";
import { plantTitle } from "#shared/plants/registry.ts";
import { parseScenario } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { useRunList } from "#src/api/runs/list-runs.ts";
import { useDuplicateScenario } from "#src/api/scenarios/duplicate-scenario.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths, patterns } from "#src/app/paths.ts";
import { useSession, useTeam } from "#src/app/session.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { downloadJson } from "#src/lib/download.ts";
import { listed } from "#src/lib/format.ts";
import { KeepRun } from "./bench/keep-run.tsx";
import { LiveBench } from "./bench/live-bench.tsx";
import { useBench } from "./bench/use-bench.ts";
import { useBenchCursor } from "./bench/use-bench-cursor.ts";
import { ChangesDialog } from "./dialogs/changes-dialog.tsx";
import { ConflictDialog } from "./dialogs/conflict-dialog.tsx";
import { ImportDialog } from "./dialogs/import-dialog.tsx";
import { LeaveDialog } from "./dialogs/leave-dialog.tsx";
import { SaveDialog } from "./dialogs/save-dialog.tsx";
import { type Change, describeChanges } from "./model/changes.ts";
import { cleanDraft } from "./model/draft.ts";
import { type DraftStore, keepCopy, readCopy, type StoredDraft } from "./model/draft-store.ts";
import { floorText } from "./model/floor-words.ts";
import { getAt, isWithin } from "./model/json-path.ts";
import { fromRule, judge } from "./model/judge.ts";
import { lastGoodText } from "./model/last-good.ts";
import { sectionOf } from "./model/sections.ts";
import { CopyNotice, DraftNotices } from "./notices.tsx";
import { changesText, PageHead } from "./page-head.tsx";
import { PhoneBar, type PhoneView } from "./phone-bar.tsx";
import { revealField } from "./reveal.ts";
import { Setup } from "./setup/setup.tsx";
import { SetupForm } from "./setup/setup-form.tsx";
import { useFolds } from "./setup/use-folds.ts";
import { type Base, useDraft } from "./use-draft.ts";
import { useEngine } from "./use-engine.ts";
import { useKeys } from "./use-keys.ts";
import { useSaving } from "./use-saving.ts";
import { useTold } from "./use-told.ts";

interface WorkshopProps {
  data: ScenarioResponse;
  base: Base;
  store: DraftStore;
  found: StoredDraft | null;
  onOtherBase: () => void;
}

type Open = { kind: "save" | "import" | "changes" } | { kind: "saved-changes"; title: string; changes: readonly Change[] } | null;

/** Fetched when a floor is first looked at. */
const FloorView = lazy(async () => ({ default: (await import("#src/pages/floor/floor-view.tsx")).FloorView }));

const NEWEST_RUN = { page: 1, pageSize: 1 } as const;

/** The scenario under edit: set-up on one side, the live bench on the other. */
export function Workshop({ data, base, store, found, onOtherBase }: WorkshopProps) {
  const team = useTeam();
  const { user } = useSession();
  const toast = useToast();
  const navigate = useNavigate();
  const control = useDraft({ base, store, found, now: Date.now, onOtherBase });
  const { draft } = control;
  const folds = useFolds();
  const engine = useEngine();
  const [seed, setSeed] = useState<number | null>(null);
  const [open, setOpen] = useState<Open>(null);
  const [view, setView] = useState<PhoneView>("bench");
  const onFloor = useMatch(patterns.scenarioFloor) !== null;
  const [shownOnFloor, setShownOnFloor] = useState<{ path: string } | null>(null);
  const [copy, setCopy] = useState(() => readCopy(data.id, user.id));
  const runs = useRunList(team.id, data.id, NEWEST_RUN);
  const duplicate = useDuplicateScenario(team.id);

  const judged = useMemo(() => judge(draft), [draft]);
  const good = useRef<Scenario | null>(null);
  if (judged.scenario) good.current = judged.scenario;
  const ownSeed = getAt(draft.json, ["run", "seed"]);
  // A seed that is set in the scenario is the one that runs.
  // biome-ignore lint/correctness/useExhaustiveDependencies: only when the scenario's own seed changes
  useEffect(() => setSeed(null), [ownSeed]);
  const bench = useBench(engine, judged.scenario, judged.timing, seed);
  const cursor = useBenchCursor(bench.run?.result ?? null);
  const issues = useMemo(() => [...judged.issues, ...bench.refused.map(fromRule)], [judged, bench.refused]);
  const changes = useMemo(() => describeChanges(control.base.scenario, draft.json), [control.base, draft]);
  const unfinished = Object.values(draft.typed).filter(({ problem }) => problem !== null).length;
  const changeCount = changes.length + unfinished;

  const name = (draft.json as Partial<Scenario>).name?.trim() || data.name;
  const trying = !data.mayEdit;
  const download = useCallback(() => downloadJson(name, draft.json), [name, draft]);

  const saving = useSaving({
    teamId: team.id,
    scenarioId: data.id,
    control,
    scenario: judged.scenario,
    keepCopy: () => {
      const kept = { json: draft.json, base: control.base.revision, at: Date.now() };
      keepCopy(data.id, user.id, kept);
      setCopy(kept);
    },
    onShowChanges: (title, list) => setOpen({ kind: "saved-changes", title, changes: list }),
  });
  const dropCopy = () => {
    keepCopy(data.id, user.id, null);
    setCopy(null);
  };

  const reveal = useCallback(
    (path: string) => {
      if (isWithin(path, "floor")) {
        setShownOnFloor({ path });
        navigate(paths.scenarioFloor(team.id, data.id));
        return;
      }
      if (onFloor) navigate(paths.scenario(team.id, data.id));
      setView("setup");
      folds.setOpen(sectionOf(path), true);
      revealField(path);
    },
    [folds, navigate, onFloor, team.id, data.id],
  );

  useBrought(control.edit, reveal);

  const cannotSave =
    issues.length > 0
      ? issues.length === 1
        ? "Put the marked field right first."
        : `Put the ${issues.length} marked fields right first.`
      : changeCount === 0
        ? "Nothing has changed since this revision."
        : null;
  const askToSave = () => {
    if (trying) toast({ text: "Saving is not offered here: you may try values, and nothing is kept on the server." });
    else if (cannotSave) toast({ text: cannotSave });
    else {
      saving.forgetError();
      setOpen({ kind: "save" });
    }
  };
  const history = useTold(control, folds);
  useKeys({ undo: history.undo, redo: history.redo, save: askToSave });

  const cannotKeep = !team.may("make-runs")
    ? `Keeping runs is for ${listed(
        rolesThatMay("make-runs").map((role) => `${role}s`),
        "and",
      )}.`
    : changeCount > 0
      ? "Save the changes first: a kept run belongs to a revision."
      : issues.length > 0
        ? "Put the marked field right first."
        : bench.progress
          ? "The run is still computed."
          : null;

  const floorAt = useCallback(
    (round: number, slot: string) => `${paths.scenarioFloor(team.id, data.id)}?round=${round}&slot=${encodeURIComponent(slot)}`,
    [team.id, data.id],
  );

  return (
    <div className="workshop" data-view={onFloor ? "floor" : view}>
      <DocumentTitle>{onFloor ? `${name}, floor` : name}</DocumentTitle>
      <p className="vh" role="status">
        {history.told}
      </p>
      <PageHead
        teamId={team.id}
        scenarioId={data.id}
        name={name}
        machine={plantTitle(control.base.scenario.loops[0].plant)}
        revision={control.base.revision}
        note={control.base.revision === data.latest.number ? data.latest.note : ""}
        changes={changeCount}
        trying={trying}
        runs={runs.data?.total}
        canUndo={control.canUndo}
        canRedo={control.canRedo}
        onUndo={history.undo}
        onRedo={history.redo}
        onShowChanges={() => setOpen({ kind: "changes" })}
        onSave={askToSave}
        saveImpossible={trying ? undefined : cannotSave}
        onDuplicate={
          team.may("edit-scenarios")
            ? () =>
                duplicate.mutate(
                  { id: data.id },
                  {
                    onSuccess: (made) => {
                      toast({ text: `“${made.name}” was made from revision ${data.latest.number}.` });
                      navigate(paths.scenario(team.id, made.id));
                    },
                    onError: (error) => toast({ text: `Not duplicated. ${failureText(error)}` }),
                  },
                )
            : null
        }
        duplicating={duplicate.isPending}
        onExport={download}
        onImport={() => setOpen({ kind: "import" })}
        onRename={trying ? null : () => reveal("name")}
        tail={onFloor && judged.scenario?.floor ? floorText(judged.scenario.floor) : undefined}
      />
      <DraftNotices control={control} />
      {copy && (
        <CopyNotice
          copy={copy}
          onRestore={() => {
            control.edit({ kind: "replace", draft: cleanDraft(copy.json) });
            dropCopy();
          }}
          onDownload={() => downloadJson(`${name} my version`, copy.json)}
          onDrop={dropCopy}
        />
      )}
      {control.base.revision < data.latest.number && (
        <Tell calm>
          <span>
            {data.latest.author.name} saved revision {data.latest.number} in the meantime. Your changes go on from revision {control.base.revision}.
            Saving shows what differs.
          </span>
        </Tell>
      )}
      {trying && (
        <Tell calm>
          <span>
            {data.archivedAt
              ? "This scenario is archived: values can be tried here, saving is not offered. Restore it in the table of scenarios."
              : `You may change every value and see what happens; saving is for ${listed(
                  rolesThatMay("edit-scenarios").map((role) => `${role}s`),
                  "and",
                )}.`}
          </span>
        </Tell>
      )}
      <SetupForm control={control} issues={issues} good={good.current} readOnly={false} folds={folds}>
        {onFloor ? (
          <Suspense fallback={<Loading what="The floor opens" />}>
            <FloorView
              {...{ bench, timing: judged.timing, engine, seed, cursor }}
              onSeed={setSeed}
              shown={shownOnFloor}
              onReveal={reveal}
              mayUpload={team.may("edit-scenarios") && data.mayEdit}
            />
          </Suspense>
        ) : (
          <div className="lay">
            <Setup timing={judged.timing} />
            <LiveBench
              bench={bench}
              timing={judged.timing}
              issues={issues}
              lastGood={lastGoodText(issues, bench.run?.scenario)}
              seed={seed}
              cursor={cursor}
              engine={engine}
              floorAt={floorAt}
              onSeed={setSeed}
              onFirstIssue={() => issues[0] && reveal(issues[0].path)}
              actions={<KeepRun engine={engine} scenarioId={data.id} revision={control.base.revision} run={bench.run} impossible={cannotKeep} />}
            />
          </div>
        )}
      </SetupForm>
      <PhoneBar
        name={name}
        teamId={team.id}
        scenarioId={data.id}
        view={onFloor ? "floor" : view}
        issues={issues.length}
        onView={(next) => {
          setView(next);
          if (onFloor) navigate(paths.scenario(team.id, data.id));
        }}
      />

      {open?.kind === "save" && (
        <SaveDialog
          number={control.base.revision + 1}
          base={control.base.revision}
          changes={changes}
          busy={saving.busy}
          error={saving.error}
          onSave={(note) => saving.save(note, () => setOpen(null))}
          onClose={() => setOpen(null)}
        />
      )}
      {saving.conflict && judged.scenario && (
        <ConflictDialog
          base={control.base}
          mine={judged.scenario}
          theirs={saving.conflict.theirs}
          busy={saving.busy}
          error={saving.error}
          onResolve={saving.resolve}
          onClose={saving.closeConflict}
        />
      )}
      {open?.kind === "import" && (
        <ImportDialog
          onRead={(scenario) => {
            control.edit({ kind: "replace", draft: cleanDraft(scenario) });
            setOpen(null);
            toast({ text: `“${scenario.name}” is on the bench, unsaved; undo brings back what was.` });
          }}
          onClose={() => setOpen(null)}
        />
      )}
      {open?.kind === "changes" && (
        <ChangesDialog
          title={`${changesText(changeCount, trying)} since revision ${control.base.revision}`}
          changes={changes}
          unfinished={unfinished}
          onDiscard={() => {
            control.discard();
            setOpen(null);
            toast({ text: "Your changes are discarded; undo brings them back." });
          }}
          onClose={() => setOpen(null)}
        />
      )}
      {open?.kind === "saved-changes" && <ChangesDialog title={open.title} changes={open.changes} onClose={() => setOpen(null)} />}
      <LeaveDialog when={!control.stored && control.touched} onDownload={download} />
    </div>
  );
}

interface Brought {
  restore?: { revision: number; scenario: unknown };
  losses?: { process: unknown; from: string };
}

/** An old revision that was chosen to go on from, or the losses of a reception log, arrive with the address. */
function useBrought(edit: ReturnType<typeof useDraft>["edit"], reveal: (path: string) => void) {
  const location = useLocation();
  const navigate = useNavigate();
  const toast = useToast();
  const done = useRef<unknown>(null);
  useEffect(() => {
    const { restore, losses } = (location.state ?? {}) as Brought;
    const brought = restore ?? losses;
    if (!brought || done.current === brought) return;
    done.current = brought;
    navigate(location.pathname, { replace: true, state: null });
    if (restore) {
      const parsed = parseScenario(restore.scenario);
      if (!parsed.ok) return;
      edit({ kind: "replace", draft: cleanDraft(parsed.value) });
      toast({ text: `Revision ${restore.revision} is on the bench as a draft; undo brings back what was.` });
    } else if (losses) {
      edit({ kind: "set", path: ["losses", "process"], value: losses.process });
      reveal("losses.process.type");
      toast({ text: `The losses of “${losses.from}” are in the draft, unsaved; undo brings back what was.` });
    }
  }, [location, edit, reveal, navigate, toast]);
}
