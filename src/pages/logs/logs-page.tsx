import { useEffect, useState } from "react";
import { counted } from "#shared/reception/words.ts";
import { useLogList } from "#src/api/logs/list-logs.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { Button, LinkButton } from "#src/components/ui/button.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Empty, Loading } from "#src/components/ui/states.tsx";
import { Pager } from "#src/components/ui/table.tsx";
import { countedInWords, listed, withArticle } from "#src/lib/format.ts";
import { useMedia } from "#src/lib/use-media.ts";
import { FormatDialog } from "./format-dialog.tsx";
import { useLogListState } from "./list-state.ts";
import { LogCards, LogTable } from "./log-rows.tsx";
import { LogSearch } from "./log-search.tsx";
import { uploaders } from "./uploaders.ts";
import "../scenarios/scenarios.css";
import "./logs.css";

export function LogsPage() {
  const team = useTeam();
  const [query, change] = useLogListState();
  const answer = useLogList(team.id, query);
  const narrow = useMedia("(max-width: 999px)");
  const [format, setFormat] = useState(false);
  const mayUpload = team.may("edit-logs");

  const list = answer.data;
  const waiting = answer.isPlaceholderData;
  const lastPage = list ? Math.max(1, Math.ceil(list.total / list.pageSize)) : null;
  // The last row of the last page was deleted, or the link is old.
  const beyond = !waiting && lastPage !== null && query.page > lastPage;
  useEffect(() => {
    if (beyond) change({ page: lastPage ?? 1 }, true);
  }, [beyond, lastPage, change]);

  const Rows = narrow ? LogCards : LogTable;
  const formatButton = <Button onClick={() => setFormat(true)}>What a log has to hold</Button>;
  return (
    <>
      <DocumentTitle>Reception logs</DocumentTitle>
      <div className="title">
        <h1>Reception logs {list && <span className="rev">{list.totalUnfiltered} of the team</span>}</h1>
        {list && list.totalUnfiltered > 0 && (
          <div className="acts">
            {formatButton}
            {mayUpload && (
              <LinkButton kind="go" icon="import" className="max-md:[&>.ic]:hidden" to={paths.logUpload(team.id)}>
                Upload a log
              </LinkButton>
            )}
          </div>
        )}
      </div>
      {!mayUpload && (
        <p className="mayread">
          You are {listed(team.roles.map(withArticle), "and")} in this team: you may open every log. Uploading one, renaming and deleting is for{" "}
          {uploaders()}.
        </p>
      )}
      {list && list.totalUnfiltered > 0 && (
        <div className="filters border-t-rule border-t-ink pt-3">
          <LogSearch search={query.search} change={change} />
          <span className="rt small" aria-live="polite">
            {query.search ? `${list.total} of ${counted(list.totalUnfiltered, "log")}` : counted(list.total, "log")}
          </span>
        </div>
      )}
      {answer.isError && <QueryError error={answer.error} what="The reception logs" onRetry={() => void answer.refetch()} />}
      {!list && !answer.isError && <Loading what="The reception logs open" />}
      {list && !answer.isError && list.items.length > 0 && (
        <>
          <Rows teamId={team.id} items={list.items} query={query} change={change} waiting={waiting} />
          <Pager page={list.page} pageSize={list.pageSize} total={list.total} onPage={(page) => change({ page })} />
        </>
      )}
      {list && !answer.isError && list.items.length === 0 && list.totalUnfiltered > 0 && (
        <Empty
          title={`No log named like “${query.search}”`}
          text={`${countedInWords(list.totalUnfiltered, "log")} ${list.totalUnfiltered === 1 ? "has" : "have"} other names.`}
        >
          <Button onClick={() => change({ search: "" })}>Clear the search</Button>
        </Empty>
      )}
      {list && !answer.isError && list.totalUnfiltered === 0 && (
        <Empty
          title="No reception log yet"
          text={`A log is a text file that says which packets arrived on a link, recorded on the floor by the nodes themselves. From it follow the share that is lost, whether losses come in bursts, and a scenario that meets exactly what was received.${mayUpload ? "" : ` The first one has to be uploaded by ${uploaders()}.`}`}
        >
          {mayUpload && (
            <LinkButton kind="go" to={paths.logUpload(team.id)}>
              Upload a log
            </LinkButton>
          )}
          {formatButton}
        </Empty>
      )}
      {format && <FormatDialog onShut={() => setFormat(false)} />}
    </>
  );
}
