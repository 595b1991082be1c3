/** What can be done to a row of the table, and how it is told. */
import { useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import type { ScenarioItem } from "#shared/api/scenarios.ts";
import { useSetArchived } from "#src/api/scenarios/change-scenario.ts";
import { useDeleteScenario } from "#src/api/scenarios/delete-scenario.ts";
import { useDuplicateScenario } from "#src/api/scenarios/duplicate-scenario.ts";
import { scenarioOptions } from "#src/api/scenarios/get-scenario.ts";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { downloadJson } from "#src/lib/download.ts";

export function useScenarioActs() {
  const team = useTeam();
  const client = useQueryClient();
  const toast = useToast();
  const duplicating = useDuplicateScenario(team.id);
  const archiving = useSetArchived(team.id);
  const deleting = useDeleteScenario(team.id);
  const [failure, setFailure] = useState<string | null>(null);
  const [toDelete, setToDelete] = useState<ScenarioItem | null>(null);

  const failed = (what: string) => (error: unknown) => setFailure(`${what} ${failureText(error)}`);
  const setArchived = (item: ScenarioItem, archived: boolean) =>
    archiving.mutate(
      { id: item.id, archived },
      {
        onSuccess: () =>
          toast({
            text: archived ? `“${item.name}” is archived.` : `“${item.name}” is back in the table.`,
            action: { word: "Undo", onPress: () => setArchived(item, !archived) },
          }),
        onError: failed(`“${item.name}” was not ${archived ? "archived" : "restored"}.`),
      },
    );

  return {
    mayCreate: team.may("edit-scenarios"),
    failure,
    forgetFailure: () => setFailure(null),
    toDelete,
    busyId: duplicating.isPending ? duplicating.variables.id : archiving.isPending ? archiving.variables.id : null,
    isDeleting: deleting.isPending,
    deleteFailure: deleting.isError ? failureText(deleting.error) : null,

    duplicate: (item: ScenarioItem) =>
      duplicating.mutate(
        { id: item.id },
        {
          onSuccess: (copy) => toast({ text: `“${copy.name}” was made.`, action: { word: "Open it", to: paths.scenario(team.id, copy.id) } }),
          onError: failed(`“${item.name}” was not duplicated.`),
        },
      ),
    exportJson: async (item: ScenarioItem) => {
      try {
        const { latest } = await client.fetchQuery(scenarioOptions(team.id, item.id));
        downloadJson(latest.scenario.name, latest.scenario);
      } catch (error) {
        failed(`“${item.name}” was not exported.`)(error);
      }
    },
    archive: (item: ScenarioItem) => setArchived(item, true),
    restore: (item: ScenarioItem) => setArchived(item, false),
    askToDelete: (item: ScenarioItem) => {
      deleting.reset();
      setToDelete(item);
    },
    keep: () => setToDelete(null),
    deleteForGood: (item: ScenarioItem) =>
      deleting.mutate(item.id, {
        onSuccess: () => {
          setToDelete(null);
          toast({ text: `“${item.name}” is deleted.` });
        },
      }),
  };
}
export type ScenarioActs = ReturnType<typeof useScenarioActs>;
