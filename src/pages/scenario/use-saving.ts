import { useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { useNavigate } from "react-router-dom";
import type { RevisionDetail } from "#shared/api/revisions.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { isApiError } from "#src/api/client.ts";
import { revisionOptions } from "#src/api/revisions/get-revision.ts";
import { useSaveRevision } from "#src/api/revisions/save-revision.ts";
import { useCreateScenario } from "#src/api/scenarios/create-scenario.ts";
import { paths } from "#src/app/paths.ts";
import { useToast } from "#src/components/ui/toast.tsx";
import type { Resolution } from "./dialogs/conflict-dialog.tsx";
import { describeChanges } from "./model/changes.ts";
import { cleanDraft } from "./model/draft.ts";
import { mergeDrafts } from "./model/merge.ts";
import type { DraftControl } from "./use-draft.ts";

const LONGEST_NAME = 120;

export interface Conflict {
  theirs: RevisionDetail;
  note: string;
}

interface SavingOptions {
  teamId: string;
  scenarioId: string;
  control: DraftControl;
  /** The draft as it would be saved; null while something has to be put right. */
  scenario: Scenario | null;
  /** Keeps a version in the browser that gives way to another one. */
  keepCopy: () => void;
  onShowChanges: (title: string, changes: ReturnType<typeof describeChanges>) => void;
}

/** Saving the draft as the next revision, and what to do when somebody else was quicker. */
export function useSaving({ teamId, scenarioId, control, scenario, keepCopy, onShowChanges }: SavingOptions) {
  const client = useQueryClient();
  const toast = useToast();
  const navigate = useNavigate();
  const save = useSaveRevision(teamId, scenarioId);
  const create = useCreateScenario(teamId);
  const [conflict, setConflict] = useState<Conflict | null>(null);
  const [fetching, setFetching] = useState(false);
  const [error, setError] = useState<unknown>(null);

  const toBase = ({ number, scenario: saved }: RevisionDetail) => ({ revision: number, scenario: saved });

  const send = (baseRevision: number, note: string, onSaved: () => void) => {
    if (!scenario) return;
    const before = control.base;
    setError(null);
    save.mutate(
      { baseRevision, scenario, note },
      {
        onSuccess: () => {
          // What was sent, not the latest: a colleague may have saved on top of it by now, and the next save has to say so.
          const saved = { revision: baseRevision + 1, scenario };
          control.rebase(saved);
          setConflict(null);
          onSaved();
          const title = `What changed from revision ${before.revision} to ${saved.revision}`;
          toast({
            text: `Saved as revision ${saved.revision}.`,
            action: { word: "Show what changed", onPress: () => onShowChanges(title, describeChanges(before.scenario, saved.scenario)) },
          });
        },
        onError: async (cause) => {
          const newer = isApiError(cause, "revision-conflict") ? cause.details.latest : undefined;
          if (!newer) return setError(cause);
          setFetching(true);
          try {
            const theirs = await client.fetchQuery({ ...revisionOptions(teamId, scenarioId, newer.number), staleTime: 0 });
            setConflict({ theirs, note });
            onSaved();
          } catch (failure) {
            setError(failure);
          } finally {
            setFetching(false);
          }
        },
      },
    );
  };

  const asNewScenario = () => {
    if (!scenario || !conflict) return;
    const suffix = " (my version)";
    const name = `${scenario.name.slice(0, LONGEST_NAME - suffix.length)}${suffix}`;
    setError(null);
    create.mutate(
      { scenario: { ...scenario, name }, note: conflict.note },
      {
        onSuccess: (created) => {
          control.rebase(toBase(conflict.theirs));
          setConflict(null);
          toast({ text: `“${created.name}” was made from your version.` });
          navigate(paths.scenario(teamId, created.id));
        },
        onError: setError,
      },
    );
  };

  const resolve = (resolution: Resolution) => {
    if (!conflict || !scenario) return;
    const { theirs, note } = conflict;
    if (resolution === "mine") return send(theirs.number, note, () => {});
    if (resolution === "new") return asNewScenario();
    if (resolution === "theirs") keepCopy();
    const { json } = mergeDrafts(control.base.scenario, scenario, theirs.scenario);
    control.rebase(toBase(theirs), resolution === "both" ? cleanDraft(json) : undefined);
    setConflict(null);
    void client.invalidateQueries(revisionOptions(teamId, scenarioId, theirs.number));
    toast({
      text:
        resolution === "both"
          ? `Your changes are on top of revision ${theirs.number} now; look at the bench, then save.`
          : `The bench goes on from revision ${theirs.number}.`,
    });
  };

  return {
    busy: save.isPending || create.isPending || fetching,
    error,
    forgetError: () => setError(null),
    save: (note: string, onSaved: () => void) => send(control.base.revision, note, onSaved),
    conflict,
    closeConflict: () => {
      setConflict(null);
      setError(null);
    },
    resolve,
  };
}
