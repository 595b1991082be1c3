import { useId } from "react";
import { pathText } from "#shared/scenario/parse.ts";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { counted, percentText } from "#src/lib/format.ts";
import { fieldSpec } from "../model/field-spec.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { bitsText, numbersText, type Read, readBits, readNumbers, readRows, rowsText } from "../model/typed-values.ts";
import { asProblem } from "./fields.tsx";
import { useForm, useIssue } from "./form.tsx";

interface SequenceAtProps {
  path: Path;
  label?: string;
  kind: "bits" | "numbers" | "rows";
  /** Rows only: what stands in the columns. */
  columns?: readonly string[];
}

function longestLoss(bits: readonly unknown[]): number {
  let longest = 0;
  let run = 0;
  for (const bit of bits) {
    run = bit === 0 ? run + 1 : 0;
    longest = Math.max(longest, run);
  }
  return longest;
}

function counts(value: unknown, { kind, columns }: SequenceAtProps): string {
  if (!Array.isArray(value)) return "";
  if (kind === "numbers") return `${counted(value.length, "value")}, divided by spaces or commas.`;
  if (kind === "rows") return `${counted(value.length, "round")}; a line holds ${columns?.join(", ").toLowerCase()}, in SI units.`;
  const lost = value.filter((bit) => bit === 0).length;
  const share = value.length > 0 ? ` (${percentText(lost / value.length)})` : "";
  return `${counted(value.length, "round")}, ${lost} lost${share}, at most ${longestLoss(value)} in a row. 1 delivered, 0 lost.`;
}

/** A given sequence as text: round by round, or value by value. */
export function SequenceAt(props: SequenceAtProps) {
  const { path, label, kind, columns } = props;
  const { draft, edit, endStep, readOnly } = useForm();
  const issue = useIssue(path, true);
  const id = useId();
  const spec = fieldSpec(draft.json, path);
  const value = getAt(draft.json, path);
  const typed = draft.typed[pathText(path)];
  const read = (text: string): Read =>
    kind === "bits" ? readBits(text) : kind === "numbers" ? readNumbers(text, spec) : readRows(text, spec, columns?.length ?? 1);
  const text = typed?.text ?? (kind === "bits" ? bitsText(value) : kind === "numbers" ? numbersText(value, spec) : rowsText(value, spec));
  const problem = asProblem(issue);
  return (
    <div className="su-seq">
      <label htmlFor={id}>
        {label ?? spec.label}
        {kind === "numbers" && spec.unit.text && <span className="second"> in {spec.unit.text}</span>}
      </label>
      <textarea
        id={id}
        className="area"
        rows={3}
        spellCheck={false}
        value={text}
        readOnly={readOnly}
        aria-invalid={problem ? true : undefined}
        aria-describedby={`${id}-count${problem ? ` ${id}-why` : ""}`}
        onChange={(event) => {
          const next = event.target.value;
          const result = read(next);
          edit(result.ok ? { kind: "type", path, text: next, value: result.value } : { kind: "mistype", path, text: next, problem: result.problem });
        }}
        onBlur={endStep}
        data-path={pathText(path)}
      />
      <p className="note second" id={`${id}-count`}>
        {counts(value, props)}
      </p>
      {problem && <ProblemNote id={`${id}-why`} problem={problem} />}
    </div>
  );
}
