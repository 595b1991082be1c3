import { useState } from "react";
import { Link } from "react-router-dom";
import type { Use } from "#shared/api/common.ts";
import type { LogDetail } from "#shared/api/logs.ts";
import { counted } from "#shared/reception/words.ts";
import { isApiError } from "#src/api/client.ts";
import { useChangeLog } from "#src/api/logs/change-log.ts";
import { useDeleteLog } from "#src/api/logs/delete-log.ts";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { Entry, ProblemNote } from "#src/components/ui/field.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { listed } from "#src/lib/format.ts";

const NAME_MAX = 120;

export function RenameLogDialog({ log, onClose }: { log: LogDetail; onClose: () => void }) {
  const team = useTeam();
  const renaming = useChangeLog(team.id);
  const [name, setName] = useState(log.name);
  const trimmed = name.trim();
  const impossible =
    trimmed === "" ? "A log needs a name." : trimmed.length > NAME_MAX ? `At most ${NAME_MAX} characters; this has ${trimmed.length}.` : null;
  const rename = () => {
    if (!impossible) renaming.mutate({ id: log.id, name: trimmed }, { onSuccess: onClose });
  };
  return (
    <Dialog
      open
      onOpenChange={onClose}
      title={`Rename “${log.name}”`}
      text="Revisions that use it keep the name that it had when they were saved."
      actions={
        <Button kind="go" impossible={impossible} busy={renaming.isPending} onClick={rename}>
          Rename
        </Button>
      }
    >
      <form
        className="mt-4"
        onSubmit={(event) => {
          event.preventDefault();
          rename();
        }}
      >
        <Entry label="Name" problem={impossible && trimmed !== "" ? { title: impossible } : null}>
          {(control) => <input {...control} className="box" autoComplete="off" value={name} onChange={(event) => setName(event.target.value)} />}
        </Entry>
      </form>
      {renaming.isError && (
        <div className="mt-3">
          <ProblemNote problem={{ title: "It was not renamed.", text: failureText(renaming.error) }} />
        </div>
      )}
    </Dialog>
  );
}

const revisionsText = ({ revisions, archived }: Use): string =>
  `${revisions.length === 1 ? "revision" : "revisions"} ${listed(revisions.map(String))}${archived ? ", archived" : ""}`;

/** What keeps a log: scenarios whose revisions name it. */
function Uses({ uses }: { uses: readonly Use[] }) {
  const team = useTeam();
  return (
    <ul className="issues mt-3">
      {uses.map((use) => (
        <li key={use.id}>
          <Link to={paths.scenario(team.id, use.id)}>{use.name}</Link> <span className="second">{revisionsText(use)}</span>
        </li>
      ))}
    </ul>
  );
}

export function DeleteLogDialog({ log, onClose, onDeleted }: { log: LogDetail; onClose: () => void; onDeleted: () => void }) {
  const team = useTeam();
  const deleting = useDeleteLog(team.id);
  const refused = isApiError(deleting.error, "in-use") ? deleting.error.details.uses : undefined;
  const uses = refused ?? log.usedBy;
  if (uses.length > 0) {
    return (
      <Dialog
        open
        onOpenChange={onClose}
        cancel="Close"
        title={`“${log.name}” is in use`}
        text={`${counted(uses.length, "scenario")} ${uses.length === 1 ? "has" : "have"} revisions that name this log as the source of their losses. A revision never changes, so the log stays as long as they do.`}
      >
        <Uses uses={uses} />
      </Dialog>
    );
  }
  return (
    <Dialog
      open
      onOpenChange={onClose}
      title={`Delete “${log.name}”?`}
      text="The file and its reading go for everybody in the team. This cannot be taken back; download the original first if it is kept nowhere else."
      cancel="Keep it"
      actions={
        <Button kind="back" busy={deleting.isPending} onClick={() => deleting.mutate(log.id, { onSuccess: onDeleted })}>
          Delete for good
        </Button>
      }
    >
      {deleting.isError && (
        <div className="mt-3">
          <ProblemNote problem={{ title: "It was not deleted.", text: failureText(deleting.error) }} />
        </div>
      )}
    </Dialog>
  );
}
