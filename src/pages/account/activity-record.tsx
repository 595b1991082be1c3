import { useSearchParams } from "react-router-dom";
import type { z } from "zod";
import type { ActivityKind, activityListResponse } from "#shared/api/teams.ts";
import { useActivity } from "#src/api/teams/list-activity.ts";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { Pager, Scroller } from "#src/components/ui/table.tsx";
import { instantText } from "#src/lib/format.ts";

const PAGE_SIZE = 10;

const DID: Record<ActivityKind, string> = {
  "signed-in": "signed in",
  "scenario-created": "made",
  "scenario-duplicated": "duplicated into",
  "scenario-archived": "archived",
  "scenario-restored": "restored",
  "scenario-deleted": "deleted",
  "revision-saved": "saved",
  "run-kept": "kept a run of",
  "log-uploaded": "uploaded the reception log",
  "log-renamed": "renamed to",
  "log-deleted": "deleted the reception log",
  "log-deletion-refused": "wanted to delete the reception log in use",
  "picture-uploaded": "uploaded the picture",
  "picture-deleted": "deleted the picture",
  "picture-deletion-refused": "wanted to delete the picture in use",
};

/** "saved revision 4 of Balancer rig 1" */
function What({ item }: { item: z.infer<typeof activityListResponse>["items"][number] }) {
  const { what, subject, revision } = item;
  return (
    <>
      {DID[what]} {revision !== null && (what === "revision-saved" || what === "run-kept") && `revision ${revision} of `}
      {subject && <b className="strong">{subject.name}</b>}
    </>
  );
}

const pageOf = (text: string | null): number => Math.max(1, Math.floor(Number(text)) || 1);

/** Who did what and when, newest first; names as they were then. */
export function ActivityRecord({ teamId }: { teamId: string }) {
  const [search, setSearch] = useSearchParams();
  const page = pageOf(search.get("page"));
  const query = useActivity(teamId, page, PAGE_SIZE);
  const list = query.data;
  return (
    <section aria-labelledby="activity">
      <h2 className="h2" id="activity">
        Activity record
      </h2>
      {list ? (
        <>
          <Scroller label="Table of the activity" busy={query.isPlaceholderData}>
            <table className="t">
              <thead>
                <tr>
                  <th scope="col">When</th>
                  <th scope="col">Who</th>
                  <th scope="col">What</th>
                </tr>
              </thead>
              <tbody>
                {list.items.map((item) => (
                  <tr key={item.id}>
                    <td className="nw">{instantText(item.at)}</td>
                    <td className="nw">{item.who.name}</td>
                    <td>
                      <What item={item} />
                    </td>
                  </tr>
                ))}
                {list.items.length === 0 && (
                  <tr>
                    <td colSpan={3} className="second">
                      {list.total > 0 ? "The record does not go back as far as this page." : "Nothing was done yet."}
                    </td>
                  </tr>
                )}
              </tbody>
            </table>
          </Scroller>
          <Pager
            page={list.page}
            pageSize={list.pageSize}
            total={list.total}
            onPage={(next) => setSearch(next === 1 ? {} : { page: String(next) }, { preventScrollReset: true })}
          />
        </>
      ) : query.isError ? (
        <QueryError error={query.error} what="The activity record" onRetry={() => void query.refetch()} />
      ) : (
        <Loading what="Loading the activity record" />
      )}
    </section>
  );
}
