import { useRef, useState } from "react";
import { MAX_SCENARIO_BYTES } from "#shared/api/errors.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { ImportReading } from "../../scenarios/import-reading.tsx";
import { type Reading, readScenario } from "../../scenarios/read-scenario.ts";
import "../../scenarios/scenarios.css";

/** Reads a scenario from a file into this one, as a draft. */
export function ImportDialog({ onRead, onClose }: { onRead: (scenario: Scenario) => void; onClose: () => void }) {
  const input = useRef<HTMLInputElement>(null);
  const [reading, setReading] = useState<Reading | null>(null);
  const [unreadable, setUnreadable] = useState<string | null>(null);
  const read = async (file: File | undefined) => {
    if (!file) return;
    setUnreadable(null);
    // Refused by its size, before a byte of it is read.
    if (file.size > MAX_SCENARIO_BYTES) return setReading({ kind: "too-large", bytes: file.size });
    try {
      setReading(readScenario(await file.text()));
    } catch {
      setReading(null);
      setUnreadable(`“${file.name}” could not be read. It may have been moved, or it is a folder.`);
    }
  };
  const ready = reading?.kind === "ready" ? reading.scenario : null;
  const choose = () => input.current?.click();
  return (
    <Dialog
      open
      broad={reading?.kind === "invalid"}
      onOpenChange={onClose}
      title="Import into this scenario"
      text="The file takes the place of every setting here, as unsaved changes: undo brings back what was, and nothing is saved by it."
      actions={
        ready ? (
          <>
            <Button onClick={choose}>Choose another file</Button>
            <Button kind="go" onClick={() => onRead(ready)}>
              Put it on the bench
            </Button>
          </>
        ) : (
          <Button kind="go" onClick={choose}>
            {reading ? "Choose another file" : "Choose a file"}
          </Button>
        )
      }
    >
      <input
        ref={input}
        className="vh"
        type="file"
        tabIndex={-1}
        accept=".json,application/json"
        aria-label="File of a scenario"
        onChange={(event) => {
          void read(event.target.files?.[0]);
          // The same file chosen again, corrected in the meantime, is read again.
          event.target.value = "";
        }}
      />
      <div aria-live="polite" className="mt-3">
        {unreadable && <ProblemNote problem={{ title: unreadable, text: "Choose it again." }} />}
        {reading && <ImportReading reading={reading} />}
      </div>
    </Dialog>
  );
}
