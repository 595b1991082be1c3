import { useDemo } from "#src/api/session/get-demo.ts";
import type { useSignIn } from "#src/api/session/sign-in.ts";
import { Button } from "#src/components/ui/button.tsx";
import { listed } from "#src/lib/format.ts";

/** The people of the demo team, one press each. Nothing where the server keeps no demo team. */
export function DemoSignIns({ signIn }: { signIn: ReturnType<typeof useSignIn> }) {
  const { data } = useDemo();
  const password = data?.password;
  if (!password) return null;
  const teams = [...new Set(data.people.flatMap(({ memberships }) => memberships.map(({ team }) => team)))];
  return (
    <section aria-labelledby="demo">
      <h2 className="h2" id="demo">
        {teams.length > 1 ? "Demo teams" : "Demo team"}
      </h2>
      <p className="second prose">
        {listed(teams)} {teams.length > 1 ? "are" : "is"} invented, with machines to try. Everybody’s password is{" "}
        <b className="strong text-ink">{password}</b>.
      </p>
      <ul className="mt-3 border-t-rule border-t-ink">
        {data.people.map(({ name, email, memberships }) => (
          <li key={email} className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-line py-2">
            <span className="min-w-0 flex-1 basis-52">
              <b className="strong">{name}</b>
              <span className="pl">
                {memberships.map(({ team, roles }) => (teams.length > 1 ? `${listed(roles)} in ${team}` : listed(roles))).join("; ")}
              </span>
            </span>
            <span className="basis-56 text-small text-ink-2">{email}</span>
            <Button
              small
              className="ml-auto"
              busy={signIn.isPending && signIn.variables.email === email}
              aria-label={`Sign in as ${name}`}
              onClick={() => signIn.mutate({ email, password })}
            >
              Sign in
            </Button>
          </li>
        ))}
      </ul>
    </section>
  );
}
