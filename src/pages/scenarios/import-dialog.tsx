import { type ClipboardEvent, type DragEvent, useRef, useState } from "react";
import { MAX_SCENARIO_BYTES } from "#shared/api/errors.ts";
import { isApiError } from "#src/api/client.ts";
import { useCreateScenario } from "#src/api/scenarios/create-scenario.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Dialog } from "#src/components/ui/dialog.tsx";
import { Entry, ProblemNote } from "#src/components/ui/field.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { bytesText } from "#src/lib/format.ts";
import { ImportReading, IssueList } from "./import-reading.tsx";
import { type Reading, readScenario } from "./read-scenario.ts";

interface ImportDialogProps {
  teamId: string;
  onShut: () => void;
  onImported: (scenarioId: string) => void;
}

interface Source {
  name: string;
  bytes: number;
}

export function ImportDialog({ teamId, onShut, onImported }: ImportDialogProps) {
  const [source, setSource] = useState<Source | null>(null);
  const [pasted, setPasted] = useState("");
  const [reading, setReading] = useState<Reading | null>(null);
  const [unreadable, setUnreadable] = useState<string | null>(null);
  const [over, setOver] = useState(false);
  const chooser = useRef<HTMLInputElement>(null);
  const creating = useCreateScenario(teamId);

  const begin = () => {
    creating.reset();
    setUnreadable(null);
  };
  const readText = (text: string) => {
    begin();
    setSource(null);
    setPasted(text);
    setReading(text.trim() === "" ? null : readScenario(text));
  };
  const readFile = async (file: File | undefined) => {
    if (!file) return;
    begin();
    setPasted("");
    setSource({ name: file.name, bytes: file.size });
    // Refused by its size, before a byte of it is read.
    if (file.size > MAX_SCENARIO_BYTES) return setReading({ kind: "too-large", bytes: file.size });
    try {
      setReading(readScenario(await file.text()));
    } catch {
      setReading(null);
      setUnreadable(`“${file.name}” could not be read. It may have been moved, or it is a folder.`);
    }
  };
  const drop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    void readFile(event.dataTransfer.files[0]);
  };
  const paste = (event: ClipboardEvent) => {
    const file = event.clipboardData.files[0];
    if (!file) return;
    event.preventDefault();
    void readFile(file);
  };
  const doImport = () => {
    if (reading?.kind !== "ready") return;
    const note = source ? `Imported from ${source.name}` : "Imported from pasted text";
    creating.mutate({ scenario: reading.scenario, note: note.slice(0, 500) }, { onSuccess: ({ id }) => onImported(id) });
  };

  const impossible = reading?.kind === "ready" ? null : reading ? "Put right first what is listed above" : "Choose a file or paste a scenario first";
  const serverIssues = isApiError(creating.error, "scenario-invalid") ? creating.error.details.issues : undefined;
  return (
    <Dialog
      open
      broad
      onOpenChange={onShut}
      title="Import a scenario"
      text={`A scenario as JSON, exported from here or written by a script of yours; at most ${bytesText(MAX_SCENARIO_BYTES)}. It becomes a new scenario; nothing is overwritten.`}
      actions={
        <Button kind="go" impossible={impossible} busy={creating.isPending} onClick={doImport}>
          {reading?.kind === "ready" ? `Import “${reading.scenario.name}”` : "Import"}
        </Button>
      }
    >
      {/* biome-ignore lint/a11y/noStaticElementInteractions: dropping is a second way beside the button */}
      <div
        className="drop mt-4"
        data-over={over}
        onDragOver={(event) => {
          event.preventDefault();
          setOver(true);
        }}
        onDragLeave={() => setOver(false)}
        onDrop={drop}
      >
        <input
          ref={chooser}
          type="file"
          className="vh"
          tabIndex={-1}
          accept=".json,application/json"
          aria-label="File of a scenario"
          onChange={(event) => {
            void readFile(event.target.files?.[0]);
            // The same file chosen again, corrected in the meantime, is read again.
            event.target.value = "";
          }}
        />
        <Button onClick={() => chooser.current?.click()}>{source ? "Choose another file" : "Choose a file"}</Button>
        {source ? (
          <span className="min-w-0 wrap-anywhere">
            <b className="strong text-ink">{source.name}</b>, {bytesText(source.bytes)}
          </span>
        ) : (
          <span>or drop it here</span>
        )}
      </div>
      <div className="mt-3">
        <Entry label="Or paste the text">
          {(control) => (
            <textarea
              {...control}
              className="area h-[92px] text-small"
              spellCheck={false}
              placeholder={'{ "format": "holdfast-scenario", "version": 1, …'}
              value={pasted}
              onPaste={paste}
              onChange={(event) => readText(event.target.value)}
            />
          )}
        </Entry>
      </div>
      <div aria-live="polite" className="mt-3">
        {unreadable && <ProblemNote problem={{ title: unreadable, text: "Choose it again." }} />}
        {reading && <ImportReading reading={reading} />}
      </div>
      {creating.isError && (
        <div className="mt-3">
          <ProblemNote problem={{ title: "It was not imported.", text: failureText(creating.error) }} />
          {serverIssues && <IssueList issues={serverIssues} />}
        </div>
      )}
    </Dialog>
  );
}
