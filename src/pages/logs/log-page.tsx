import { useParams, useSearchParams } from "react-router-dom";
import { linkName } from "#shared/reception/types.ts";
import { useLog } from "#src/api/logs/get-log.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { LinkButton } from "#src/components/ui/button.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { LinkList } from "./log/link-list.tsx";
import { LinkSheet } from "./log/link-sheet.tsx";
import { LogHead } from "./log/log-head.tsx";
import { LogRecord } from "./log/log-record.tsx";
import { ReportTable } from "./upload/report-table.tsx";
import "../scenarios/scenarios.css";
import "./logs.css";

export function LogPage() {
  const { logId = "" } = useParams();
  const team = useTeam();
  const query = useLog(team.id, logId);
  const [search, setSearch] = useSearchParams();
  if (!query.data) {
    return query.isError ? (
      <>
        <DocumentTitle>Reception log</DocumentTitle>
        <QueryError error={query.error} what="The reception log" onRetry={() => void query.refetch()}>
          <LinkButton to={paths.logs(team.id)}>To the reception logs</LinkButton>
        </QueryError>
      </>
    ) : (
      <Loading what="The reception log opens" />
    );
  }
  const log = query.data;
  const links = log.linkTraces;
  const asked = Number(search.get("link") ?? 1);
  const chosen = Number.isInteger(asked) && asked >= 1 && asked <= links.length ? asked - 1 : 0;
  const link = links[chosen];
  const choose = (index: number) => setSearch(index === 0 ? {} : { link: String(index + 1) }, { replace: true, preventScrollReset: true });
  return (
    <>
      <DocumentTitle>{log.name}</DocumentTitle>
      <LogHead log={log} link={chosen} />
      <div className={`lg-lay ${links.length === 1 ? "single" : ""}`}>
        {links.length > 1 && <LinkList links={links} chosen={chosen} onChoose={choose} />}
        <div className="min-w-0">
          {link && <LinkSheet key={chosen} link={link} name={linkName(link)} />}
          <div className="lg-below">
            <ReportTable report={log.report} name={log.name} />
            <LogRecord log={log} />
          </div>
        </div>
      </div>
    </>
  );
}
