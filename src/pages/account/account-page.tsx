import { Link } from "react-router-dom";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useSession } from "#src/app/session.tsx";
import { setTheme, THEMES, useTheme } from "#src/app/theme.ts";
import { useLeave } from "#src/app/use-leave.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Choice } from "#src/components/ui/choice.tsx";
import { listed } from "#src/lib/format.ts";

export function AccountPage() {
  const { user, memberships } = useSession();
  const theme = useTheme();
  const leave = useLeave();
  return (
    <>
      <DocumentTitle>Account</DocumentTitle>
      <div className="title">
        <div>
          <h1>{user.name}</h1>
          <p className="sub">{user.email}</p>
        </div>
        <div className="acts">
          <Button onClick={leave}>Sign out</Button>
        </div>
      </div>
      <div className="border-t-rule border-t-ink pt-4">
        <div className="max-w-[640px]">
          <h2 className="h2">Teams</h2>
          <div className="scroll-x">
            <table className="t">
              <thead>
                <tr>
                  <th scope="col">Team</th>
                  <th scope="col">Your roles</th>
                </tr>
              </thead>
              <tbody>
                {memberships.map(({ team, roles }) => (
                  <tr key={team.id}>
                    <td>
                      <Link to={paths.scenarios(team.id)}>{team.name}</Link>
                    </td>
                    <td>
                      {listed(roles)} <Link to={paths.members(team.id)}>what that allows</Link>
                    </td>
                  </tr>
                ))}
                {memberships.length === 0 && (
                  <tr>
                    <td colSpan={2} className="second">
                      You are in no team yet. An administrator of a team has to add you.
                    </td>
                  </tr>
                )}
              </tbody>
            </table>
          </div>
          <h2 className="h2 mt-8 mb-2">Light and dark</h2>
          <Choice
            label="Light and dark"
            options={THEMES.map((value) => ({ value, word: value === "system" ? "as the system" : value }))}
            value={theme}
            onChoose={setTheme}
          />
          <p className="note muted mt-2">Kept in this browser. Print is always light.</p>
        </div>
      </div>
    </>
  );
}
