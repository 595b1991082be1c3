import { pathText } from "#shared/scenario/parse.ts";
import { TextField } from "#src/components/ui/field.tsx";
import { numbersAsText } from "../model/channel-text.ts";
import { fieldSpec } from "../model/field-spec.ts";
import { getAt, type Path, sameJson } from "../model/json-path.ts";
import type { Read } from "../model/typed-values.ts";
import { asProblem } from "./fields.tsx";
import { useForm, useIssue } from "./form.tsx";

interface NumberListAtProps {
  path: Path;
  label?: string;
  read: (text: string) => Read;
  /** What an empty list means. */
  empty: string;
}

/** A list of whole numbers on one line: "11 to 14, 20, 26". */
export function NumberListAt({ path, label, read, empty }: NumberListAtProps) {
  const { draft, edit, endStep, readOnly } = useForm();
  const issue = useIssue(path, true);
  const at = pathText(path);
  const value = getAt(draft.json, path);
  const typed = draft.typed[at];
  const stands = (text: string) => {
    const result = read(text);
    return result.ok && sameJson(result.value, value);
  };
  return (
    <TextField
      label={label ?? fieldSpec(draft.json, path).label}
      value={typed && (typed.problem !== null || stands(typed.text)) ? typed.text : numbersAsText(value)}
      placeholder={empty}
      onText={(text) => {
        const result = read(text);
        edit(result.ok ? { kind: "type", path, text, value: result.value } : { kind: "mistype", path, text, problem: result.problem });
      }}
      problem={asProblem(issue)}
      readOnly={readOnly}
      onBlur={endStep}
      onKeyDown={(event) => event.key === "Enter" && endStep()}
      data-path={at}
    />
  );
}
