import { useState } from "react";
import { Link, useNavigate } from "react-router-dom";
import type { LogDetail } from "#shared/api/logs.ts";
import { apiPaths } from "#shared/api/paths.ts";
import { counted } from "#shared/reception/words.ts";
import { paths } from "#src/app/paths.ts";
import { useTeam } from "#src/app/session.tsx";
import { Button, IconButton } from "#src/components/ui/button.tsx";
import { Menu, MenuItem, MenuRule } from "#src/components/ui/menu.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { instantText, whenText } from "#src/lib/format.ts";
import { useNow } from "#src/lib/use-now.ts";
import { UseInScenarioDialog } from "../use/use-in-scenario-dialog.tsx";
import { DeleteLogDialog, RenameLogDialog } from "./log-dialogs.tsx";

type Open = "use" | "rename" | "delete" | null;

export function LogHead({ log, link }: { log: LogDetail; link: number }) {
  const team = useTeam();
  const now = useNow();
  const navigate = useNavigate();
  const toast = useToast();
  const [open, setOpen] = useState<Open>(null);
  const shut = () => setOpen(null);
  return (
    <div className="title">
      <div>
        <p className="trail">
          <Link to={paths.logs(team.id)}>Reception logs</Link> /
        </p>
        <h1>{log.name}</h1>
        <p className="sub">
          {counted(log.links, "link")} · uploaded by {log.author.name},{" "}
          <span title={instantText(log.uploadedAt)}>{whenText(log.uploadedAt, now)}</span> · <UsedBy log={log} />
        </p>
      </div>
      <div className="acts">
        <Button
          kind="go"
          impossible={team.may("edit-scenarios") ? null : "Changing a scenario is for engineers, reviewers and administrators."}
          onClick={() => setOpen("use")}
        >
          Use in a scenario
        </Button>
        <Menu trigger={<IconButton icon="more" label={`More for ${log.name}`} title="More" />}>
          <MenuItem asChild>
            <a href={apiPaths.logOriginal(team.id, log.id)} download>
              Download the original file
            </a>
          </MenuItem>
          {log.mayEdit && (
            <>
              <MenuRule />
              <MenuItem onSelect={() => setOpen("rename")}>Rename …</MenuItem>
              <MenuItem danger onSelect={() => setOpen("delete")}>
                Delete …
              </MenuItem>
            </>
          )}
        </Menu>
      </div>
      {open === "use" && <UseInScenarioDialog log={log} link={link} onClose={shut} />}
      {open === "rename" && <RenameLogDialog log={log} onClose={shut} />}
      {open === "delete" && (
        <DeleteLogDialog
          log={log}
          onClose={shut}
          onDeleted={() => {
            toast({ text: `“${log.name}” is deleted.` });
            navigate(paths.logs(team.id));
          }}
        />
      )}
    </div>
  );
}

function UsedBy({ log }: { log: LogDetail }) {
  const team = useTeam();
  const [first] = log.usedBy;
  if (!first) return <>not used by a saved scenario</>;
  return (
    <>
      used in <Link to={paths.scenario(team.id, first.id)}>{first.name}</Link>
      {log.usedBy.length > 1 && ` and ${counted(log.usedBy.length - 1, "scenario")} more`}
    </>
  );
}
