import { type KeyboardEvent, useId } from "react";
import { pathText } from "#shared/scenario/parse.ts";
import { fieldSpec } from "#src/pages/scenario/model/field-spec.ts";
import { getAt, type Path } from "#src/pages/scenario/model/json-path.ts";
import { fieldText } from "#src/pages/scenario/model/screen-unit.ts";
import { readNumber, standsFor } from "#src/pages/scenario/model/typed-values.ts";
import { useForm, useIssue } from "#src/pages/scenario/setup/form.tsx";

/** A number of the draft in a cell of a table; its problem is told below the table. */
export function CellAt({ path, label, empty }: { path: Path; label: string; empty?: string }) {
  const { draft, edit, endStep, takeBack, readOnly } = useForm();
  const issue = useIssue(path);
  const spec = fieldSpec(draft.json, path);
  const at = pathText(path);
  const value = getAt(draft.json, path);
  const typed = draft.typed[at];
  const stored = typeof value === "number" ? fieldText(value, spec.unit) : "";
  const stands = typed && (typed.problem !== null || (typeof value === "number" && standsFor(draft.json, path, typed.text, value)));
  const id = useId();
  return (
    <input
      id={id}
      className={`fl-cell ${issue ? "bad" : ""}`}
      aria-label={label}
      aria-invalid={issue ? true : undefined}
      title={issue ? `${issue.rule} ${issue.more}` : undefined}
      inputMode="decimal"
      autoComplete="off"
      placeholder={empty}
      readOnly={readOnly}
      value={stands ? typed.text : stored}
      onChange={(event) => {
        const text = event.target.value;
        const read = readNumber(text, spec, empty !== undefined);
        edit(read.ok ? { kind: "type", path, text, value: read.value } : { kind: "mistype", path, text, problem: read.problem });
      }}
      onKeyDown={(event: KeyboardEvent<HTMLInputElement>) => {
        if (event.key === "Enter") endStep();
        else if (event.key === "Escape") takeBack(at);
      }}
      onBlur={endStep}
      data-path={at}
    />
  );
}
