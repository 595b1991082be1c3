import { type ComponentProps, type ReactNode, type Ref, useId } from "react";
import { Icon } from "./icon.tsx";

export interface Problem {
  /** What is wrong, with the value and what is permitted: "Plan of 40 commands: at most 12 fit." */
  title: string;
  /** What it would do, and what to enter. */
  text?: ReactNode;
}

/** The note under a bad value. */
export function ProblemNote({ id, problem }: { id?: string; problem: Problem }) {
  return (
    <div className="err" role="alert" id={id}>
      <Icon name="cross" size={14} />
      <span>
        <b>{problem.title}</b>
        {problem.text && <> {problem.text}</>}
      </span>
    </div>
  );
}

interface Words {
  label: ReactNode;
  /** Standard symbol, set in italics: M, F_c. */
  symbol?: ReactNode;
}

const Label = ({ label, symbol }: Words) => (
  <>
    {label}
    {symbol && (
      <>
        {" "}
        <i className="sym">{symbol}</i>
      </>
    )}
  </>
);

export interface FieldProps extends Words, Omit<ComponentProps<"input">, "value" | "onChange"> {
  value: string;
  onText: (text: string) => void;
  unit?: ReactNode;
  /** Permitted range in the same unit: "0.05 to 50". */
  range?: ReactNode;
  problem?: Problem | null;
  /** Below the field, when nothing is wrong. */
  hint?: ReactNode;
  ref?: Ref<HTMLInputElement>;
}

/** A number with label and symbol, unit and range, in four columns. What is typed is text; its owner says what is wrong with it. */
export function Field({ label, symbol, value, onText, unit, range, problem, hint, className = "", ...rest }: FieldProps) {
  const own = useId();
  const id = rest.id ?? own;
  const described = [problem && `${id}-why`, range && `${id}-range`, hint && `${id}-hint`].filter(Boolean).join(" ");
  return (
    <>
      <div className={`field ${problem ? "bad" : ""} ${className}`}>
        <label htmlFor={id}>
          <Label label={label} symbol={symbol} />
        </label>
        <input
          inputMode="decimal"
          autoComplete="off"
          spellCheck={false}
          {...rest}
          id={id}
          value={value}
          onChange={(event) => onText(event.target.value)}
          aria-invalid={problem ? true : undefined}
          aria-describedby={described || undefined}
        />
        <span className="unit">{unit}</span>
        <span className="range" id={`${id}-range`}>
          {range && <span className="vh">Permitted: </span>}
          {range}
        </span>
      </div>
      {problem && <ProblemNote id={`${id}-why`} problem={problem} />}
      {hint && (
        <p className="note muted pb-1" id={`${id}-hint`}>
          {hint}
        </p>
      )}
    </>
  );
}

export interface TextFieldProps extends Words, Omit<ComponentProps<"input">, "value" | "onChange"> {
  value: string;
  onText: (text: string) => void;
  problem?: Problem | null;
  ref?: Ref<HTMLInputElement>;
}

/** A word or name on a rule, label before it. */
export function TextField({ label, symbol, value, onText, problem, className = "", ...rest }: TextFieldProps) {
  const own = useId();
  const id = rest.id ?? own;
  return (
    <>
      <div className={`field wide ${problem ? "bad" : ""} ${className}`}>
        <label htmlFor={id}>
          <Label label={label} symbol={symbol} />
        </label>
        <input
          autoComplete="off"
          {...rest}
          id={id}
          value={value}
          onChange={(event) => onText(event.target.value)}
          aria-invalid={problem ? true : undefined}
          aria-describedby={problem ? `${id}-why` : undefined}
        />
      </div>
      {problem && <ProblemNote id={`${id}-why`} problem={problem} />}
    </>
  );
}

/** Label above, control below: dialogs and the sign-in page. The control takes `id`, `aria-invalid` and `aria-describedby`. */
export function Entry({
  label,
  problem,
  hint,
  children,
}: {
  label: ReactNode;
  problem?: Problem | null;
  hint?: ReactNode;
  children: (control: { id: string; "aria-invalid": true | undefined; "aria-describedby": string | undefined }) => ReactNode;
}) {
  const id = useId();
  const described = [problem && `${id}-why`, hint && `${id}-hint`].filter(Boolean).join(" ");
  return (
    <div className="entry">
      <label htmlFor={id}>{label}</label>
      {children({ id, "aria-invalid": problem ? true : undefined, "aria-describedby": described || undefined })}
      {hint && (
        <p className="note second mt-1" id={`${id}-hint`}>
          {hint}
        </p>
      )}
      {problem && <ProblemNote id={`${id}-why`} problem={problem} />}
    </div>
  );
}
