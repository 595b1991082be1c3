import type { ScenarioListQuery, ScenarioListResponse } from "#shared/api/scenarios.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Empty } from "#src/components/ui/states.tsx";
import { counted } from "#src/lib/format.ts";
import { activeFilters, type ChangeList, withoutFilters } from "./list-state.ts";
import { clearWords, nothingFound, whatElse } from "./words.ts";

interface NoScenariosProps {
  list: ScenarioListResponse;
  query: ScenarioListQuery;
  change: ChangeList;
  mayCreate: boolean;
  onMake: () => void;
  onImport: () => void;
}

/** Why the table is empty: the filters, the archive, or because nothing was made yet. */
export function NoScenarios({ list, query, change, mayCreate, onMake, onImport }: NoScenariosProps) {
  const filters = activeFilters(query).length;
  if (filters > 0 && list.totalUnfiltered > 0) {
    return (
      <Empty title={nothingFound(query, list.owners.find(({ id }) => id === query.owner)?.name)} text={whatElse(query, list.totalUnfiltered)}>
        <Button onClick={() => change(withoutFilters(query))}>{clearWords(filters)}</Button>
      </Empty>
    );
  }
  if (query.archived === "only") {
    return (
      <Empty title="Nothing is archived" text="An archived scenario leaves the table, keeps its revisions and runs, and can be restored.">
        <Button onClick={() => change({ ...withoutFilters(query), archived: "hidden" })}>Back to the scenarios</Button>
      </Empty>
    );
  }
  if (list.archivedTotal > 0 && query.archived === "hidden") {
    return (
      <Empty title="All scenarios are archived" text={`${counted(list.archivedTotal, "scenario")} can be shown and restored.`}>
        <Button onClick={() => change({ archived: "only" })}>Show the archived</Button>
      </Empty>
    );
  }
  return mayCreate ? (
    <Empty title="No scenario yet" text="Begin with a template: it runs at once, and every number of it can be changed.">
      <Button kind="go" onClick={onMake}>
        New pendulum on cart
      </Button>
      <Button onClick={onImport}>Import a file</Button>
    </Empty>
  ) : (
    <Empty title="No scenario yet" text="An engineer, a reviewer or an administrator of the team has to make the first one." />
  );
}
