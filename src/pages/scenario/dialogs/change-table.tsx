import { Icon } from "#src/components/ui/icon.tsx";
import type { Change } from "../model/changes.ts";

/** Setting, what it was, what it becomes. */
export function ChangeTable({ changes, label }: { changes: readonly Change[]; label: string }) {
  return (
    <div className="chg-scroll">
      <table className="t chg" aria-label={label}>
        <tbody>
          {changes.map((change) => (
            <tr key={change.path}>
              <th scope="row">{change.label}</th>
              <td className="r">{change.before}</td>
              <td className="chg-to">
                <Icon name="arrow" size={14} />
                <span className="vh">becomes</span>
              </td>
              <td className="r strong">{change.after}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
