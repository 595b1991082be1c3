import { useMembers } from "#src/api/teams/list-members.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { useSession, useTeam } from "#src/app/session.tsx";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { counted, listed } from "#src/lib/format.ts";
import { ActivityRecord } from "./activity-record.tsx";
import { RightsTable } from "./rights-table.tsx";

export function MembersPage() {
  const team = useTeam();
  const { user } = useSession();
  const query = useMembers(team.id);
  const members = query.data?.members;
  return (
    <>
      <DocumentTitle>Team</DocumentTitle>
      <div className="title">
        <h1>
          {team.name}
          {members && <span className="rev">{counted(members.length, "member")}</span>}
        </h1>
      </div>
      <div className="grid grid-cols-[minmax(0,1fr)] items-start gap-x-12 gap-y-8 border-t-rule border-t-ink pt-4 min-[1000px]:grid-cols-[minmax(0,2fr)_minmax(0,3fr)]">
        <section aria-labelledby="members">
          <h2 className="h2" id="members">
            Members
          </h2>
          {members ? (
            <table className="t">
              <thead>
                <tr>
                  <th scope="col">Name</th>
                  <th scope="col">Roles</th>
                </tr>
              </thead>
              <tbody>
                {members.map(({ id, name, roles }) => (
                  <tr key={id}>
                    <td className="strong">
                      {name}
                      {id === user.id && <span className="u"> (you)</span>}
                    </td>
                    <td>{listed(roles)}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          ) : query.isError ? (
            <QueryError error={query.error} what="The members" onRetry={() => void query.refetch()} />
          ) : (
            <Loading what="Loading the members" />
          )}
        </section>
        <RightsTable own={team.roles} />
      </div>
      {team.may("read-activity") && (
        <div className="mt-8 border-t-rule border-t-ink pt-4">
          <ActivityRecord teamId={team.id} />
        </div>
      )}
    </>
  );
}
