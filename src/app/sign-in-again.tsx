import { type FormEvent, useState, useSyncExternalStore } from "react";
import { useSignIn } from "#src/api/session/sign-in.ts";
import { sessionExpiry } from "#src/api/session-expiry.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { Entry } from "#src/components/ui/field.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { useSession } from "./session.tsx";

/** Over the page, when the session ended in the meantime: what is being edited below stays, and the request that met it goes on. */
export function SignInAgain() {
  const asking = useSyncExternalStore(sessionExpiry.subscribe, () => sessionExpiry.isAsking);
  return asking ? <SignInAgainDialog /> : null;
}

function SignInAgainDialog() {
  const { user } = useSession();
  const [password, setPassword] = useState("");
  const signIn = useSignIn();
  const submit = (event: FormEvent) => {
    event.preventDefault();
    if (password === "" || signIn.isPending) return;
    signIn.mutate({ email: user.email, password }, { onSuccess: () => sessionExpiry.answer(true) });
  };
  return (
    <Dialog
      open
      above
      onOpenChange={() => sessionExpiry.answer(false)}
      title="Sign in again"
      text="Your session has ended. Nothing on this page is lost, and what you were doing goes on when you have signed in."
      cancel="Not now"
      actions={
        <Button kind="go" type="submit" form="sign-in-again" busy={signIn.isPending}>
          Sign in
        </Button>
      }
    >
      <form id="sign-in-again" onSubmit={submit} className="mt-4 grid gap-3">
        <Entry label="Mail address">
          {(control) => <input {...control} className="box" type="email" autoComplete="username" value={user.email} readOnly />}
        </Entry>
        <Entry label="Password" problem={signIn.isError ? { title: failureText(signIn.error) } : null}>
          {(control) => (
            <input
              {...control}
              className="box"
              type="password"
              autoComplete="current-password"
              autoFocus
              value={password}
              onChange={(event) => setPassword(event.target.value)}
            />
          )}
        </Entry>
      </form>
    </Dialog>
  );
}
