/** Lets in who is signed in. Keeps the page of somebody whose session ends while it is open. */
import { useEffect, useRef } from "react";
import { Navigate, useLocation } from "react-router-dom";
import { useSessionQuery } from "#src/api/session/get-session.ts";
import { sessionExpiry } from "#src/api/session-expiry.ts";
import { QueryError } from "#src/components/ui/query-error.tsx";
import { Loading } from "#src/components/ui/states.tsx";
import { BareTop } from "./bare-top.tsx";
import { Layout } from "./layout.tsx";
import { paths } from "./paths.ts";
import { type Session, SessionContext } from "./session.tsx";
import { SignInAgain } from "./sign-in-again.tsx";

export function SignedIn() {
  const query = useSessionQuery();
  const location = useLocation();
  const known = useRef<Session | null>(null);
  const { user, memberships } = query.data ?? {};
  if (user && memberships && (known.current?.user !== user || known.current.memberships !== memberships)) known.current = { user, memberships };
  const session = known.current;
  const ended = Boolean(session && query.data && !query.data.user);

  const { refetch } = query;
  useEffect(() => {
    if (ended) void sessionExpiry.askToSignIn().then((signedIn) => (signedIn ? refetch() : undefined));
  }, [ended, refetch]);

  if (session) {
    return (
      // Another person in the same browser (another tab): nothing of the one before may stay on the screen.
      <SessionContext key={session.user.id} value={session}>
        <Layout />
        <SignInAgain />
      </SessionContext>
    );
  }
  if (query.isError || !query.data) {
    return (
      <>
        <BareTop />
        <main className="page">
          {query.isError ? <QueryError error={query.error} what="Holdfast" onRetry={() => void refetch()} /> : <Loading what="Holdfast opens" />}
        </main>
      </>
    );
  }
  return <Navigate to={paths.signIn(location.pathname + location.search)} replace />;
}
