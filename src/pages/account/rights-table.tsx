import { ACTIONS, type Action, actionText, may, ROLES, type Role } from "#shared/api/permissions.ts";
import { Icon } from "#src/components/ui/icon.tsx";
import { Scroller } from "#src/components/ui/table.tsx";

type Answer = "yes" | "no" | "own exercise attempts" | "not their own";

/** The matrix is asked, not repeated: a right without a condition, or with which one, or none. */
function answer(role: Role, action: Action): Answer {
  if (may([role], action)) return "yes";
  if (may([role], action, { ownAttempt: true })) return "own exercise attempts";
  if (may([role], action, { ownRevision: false })) return "not their own";
  return "no";
}

/** What is possible in this version; the rights to the rest are shown with the pages that need them. */
const SHOWN: readonly Action[] = ["open-scenarios", "edit-scenarios", "make-runs", "read-members", "read-activity"];

export function RightsTable({ own }: { own: readonly Role[] }) {
  return (
    <section aria-labelledby="rights">
      <h2 className="h2" id="rights">
        What each role may do
      </h2>
      <Scroller label="Table of the rights">
        <table className="t">
          <thead>
            <tr>
              <th scope="col">May</th>
              {ROLES.map((role) => (
                <th key={role} scope="col">
                  {role}
                  {own.includes(role) && <span className="u"> (you)</span>}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {ACTIONS.filter((action) => SHOWN.includes(action)).map((action) => (
              <tr key={action}>
                <th scope="row" className="font-normal">
                  {actionText(action)}
                </th>
                {ROLES.map((role) => {
                  const right = answer(role, action);
                  return (
                    <td key={role} className={right === "no" ? "muted" : undefined}>
                      {right === "yes" && <Icon name="check" size={14} className="kelp mr-1" />}
                      {right}
                    </td>
                  );
                })}
              </tr>
            ))}
          </tbody>
        </table>
      </Scroller>
      <p className="note muted mt-2">A person can have several roles in a team; their rights add up. Nothing of a team is visible outside it.</p>
    </section>
  );
}
