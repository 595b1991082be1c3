import { useEffect, useMemo } from "react";
import { Navigate, Outlet, useParams } from "react-router-dom";
import { LinkButton } from "#src/components/ui/button.tsx";
import { Empty, ErrorView } from "#src/components/ui/states.tsx";
import { paths } from "./paths.ts";
import { homeTeam, rememberTeam, TeamContext, teamOf, useSession } from "./session.tsx";

/** Everything below belongs to the team of the address. */
export function TeamScope() {
  const { teamId } = useParams();
  const { memberships } = useSession();
  const membership = memberships.find(({ team }) => team.id === teamId);
  const team = useMemo(() => (membership ? teamOf(membership) : null), [membership]);
  useEffect(() => {
    if (team) rememberTeam(team.id);
  }, [team]);
  if (!team) {
    return (
      <ErrorView title="Nothing is at this address" text="It was deleted, or it belongs to a team that you are not in." heading="h1">
        <LinkButton kind="go" to={paths.home()}>
          To your scenarios
        </LinkButton>
      </ErrorView>
    );
  }
  return (
    <TeamContext key={team.id} value={team}>
      <Outlet />
    </TeamContext>
  );
}

/** "/": the scenarios of the team that was looked at last. */
export function Home() {
  const { memberships } = useSession();
  const team = homeTeam(memberships);
  if (team) return <Navigate to={paths.scenarios(team.id)} replace />;
  return <Empty title="You are in no team yet" text="An administrator of a team has to add you. Then its scenarios are here." />;
}
