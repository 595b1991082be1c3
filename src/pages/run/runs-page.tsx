import { Link, useParams, useSearchParams } from "react-router-dom";
import "./run.css";
import { useRunList } from "#src/api/runs/list-runs.ts";
import { useScenario } from "#src/api/scenarios/get-scenario.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { Button, LinkButton } from "#src/components/ui/button.tsx";
import { Icon } from "#src/components/ui/icon.tsx";
import { Menu, MenuChoices } from "#src/components/ui/menu.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Empty, Loading } from "#src/components/ui/states.tsx";
import { Pager } from "#src/components/ui/table.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { Way } from "#src/components/ui/way.tsx";
import { counted } from "#src/lib/format.ts";
import { useMedia } from "#src/lib/use-media.ts";
import { RunCards, RunTable } from "./run-rows.tsx";
import { RUN_VERDICTS, type RunVerdict, VERDICT_CHOICES } from "./run-words.ts";

const PAGE_SIZE = 25;

/** Page, verdict and revision stand in the address; what makes no sense there counts as absent. */
function useRunFilters() {
  const [search, setSearch] = useSearchParams();
  const page = Math.max(1, Math.floor(Number(search.get("page"))) || 1);
  const verdict = RUN_VERDICTS.find((one) => one === search.get("verdict"));
  const asked = Math.floor(Number(search.get("revision")));
  const revision = asked >= 1 ? asked : undefined;
  const change = (next: { page?: number; verdict?: RunVerdict; revision?: number }) => {
    const texts: Record<string, string> = {};
    for (const [key, value] of Object.entries(next)) if (value !== undefined && (key !== "page" || value !== 1)) texts[key] = String(value);
    setSearch(texts, { preventScrollReset: true });
  };
  return { page, verdict, revision, change };
}

export function RunsPage() {
  const { scenarioId = "" } = useParams();
  const team = useTeam();
  const filters = useRunFilters();
  const narrow = useMedia("(max-width: 719px)");
  const { page, verdict, revision, change } = filters;
  const scenario = useScenario(team.id, scenarioId);
  const list = useRunList(team.id, scenarioId, { page, pageSize: PAGE_SIZE, verdict, revision });
  const failed = scenario.data ? list.error : scenario.error;
  const here = paths.scenario(team.id, scenarioId);
  if (!scenario.data) {
    return (
      <>
        <DocumentTitle>Runs</DocumentTitle>
        {failed ? (
          <QueryError error={failed} what="The scenario" onRetry={() => void scenario.refetch()}>
            <LinkButton to={paths.scenarios(team.id)}>To the scenarios</LinkButton>
          </QueryError>
        ) : (
          <Loading what="The runs open" />
        )}
      </>
    );
  }
  const { name, latest } = scenario.data;
  const Rows = narrow ? RunCards : RunTable;
  const filtered = verdict !== undefined || revision !== undefined;
  return (
    <>
      <DocumentTitle>{`${name}, runs`}</DocumentTitle>
      <div className="title">
        <div>
          <p className="trail">
            <Link to={paths.scenarios(team.id)}>Scenarios</Link> / <Link to={here}>{name}</Link>
          </p>
          <h1>Runs</h1>
        </div>
      </div>
      <Way
        label={name}
        points={[
          { to: here, word: "Bench", end: true },
          { to: paths.scenarioFloor(team.id, scenarioId), word: "Floor" },
          { to: paths.scenarioRuns(team.id, scenarioId), word: "Runs", count: filtered ? undefined : list.data?.total },
        ]}
      />
      <div className="run-filters">
        <Choice
          name="Verdict"
          value={verdict ?? "any"}
          options={[{ value: "any", word: "any" }, ...RUN_VERDICTS.map((value) => ({ value, word: VERDICT_CHOICES[value] }))]}
          onChoose={(value) => change({ verdict: RUN_VERDICTS.find((one) => one === value), revision })}
        />
        <Choice
          name="Revision"
          value={String(revision ?? "any")}
          options={[
            { value: "any", word: "any" },
            ...Array.from({ length: Math.min(50, latest.number) }, (_, i) => String(latest.number - i)).map((value) => ({ value, word: value })),
          ]}
          onChoose={(value) => change({ verdict, revision: value === "any" ? undefined : Number(value) })}
        />
        <span className="rt small" aria-live="polite">
          {list.data && !list.isPlaceholderData && `${counted(list.data.total, "run")}${filtered ? " found" : ""}`}
        </span>
      </div>
      {list.isError && list.data && <Tell calm>These rows may be old: they could not be asked for again. {list.error.message}</Tell>}
      {list.data && list.data.items.length > 0 ? (
        <>
          <Rows teamId={team.id} items={list.data.items} waiting={list.isPlaceholderData} />
          <Pager page={list.data.page} pageSize={PAGE_SIZE} total={list.data.total} onPage={(next) => change({ page: next, verdict, revision })} />
        </>
      ) : list.data ? (
        <NoRuns filtered={filtered} beyond={page > 1} onClear={() => change({})} bench={here} />
      ) : list.isError ? (
        <QueryError error={list.error} what="The runs" onRetry={() => void list.refetch()}>
          <LinkButton to={here}>To the bench</LinkButton>
        </QueryError>
      ) : (
        <Loading what="The runs open" />
      )}
    </>
  );
}

function NoRuns({ filtered, beyond, onClear, bench }: { filtered: boolean; beyond: boolean; onClear: () => void; bench: string }) {
  if (filtered || beyond) {
    return (
      <Empty title={filtered ? "No kept run has this verdict and revision" : "This page of the runs is empty"}>
        <Button onClick={onClear}>{filtered ? "Show all runs" : "To the first page"}</Button>
      </Empty>
    );
  }
  return (
    <Empty
      title="No run of this scenario is kept yet"
      text="The bench runs with every edit; “Keep this run” there puts a run of a saved revision in this list."
    >
      <LinkButton kind="go" to={bench}>
        To the bench
      </LinkButton>
    </Empty>
  );
}

interface ChoiceProps {
  name: string;
  value: string;
  options: readonly { value: string; word: string }[];
  onChoose: (value: string) => void;
}

const Choice = ({ name, value, options, onChoose }: ChoiceProps) => (
  <Menu
    align="start"
    trigger={
      <button type="button" className="flt">
        {name} <b>{options.find((option) => option.value === value)?.word ?? value}</b>
        <Icon name="down" size={12} />
      </button>
    }
  >
    <MenuChoices options={options} value={value} onChoose={onChoose} />
  </Menu>
);
