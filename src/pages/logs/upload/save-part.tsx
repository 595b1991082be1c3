import { useState } from "react";
import type { LogDetail } from "#shared/api/logs.ts";
import { Button, LinkButton } from "#src/components/ui/button.tsx";
import { ProblemNote, TextField } from "#src/components/ui/field.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { nameOfFile } from "../model/log-words.ts";
import { ProgressBar } from "./progress.tsx";
import type { Saving } from "./use-save.ts";

interface SavePartProps {
  fileName: string;
  saving: Saving;
  /** Why it cannot be saved now. */
  impossible: string | null;
  onSave: (name: string) => void;
  onCancel: () => void;
  logPath: (log: LogDetail) => string;
}

const NAME_MAX = 120;

export function SavePart({ fileName, saving, impossible, onSave, onCancel, logPath }: SavePartProps) {
  const [name, setName] = useState(() => nameOfFile(fileName));
  const [asked, setAsked] = useState(false);
  const trimmed = name.trim();
  const wrong = trimmed === "" ? "A log needs a name." : trimmed.length > NAME_MAX ? `This name has ${trimmed.length} characters.` : null;
  const busy = saving.state === "packing" || saving.state === "sending" || saving.state === "server";
  return (
    <section aria-labelledby="lg-save">
      <div className="hrow">
        <h2 id="lg-save">Name and save</h2>
        <span className="rt">kept with the team, with the file as it is</span>
      </div>
      <form
        className="lg-save"
        onSubmit={(event) => {
          event.preventDefault();
          setAsked(true);
          if (!wrong && !impossible && !busy) onSave(trimmed);
        }}
      >
        <div>
          <TextField
            label="Name"
            value={name}
            onText={setName}
            readOnly={busy}
            problem={asked && wrong ? { title: wrong, text: `Permitted: 1 to ${NAME_MAX} characters.` } : null}
          />
        </div>
        <Button type="submit" kind="go" impossible={impossible} busy={busy}>
          Save the log
        </Button>
      </form>
      {busy && (
        <div className="lg-progress">
          {saving.state === "server" ? (
            <label>
              <span>The server reads the file</span>
              <progress />
            </label>
          ) : (
            <ProgressBar what={saving.state === "packing" ? "Packing" : "Sending, packed"} progress={saving.progress} />
          )}
          <Button small onClick={onCancel}>
            Stop
          </Button>
        </div>
      )}
      {saving.state === "failed" && (
        <ProblemNote problem={{ title: "The log was not saved.", text: `${saving.message} The file, its columns and the name are still here.` }} />
      )}
      {saving.state === "saved" && saving.differences.length > 0 && (
        <Tell>
          <span>
            The log is saved, but the server read the file otherwise than this page: {saving.differences.join("; ")}. What the server read is what
            counts; load this page again, it may be older than the server.
          </span>
          <LinkButton to={logPath(saving.log)}>Open the log</LinkButton>
        </Tell>
      )}
    </section>
  );
}
