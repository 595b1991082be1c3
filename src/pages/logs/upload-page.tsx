import { useState } from "react";
import { Link, useNavigate } from "react-router-dom";
import { MAX_LOG_BYTES } from "#shared/api/logs.ts";
import { counted } from "#shared/reception/words.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { paths } from "#src/app/paths.ts";
import { useSession, useTeam } from "#src/app/session.tsx";
import { Button, LinkButton } from "#src/components/ui/button.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { ErrorView, Loading } from "#src/components/ui/states.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { bytesText } from "#src/lib/format.ts";
import type { LogClient } from "#src/workers/log-client.ts";
import { FormatDialog } from "./format-dialog.tsx";
import { ColumnTable } from "./upload/column-table.tsx";
import { FileDetails } from "./upload/file-details.tsx";
import { FileDrop } from "./upload/file-drop.tsx";
import { ReportTable } from "./upload/report-table.tsx";
import { SavePart } from "./upload/save-part.tsx";
import { useLogClient } from "./upload/use-log-client.ts";
import { useSave } from "./upload/use-save.ts";
import { type UploadControl, useUpload } from "./upload/use-upload.ts";
import { WhatWasRead } from "./upload/what-was-read.tsx";
import { uploaders } from "./uploaders.ts";
import "../scenarios/scenarios.css";
import "./logs.css";

export function UploadPage() {
  const team = useTeam();
  if (!team.may("edit-logs")) {
    return (
      <ErrorView
        title="Uploading is not for your role"
        text={`A log has to be uploaded by ${uploaders()} of the team; you may open every log.`}
        heading="h1"
      >
        <LinkButton kind="go" to={paths.logs(team.id)}>
          To the reception logs
        </LinkButton>
      </ErrorView>
    );
  }
  return <Upload />;
}

function Upload() {
  const team = useTeam();
  const client = useLogClient();
  const [chosen, setChosen] = useState<{ file: File; count: number } | null>(null);
  const [format, setFormat] = useState(false);
  const take = (file: File) => setChosen((before) => ({ file, count: (before?.count ?? 0) + 1 }));
  const tooLarge = chosen && chosen.file.size > MAX_LOG_BYTES;
  return (
    <>
      <DocumentTitle>Upload a reception log</DocumentTitle>
      <div className="title">
        <div>
          <p className="trail">
            <Link to={paths.logs(team.id)}>Reception logs</Link> /
          </p>
          <h1>Upload a log</h1>
        </div>
        <div className="acts">
          <Button onClick={() => setFormat(true)}>What a log has to hold</Button>
        </div>
      </div>
      <FileDrop onFile={take} again={chosen !== null}>
        {chosen ? (
          <span className="min-w-0 wrap-anywhere">
            <b className="strong text-ink">{chosen.file.name}</b>, {bytesText(chosen.file.size)}
          </span>
        ) : (
          <span>
            or drop it here: a text file with one row per packet, divided by commas, semicolons or tabs, at most {bytesText(MAX_LOG_BYTES)}. It stays
            on this machine until you save it.
          </span>
        )}
      </FileDrop>
      {tooLarge && (
        <ProblemNote
          problem={{
            title: `This file has ${bytesText(chosen.file.size)}; at most ${bytesText(MAX_LOG_BYTES)} are taken.`,
            text: "Divide it by time or by link, and upload the parts.",
          }}
        />
      )}
      {chosen && !tooLarge && client && <Chosen key={chosen.count} file={chosen.file} client={client} />}
      {format && <FormatDialog onShut={() => setFormat(false)} />}
    </>
  );
}

function Chosen({ file, client }: { file: File; client: LogClient }) {
  const team = useTeam();
  const { user } = useSession();
  const navigate = useNavigate();
  const toast = useToast();
  const control = useUpload(client, file, user.id);
  const save = useSave(client, team.id, ({ log, existed, differences }) => {
    if (differences.length > 0) return;
    toast({
      text: existed
        ? `The team has this very file already, read with the same columns: here it is, as “${log.name}”.`
        : `“${log.name}” is saved; the server read ${counted(log.links, "link")} in it, the same as this page.`,
    });
    navigate(paths.log(team.id, log.id));
  });
  const { preview, columns, reading } = control;
  if (control.failure) return <ProblemNote problem={{ title: `“${file.name}” cannot be read.`, text: control.failure }} />;
  if (!preview || !columns) return <Loading what="The first rows are read" />;
  const impossible =
    control.problem !== null
      ? "Say first what the columns are."
      : reading.state !== "done"
        ? "The whole file has to be read first."
        : reading.reading.links.length === 0
          ? "No packet was found under these columns."
          : null;
  return (
    <div className="lg-upload">
      <section className="sheet doc pad" aria-labelledby="lg-columns">
        <div className="hrow">
          <h2 id="lg-columns">What the columns are</h2>
          <OriginNote control={control} />
        </div>
        <ColumnTable preview={preview} columns={columns} names={control.names} bad={control.problem?.at === "roles"} onChange={control.change} />
        {control.problem?.at === "roles" && (
          <ProblemNote problem={{ title: control.problem.message, text: "Choose it above the column that holds it." }} />
        )}
        {control.origin === "guessed" && preview.reasons.length > 0 && (
          <details className="lg-why">
            <summary>Why these</summary>
            <ul>
              {preview.reasons.map((reason) => (
                <li key={reason}>{reason}</li>
              ))}
            </ul>
          </details>
        )}
        <FileDetails columns={columns} onChange={control.change} onSplit={control.split} />
      </section>
      <div className="sheet pad lg-read">
        <section aria-labelledby="lg-read" className="min-w-0">
          <h2 className="h2" id="lg-read">
            What the whole file holds
          </h2>
          <WhatWasRead control={control} />
        </section>
        <SavePart
          fileName={file.name}
          saving={save.saving}
          impossible={impossible}
          onSave={(name) => reading.state === "done" && void save.save(file, name, reading.mapping, reading.reading)}
          onCancel={save.cancel}
          logPath={(log) => paths.log(team.id, log.id)}
        />
      </div>
      {reading.state === "done" && <ReportTable report={reading.reading.report} name={file.name} />}
    </div>
  );
}

function OriginNote({ control }: { control: UploadControl }) {
  const { origin, guessAgain } = control;
  if (origin === "guessed") return <span className="rt">guessed from names and values; change what is wrong</span>;
  return (
    <span className="rt">
      {origin === "as-last-time" ? "as last time with these columns" : "as you chose"}{" "}
      <button type="button" className="link" onClick={guessAgain}>
        Guess anew
      </button>
    </span>
  );
}
