import { type FormEvent, type KeyboardEvent, useRef, useState } from "react";
import type { useSignIn } from "#src/api/session/sign-in.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Entry } from "#src/components/ui/field.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";

export function SignInForm({ signIn }: { signIn: ReturnType<typeof useSignIn> }) {
  const [email, setEmail] = useState("");
  const [password, setPassword] = useState("");
  const [shown, setShown] = useState(false);
  const [capsLock, setCapsLock] = useState(false);
  const [missing, setMissing] = useState<"email" | "password" | null>(null);
  const emailBox = useRef<HTMLInputElement>(null);
  const passwordBox = useRef<HTMLInputElement>(null);

  const submit = (event: FormEvent) => {
    event.preventDefault();
    if (signIn.isPending) return;
    const first = email.trim() === "" ? "email" : password === "" ? "password" : null;
    setMissing(first);
    if (first) {
      (first === "email" ? emailBox : passwordBox).current?.focus();
      return;
    }
    signIn.mutate({ email: email.trim(), password }, { onError: () => passwordBox.current?.select() });
  };
  const watchCapsLock = (event: KeyboardEvent) => setCapsLock(event.getModifierState("CapsLock"));

  const wrong = signIn.isError && signIn.variables.email === email.trim() ? { title: failureText(signIn.error) } : null;
  return (
    <form noValidate onSubmit={submit} className="grid content-start gap-4" aria-label="Sign in">
      <Entry label="Mail address" problem={missing === "email" ? { title: "Enter the mail address of your account." } : null}>
        {(control) => (
          <input
            {...control}
            ref={emailBox}
            className="box"
            type="email"
            name="email"
            autoComplete="username"
            // biome-ignore lint/a11y/noAutofocus: the one thing that this page asks for
            autoFocus
            value={email}
            onChange={(event) => {
              setEmail(event.target.value);
              setMissing(null);
            }}
          />
        )}
      </Entry>
      <Entry
        label="Password"
        problem={missing === "password" ? { title: "Enter your password." } : wrong}
        hint={capsLock ? "Caps lock is on." : undefined}
      >
        {(control) => (
          <span className="relative block">
            <input
              {...control}
              ref={passwordBox}
              className="box pr-16"
              type={shown ? "text" : "password"}
              name="password"
              autoComplete="current-password"
              spellCheck={false}
              autoCapitalize="none"
              value={password}
              onKeyDown={watchCapsLock}
              onKeyUp={watchCapsLock}
              onChange={(event) => {
                setPassword(event.target.value);
                setMissing(null);
              }}
            />
            <button
              type="button"
              className="absolute inset-y-0 right-0 px-3 text-small text-ink-2 underline underline-offset-[3px] hover:text-ink"
              aria-label={shown ? "Hide the password" : "Show the password"}
              onClick={() => setShown(!shown)}
            >
              {shown ? "hide" : "show"}
            </button>
          </span>
        )}
      </Entry>
      <div>
        <Button kind="go" type="submit" busy={signIn.isPending}>
          Sign in
        </Button>
      </div>
    </form>
  );
}
