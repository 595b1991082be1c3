import { useEffect, useState } from "react";
import { useNavigate } from "react-router-dom";
import { rolesThatMay } from "#shared/api/permissions.ts";
import type { ScenarioListQuery, ScenarioListResponse } from "#shared/api/scenarios.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";
import { useScenarioList } from "#src/api/scenarios/list-scenarios.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { Button } from "#src/components/ui/button.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import { Menu, MenuItem } from "#src/components/ui/menu.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { Pager } from "#src/components/ui/table.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { capital, counted, listed, THIN, withArticle } from "#src/lib/format.ts";
import { useMedia } from "#src/lib/use-media.ts";
import { DeleteDialog } from "./delete-dialog.tsx";
import { Filters } from "./filters.tsx";
import { ImportDialog } from "./import-dialog.tsx";
import { activeFilters, useListState } from "./list-state.ts";
import { NoScenarios } from "./no-scenarios.tsx";
import { ScenarioCards } from "./scenario-cards.tsx";
import { ScenarioTable } from "./scenario-table.tsx";
import { TemplateStrip } from "./template-strip.tsx";
import { useMakeScenario } from "./use-make-scenario.ts";
import { useScenarioActs } from "./use-scenario-acts.ts";
import "./scenarios.css";

/** "11 of the team, 2 archived" */
function countText(list: ScenarioListResponse, archived: ScenarioListQuery["archived"]): string {
  if (archived === "only") return `${list.archivedTotal} archived`;
  const active = archived === "all" ? list.totalUnfiltered - list.archivedTotal : list.totalUnfiltered;
  return `${active} of the team${list.archivedTotal > 0 ? `, ${list.archivedTotal} archived` : ""}`;
}

function shownText({ total, totalUnfiltered }: ScenarioListResponse, filtered: boolean): string {
  return filtered ? `${total} of ${counted(totalUnfiltered, "scenario")}` : counted(total, "scenario");
}

export function ScenariosPage() {
  const team = useTeam();
  const navigate = useNavigate();
  const [query, change] = useListState();
  const answer = useScenarioList(team.id, query);
  const acts = useScenarioActs();
  const making = useMakeScenario(team.id);
  // Too narrow for seven columns: the rows become entries, in one or two columns.
  const narrow = useMedia("(max-width: 999px)");
  const [importing, setImporting] = useState(false);

  const list = answer.data;
  const waiting = answer.isPlaceholderData;
  const filtered = activeFilters(query).length > 0;
  const lastPage = list ? Math.max(1, Math.ceil(list.total / list.pageSize)) : null;
  // The last row of the last page was archived, or the link is old.
  const beyond = !waiting && lastPage !== null && query.page > lastPage;
  useEffect(() => {
    if (beyond) change({ page: lastPage ?? 1 }, true);
  }, [beyond, lastPage, change]);

  const Rows = narrow ? ScenarioCards : ScenarioTable;
  return (
    <>
      <DocumentTitle>Scenarios</DocumentTitle>
      <div className="title">
        <h1>Scenarios {list && <span className="rev">{countText(list, query.archived)}</span>}</h1>
        {acts.mayCreate && (
          <div className="acts">
            <Button icon="import" className="max-md:[&>.ic]:hidden" onClick={() => setImporting(true)}>
              Import
            </Button>
            <Menu
              trigger={
                <Button kind="go" icon="plus" className="max-md:[&>.ic]:hidden" busy={making.isPending}>
                  New scenario
                </Button>
              }
            >
              {TEMPLATES.map((template) => (
                <MenuItem key={template.key} onSelect={() => making.make(template)}>
                  <span>
                    {template.title}
                    <span className="pl">{template.text}</span>
                  </span>
                </MenuItem>
              ))}
            </Menu>
          </div>
        )}
      </div>
      {acts.mayCreate ? (
        <TemplateStrip making={making.isPending ? making.template : null} onMake={making.make} />
      ) : (
        <p className="mayread">
          You are {listed(team.roles.map(withArticle))} in this team: you can open scenarios, try changes on the bench and export them, but not save.{" "}
          {capital(listed(rolesThatMay("edit-scenarios").map(withArticle), "or"))} can.
        </p>
      )}
      {making.failure && (
        <Tell>
          <span>No scenario was made. {making.failure}</span>
        </Tell>
      )}
      {acts.failure && (
        <Tell>
          <span>{acts.failure}</span>
          <button type="button" className="link" onClick={acts.forgetFailure}>
            Close
          </button>
        </Tell>
      )}
      <Filters query={query} change={change} list={list}>
        {list && !waiting && shownText(list, filtered)}
      </Filters>
      {answer.isError && list && <Tell calm>These rows may be old: they could not be asked for again. {answer.error.message}</Tell>}
      {list && list.items.length > 0 ? (
        <>
          <Rows teamId={team.id} items={list.items} query={query} change={change} acts={acts} waiting={waiting} />
          <Pager page={list.page} pageSize={list.pageSize} total={list.total} onPage={(page) => change({ page })}>
            <MarkKey />
          </Pager>
        </>
      ) : list && !beyond ? (
        <NoScenarios
          list={list}
          query={query}
          change={change}
          mayCreate={acts.mayCreate}
          onMake={() => TEMPLATES[0] && making.make(TEMPLATES[0])}
          onImport={() => setImporting(true)}
        />
      ) : answer.isError ? (
        <QueryError error={answer.error} what="The scenarios" onRetry={() => void answer.refetch()} />
      ) : (
        <Loading what="Loading the scenarios" />
      )}
      <DeleteDialog acts={acts} />
      {importing && <ImportDialog teamId={team.id} onShut={() => setImporting(false)} onImported={(id) => navigate(paths.scenario(team.id, id))} />}
    </>
  );
}

const MarkKey = () => (
  <span className="key">
    <span>
      <Mark state="holds" size={13} quiet /> holds
    </span>
    <span>
      <Mark state="near" size={13} quiet /> over 90{THIN}% of a limit
    </span>
    <span>
      <Mark state="crosses" size={13} quiet /> crosses a limit
    </span>
    <span>
      <Mark state="not-decided" size={13} quiet /> not decided
    </span>
    <span>
      <Mark state="does-not-fit" size={13} quiet /> round does not fit
    </span>
  </span>
);
