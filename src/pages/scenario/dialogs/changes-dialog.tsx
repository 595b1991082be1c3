import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import type { Change } from "../model/changes.ts";
import { ChangeTable } from "./change-table.tsx";

interface ChangesDialogProps {
  title: string;
  changes: readonly Change[];
  /** Fields whose text is no value yet. */
  unfinished?: number;
  onDiscard?: () => void;
  onClose: () => void;
}

export function ChangesDialog({ title, changes, unfinished = 0, onDiscard, onClose }: ChangesDialogProps) {
  return (
    <Dialog
      open
      onOpenChange={onClose}
      title={title}
      cancel="Close"
      actions={
        onDiscard && (
          <Button kind="back" onClick={onDiscard}>
            Discard all of them
          </Button>
        )
      }
    >
      {changes.length > 0 ? <ChangeTable changes={changes} label={title} /> : <p className="second mt-2">No setting differs.</p>}
      {unfinished > 0 && (
        <p className="note second mt-2">
          {unfinished === 1 ? "One field holds a text that is no value yet." : `${unfinished} fields hold a text that is no value yet.`}
        </p>
      )}
    </Dialog>
  );
}
