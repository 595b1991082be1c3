import { Link, useParams, useSearchParams } from "react-router-dom";
import type { RevisionSummary } from "#shared/api/revisions.ts";
import { useRevisionList } from "#src/api/revisions/list-revisions.ts";
import { useScenario } from "#src/api/scenarios/get-scenario.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { LinkButton } from "#src/components/ui/button.tsx";
import { VerdictCell } from "#src/components/ui/mark.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { Pager } from "#src/components/ui/table.tsx";
import { Way } from "#src/components/ui/way.tsx";
import { instantText, whenText } from "#src/lib/format.ts";
import "./scenario.css";

const PAGE_SIZE = 25;

/** Every revision of a scenario, newest first; each can be opened and gone on from. */
export function RevisionsPage() {
  const { scenarioId = "" } = useParams();
  const team = useTeam();
  const [search, setSearch] = useSearchParams();
  const page = Math.max(1, Number(search.get("page")) || 1);
  const scenario = useScenario(team.id, scenarioId);
  const list = useRevisionList(team.id, scenarioId, { page, pageSize: PAGE_SIZE });
  const failed = scenario.error ?? list.error;
  if (!scenario.data || !list.data) {
    return failed ? (
      <QueryError
        error={failed}
        what="The revisions"
        onRetry={() => {
          void scenario.refetch();
          void list.refetch();
        }}
      >
        <LinkButton to={paths.scenarios(team.id)}>To the scenarios</LinkButton>
      </QueryError>
    ) : (
      <Loading what="The revisions open" />
    );
  }
  const { name, latest } = scenario.data;
  const here = paths.scenario(team.id, scenarioId);
  const address = (number: number) => (number === latest.number ? here : `${here}?revision=${number}`);
  return (
    <>
      <DocumentTitle>{`${name}, revisions`}</DocumentTitle>
      <div className="title">
        <div>
          <p className="trail">
            <Link to={paths.scenarios(team.id)}>Scenarios</Link> / <Link to={here}>{name}</Link>
          </p>
          <h1>Revisions</h1>
        </div>
      </div>
      <Way
        label={name}
        points={[
          { to: here, word: "Bench", end: true },
          { to: paths.scenarioFloor(team.id, scenarioId), word: "Floor" },
          { to: paths.scenarioRuns(team.id, scenarioId), word: "Runs" },
          { to: paths.scenarioRevisions(team.id, scenarioId), word: "Revisions", count: list.data.total },
        ]}
      />
      <div className="scroll-x">
        <table className="t">
          <thead>
            <tr>
              <th scope="col" className="r">
                No.
              </th>
              <th scope="col">Note</th>
              <th scope="col">Verdict of its latest run</th>
              <th scope="col">Saved by</th>
              <th scope="col">When</th>
            </tr>
          </thead>
          <tbody>
            {list.data.items.map((revision) => (
              <Row
                key={revision.number}
                revision={revision}
                to={address(revision.number)}
                newest={revision.number === latest.number}
                renamed={revision.name !== name}
              />
            ))}
          </tbody>
        </table>
      </div>
      <Pager page={page} pageSize={PAGE_SIZE} total={list.data.total} onPage={(next) => setSearch(next === 1 ? {} : { page: String(next) })} />
    </>
  );
}

function Row({ revision, to, newest, renamed }: { revision: RevisionSummary; to: string; newest: boolean; renamed: boolean }) {
  return (
    <tr>
      <td className="r">
        <Link to={to} aria-label={`Open revision ${revision.number}`}>
          {revision.number}
        </Link>
      </td>
      <th scope="row">
        {revision.note || <span className="muted">no note</span>}
        {newest && <span className="second"> · newest</span>}
        {renamed && <span className="pl">named “{revision.name}” then</span>}
      </th>
      <td>
        <VerdictCell verdict={revision.verdict} />
      </td>
      <td>{revision.author.name}</td>
      <td title={instantText(revision.savedAt)}>{whenText(revision.savedAt)}</td>
    </tr>
  );
}
