/** The set-up's fields: each knows its setting by path; words, unit and range come from the field model. */
import { Fragment, type KeyboardEvent, type ReactNode } from "react";
import { pathText } from "#shared/scenario/parse.ts";
import { ChoiceField, type Option, PickField } from "#src/components/ui/choice.tsx";
import { Field, type Problem, TextField } from "#src/components/ui/field.tsx";
import type { Choice } from "../model/choices.ts";
import { fieldRangeText, fieldSpec } from "../model/field-spec.ts";
import { getAt, type Path, setAt } from "../model/json-path.ts";
import type { FieldIssue } from "../model/judge.ts";
import { fieldText, plainNumber, stepped, withoutUnit } from "../model/screen-unit.ts";
import { readNumber, standsFor } from "../model/typed-values.ts";
import { useForm, useIssue } from "./form.tsx";

export const asProblem = (issue: FieldIssue | null): Problem | null => issue && { title: issue.rule, text: issue.more || undefined };

/** "F_c" with the c below the line. */
export function symbolText(symbol: string | undefined): ReactNode {
  if (!symbol) return undefined;
  const [letter, below] = symbol.split("_");
  return below ? (
    <Fragment>
      {letter}
      <sub>{below}</sub>
    </Fragment>
  ) : (
    letter
  );
}

interface NumberAtProps {
  path: Path;
  label?: string;
  /** What an empty field means; without it a number is needed. */
  empty?: string;
  hint?: ReactNode;
  /** Where a rule of the scenario leaves less than the field itself would permit. */
  range?: string;
}

export function NumberAt({ path, label, empty, hint, range }: NumberAtProps) {
  const { draft, edit, endStep, takeBack, readOnly } = useForm();
  const issue = useIssue(path);
  const spec = fieldSpec(draft.json, path);
  const at = pathText(path);
  const value = getAt(draft.json, path);
  const typed = draft.typed[at];
  const stored = typeof value === "number" ? fieldText(value, spec.unit) : "";
  const text =
    typed && (typed.problem !== null || (typeof value === "number" && standsFor(draft.json, path, typed.text, value))) ? typed.text : stored;

  const type = (next: string) => {
    const read = readNumber(next, spec, empty !== undefined);
    edit(read.ok ? { kind: "type", path, text: next, value: read.value } : { kind: "mistype", path, text: next, problem: read.problem });
  };
  const onKeyDown = (event: KeyboardEvent<HTMLInputElement>) => {
    const direction = event.key === "ArrowUp" || event.key === "PageUp" ? 1 : event.key === "ArrowDown" || event.key === "PageDown" ? -1 : 0;
    if (event.key === "Enter") {
      endStep();
      event.currentTarget.select();
    } else if (event.key === "Escape") takeBack(at);
    else if (direction !== 0 && spec.meta && !readOnly && !event.altKey && !event.metaKey && !event.ctrlKey) {
      event.preventDefault();
      const { integer, min, max } = spec.meta;
      const from = typeof value === "number" ? value : 0;
      const large = event.shiftKey || event.key.startsWith("Page");
      edit({ kind: "set", path, value: stepped(from, spec.unit, direction, { integer, large, min, max }), step: at });
    }
  };

  return (
    <Field
      label={label ?? spec.label}
      symbol={symbolText(spec.symbol)}
      value={text}
      onText={type}
      unit={spec.unit.text}
      range={range ?? fieldRangeText(spec)}
      placeholder={empty}
      problem={asProblem(issue)}
      hint={hint}
      readOnly={readOnly}
      onKeyDown={onKeyDown}
      onBlur={() => {
        // The unit stands behind the field already.
        if (typed?.problem === null && plainNumber(typed.text) === null && typed.text.trim() !== "") type(withoutUnit(typed.text, spec.unit));
        endStep();
      }}
      data-path={at}
    />
  );
}

interface ChoiceAtProps {
  path: Path;
  label?: string;
  options: readonly Choice[];
  /** The path leads to a part that takes another form, not to a value. */
  form?: boolean;
  /** Chosen value, when it is not the value at the path. */
  value?: string;
  onChoose?: (value: string) => void;
}

function useChoice({ path, options, form, value, onChoose, label }: ChoiceAtProps) {
  const { draft, edit, chooseForm, readOnly } = useForm();
  const tagged: Path = form ? [...path, path.at(-1) === "onLoss" ? "policy" : "type"] : path;
  const issue = useIssue(tagged);
  const chosen = value ?? String(getAt(draft.json, tagged));
  return {
    label: label ?? fieldSpec(draft.json, tagged).label,
    options: options.map(({ value: one, word }): Option<string> => ({ value: one, word })),
    value: chosen,
    onChoose: onChoose ?? ((next: string) => (form ? chooseForm(path, next) : edit({ kind: "set", path, value: next }))),
    disabled: readOnly,
    problem: asProblem(issue),
    hint: options.find((one) => one.value === chosen)?.hint,
  };
}

const Hint = ({ children }: { children?: ReactNode }) => (children ? <p className="note muted pb-1">{children}</p> : null);

/** Up to three words, joined. */
export function ChoiceAt(props: ChoiceAtProps) {
  const { hint, ...choice } = useChoice(props);
  return (
    <>
      <ChoiceField {...choice} />
      <Hint>{hint}</Hint>
    </>
  );
}

/** One of a list. */
export function PickAt(props: ChoiceAtProps) {
  const { hint, ...choice } = useChoice(props);
  // A signal that the machine does not have is still shown, as what it is.
  const known = choice.options.some(({ value }) => value === choice.value);
  const options = known ? choice.options : [{ value: choice.value, word: `${choice.value} (not there)` }, ...choice.options];
  return (
    <>
      <PickField {...choice} options={options} />
      <Hint>{hint}</Hint>
    </>
  );
}

export function TextAt({ path, label }: { path: Path; label?: string }) {
  const { draft, edit, endStep, readOnly } = useForm();
  const issue = useIssue(path);
  const value = getAt(draft.json, path);
  return (
    <TextField
      label={label ?? fieldSpec(draft.json, path).label}
      value={typeof value === "string" ? value : ""}
      onText={(text) => edit({ kind: "set", path, value: text, step: pathText(path) })}
      problem={asProblem(issue)}
      readOnly={readOnly}
      onBlur={endStep}
      onKeyDown={(event) => event.key === "Enter" && endStep()}
      data-path={pathText(path)}
    />
  );
}

/** A part that is there or not: chosen by two words. */
export function SwitchAt({ path, label, off, on, first }: { path: Path; label?: string; off: string; on: string; first: () => unknown }) {
  const { draft, edit, readOnly } = useForm();
  const issue = useIssue(path);
  const value = getAt(draft.json, path);
  return (
    <ChoiceField
      label={label ?? fieldSpec(draft.json, path).label}
      options={[
        { value: "off", word: off },
        { value: "on", word: on },
      ]}
      value={value === null ? "off" : "on"}
      onChoose={(next) => edit({ kind: "put", json: setAt(draft.json, path, next === "on" ? first() : null), forget: [path] })}
      disabled={readOnly}
      problem={asProblem(issue)}
    />
  );
}
