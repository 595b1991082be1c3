import { useId, useRef } from "react";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { pathText } from "#shared/scenario/parse.ts";
import { Button } from "#src/components/ui/button.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { asProblem } from "#src/pages/scenario/setup/fields.tsx";
import { useForm, useIssue } from "#src/pages/scenario/setup/form.tsx";
import { matrixText, readMatrix } from "../model/matrix-text.ts";

const PATH = ["floor", "links", "prr"] as const;
const MOST_BYTES = 1_000_000;

/** Measured reception ratios as a text: typed, pasted from a table, or read from a CSV file. */
export function MatrixField({ floor }: { floor: Floor }) {
  const { draft, edit, endStep, readOnly } = useForm();
  const issue = useIssue(PATH, true);
  const toast = useToast();
  const id = useId();
  const file = useRef<HTMLInputElement>(null);
  const typed = draft.typed[pathText(PATH)];
  const prr = floor.links.type === "matrix" ? floor.links.prr : [];
  const problem = asProblem(issue);
  const take = (text: string) => {
    const read = readMatrix(text, floor.nodes.length);
    edit(read.ok ? { kind: "type", path: PATH, text, value: read.prr } : { kind: "mistype", path: PATH, text, problem: read.problem });
  };
  const readFile = async (chosen: File | undefined) => {
    if (!chosen) return;
    if (chosen.size > MOST_BYTES)
      return toast({ text: `“${chosen.name}” has ${Math.round(chosen.size / 1e6)} MB; a table of ratios has at most 1 MB.` });
    take(await chosen.text());
    endStep();
  };
  return (
    <div className="su-seq">
      <label htmlFor={id}>Row sends, column receives, in the order of the nodes</label>
      <textarea
        id={id}
        className="area fl-area"
        rows={Math.min(12, Math.max(4, floor.nodes.length + 1))}
        wrap="off"
        spellCheck={false}
        value={typed?.text ?? matrixText(prr)}
        readOnly={readOnly}
        aria-invalid={problem ? true : undefined}
        aria-describedby={`${id}-how${problem ? ` ${id}-why` : ""}`}
        onChange={(event) => take(event.target.value)}
        onBlur={endStep}
        data-path={pathText(PATH)}
      />
      <p className="note second" id={`${id}-how`}>
        Nodes {floor.nodes.map(({ id: number }) => number).join(", ")}. 0 to 1 or per cent, divided by tabs, commas or spaces; the diagonal is not
        read. Several senders count as independent tries.
      </p>
      {problem && <ProblemNote id={`${id}-why`} problem={problem} />}
      {!readOnly && (
        <div className="fl-acts">
          <input
            ref={file}
            type="file"
            accept=".csv,.txt,.tsv,text/csv,text/plain"
            hidden
            onChange={(event) => {
              void readFile(event.target.files?.[0]);
              event.target.value = "";
            }}
          />
          <Button small icon="import" onClick={() => file.current?.click()}>
            Read a CSV file
          </Button>
        </div>
      )}
    </div>
  );
}
