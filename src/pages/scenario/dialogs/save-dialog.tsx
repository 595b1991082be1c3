import { type KeyboardEvent, useState } from "react";
import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { Entry } from "#src/components/ui/field.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import type { Change } from "../model/changes.ts";
import { ChangeTable } from "./change-table.tsx";

const LONGEST_NOTE = 500;

interface SaveDialogProps {
  /** Of the revision that it becomes. */
  number: number;
  base: number;
  changes: readonly Change[];
  busy: boolean;
  error: unknown;
  onSave: (note: string) => void;
  onClose: () => void;
}

export function SaveDialog({ number, base, changes, busy, error, onSave, onClose }: SaveDialogProps) {
  const [note, setNote] = useState("");
  const save = () => {
    if (!busy && note.length <= LONGEST_NOTE) onSave(note.trim());
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if ((event.ctrlKey || event.metaKey) && (event.key === "Enter" || event.key.toLowerCase() === "s")) {
      event.preventDefault();
      event.stopPropagation();
      save();
    }
  };
  const over = note.length > LONGEST_NOTE;
  return (
    <Dialog
      open
      // What is being saved takes the draft's place afterwards: nothing may be edited meanwhile.
      onOpenChange={() => !busy && onClose()}
      title={`Save revision ${number}`}
      text="A revision never changes afterwards. Runs and reviews refer to it by number."
      actions={
        <Button kind="go" busy={busy} impossible={over ? "The note is too long." : null} onClick={save}>
          {busy ? "Saving" : `Save revision ${number}`}
        </Button>
      }
    >
      {/* biome-ignore lint/a11y/noStaticElementInteractions: hears the keys of the note inside */}
      <div onKeyDown={onKeyDown}>
        <h3>What changed since revision {base}</h3>
        <ChangeTable changes={changes} label={`What changed since revision ${base}`} />
        <div className="mt-3">
          <Entry
            label="Note for the others"
            problem={over ? { title: `The note has ${note.length} characters: at most ${LONGEST_NOTE} are kept.` } : null}
          >
            {(control) => <textarea {...control} className="area" autoFocus value={note} onChange={(event) => setNote(event.target.value)} />}
          </Entry>
        </div>
        {error !== null && error !== undefined && <Tell>{failureText(error)}</Tell>}
      </div>
    </Dialog>
  );
}
