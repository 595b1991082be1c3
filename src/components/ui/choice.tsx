import { type ReactNode, useId } from "react";
import { type Problem, ProblemNote } from "./field.tsx";
import { Icon } from "./icon.tsx";

export interface Option<Value extends string> {
  value: Value;
  word: string;
  /** Why it cannot be chosen now. */
  impossible?: string;
}

interface ChoiceProps<Value extends string> {
  label: string;
  options: readonly Option<Value>[];
  value: Value;
  onChoose: (value: Value) => void;
  disabled?: boolean;
}

/** Up to three words, joined: one is chosen. */
export function Choice<Value extends string>({ label, options, value, onChoose, disabled }: ChoiceProps<Value>) {
  const name = useId();
  return (
    <span className="choice" role="radiogroup" aria-label={label}>
      {options.map((option) => (
        <label key={option.value} title={option.impossible}>
          <input
            type="radio"
            name={name}
            value={option.value}
            checked={option.value === value}
            disabled={disabled || Boolean(option.impossible)}
            onChange={() => onChoose(option.value)}
          />
          <span data-word={option.word}>{option.word}</span>
        </label>
      ))}
    </span>
  );
}

export function ChoiceField<Value extends string>({
  symbol,
  problem,
  ...rest
}: ChoiceProps<Value> & { symbol?: ReactNode; problem?: Problem | null }) {
  return (
    <>
      <div className="field wide">
        <span className="lab" aria-hidden="true">
          {rest.label}
          {symbol && <i className="sym"> {symbol}</i>}
        </span>
        <Choice {...rest} />
      </div>
      {problem && <ProblemNote problem={problem} />}
    </>
  );
}

interface PickProps<Value extends string> extends ChoiceProps<Value> {
  id?: string;
  /** When the field's own label is elsewhere. */
  hideLabel?: boolean;
}

/** One of many: the browser's own list, on a rule. */
function Pick<Value extends string>({ id, label, options, value, onChoose, disabled, hideLabel }: PickProps<Value>) {
  return (
    <span className="pick">
      <select
        id={id}
        aria-label={hideLabel ? label : undefined}
        value={value}
        disabled={disabled}
        onChange={(event) => onChoose(event.target.value as Value)}
      >
        {options.map((option) => (
          <option key={option.value} value={option.value} disabled={Boolean(option.impossible)} title={option.impossible}>
            {option.word}
          </option>
        ))}
      </select>
      <Icon name="down" size={14} />
    </span>
  );
}

export function PickField<Value extends string>({ symbol, problem, ...rest }: PickProps<Value> & { symbol?: ReactNode; problem?: Problem | null }) {
  const own = useId();
  const id = rest.id ?? own;
  return (
    <>
      <div className={`field wide ${problem ? "bad" : ""}`}>
        <label htmlFor={id}>
          {rest.label}
          {symbol && <i className="sym"> {symbol}</i>}
        </label>
        <Pick {...rest} id={id} />
      </div>
      {problem && <ProblemNote id={`${id}-why`} problem={problem} />}
    </>
  );
}
