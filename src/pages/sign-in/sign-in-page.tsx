import { Navigate, useSearchParams } from "react-router-dom";
import { useSessionQuery } from "#src/api/session/get-session.ts";
import { useSignIn } from "#src/api/session/sign-in.ts";
import { BareTop } from "#src/app/bare-top.tsx";
import { Cautions } from "#src/app/cautions.tsx";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { DemoSignIns } from "./demo-sign-ins.tsx";
import { SignInForm } from "./sign-in-form.tsx";

/** Only an address of this page itself; anything else would send people elsewhere after signing in. */
const wayOn = (from: string | null): string => (from && /^\/(?![/\\])/.test(from) ? from : paths.home());

export function SignInPage() {
  const [search] = useSearchParams();
  const session = useSessionQuery();
  const signIn = useSignIn();
  if (session.data?.user) return <Navigate to={wayOn(search.get("from"))} replace />;
  return (
    <div className="shell">
      <DocumentTitle>Sign in</DocumentTitle>
      <BareTop />
      <main className="page">
        <div className="mx-auto max-w-[980px]">
          <div className="title">
            <div>
              <h1>Sign in</h1>
              <p className="sub">Wireless loops, checked before they move.</p>
            </div>
          </div>
          <div className="grid gap-x-16 gap-y-8 border-t-rule border-t-ink pt-5 min-[860px]:grid-cols-[340px_minmax(0,1fr)]">
            <SignInForm signIn={signIn} />
            <DemoSignIns signIn={signIn} />
          </div>
        </div>
      </main>
      <footer className="foot">
        <Cautions />
      </footer>
    </div>
  );
}
