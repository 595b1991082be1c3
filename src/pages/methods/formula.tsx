import { Fragment, type ReactNode } from "react";

/** A piece of a formula: letter or word, number, index, exponent, or anything else as it stands. */
const PIECES = /([_^])(?:\{([^{}]*)\}|(.))|([A-Za-zµα-ωΑ-Ω]+'*)|([^A-Za-zµα-ωΑ-Ω_^]+)/gu;

/** "x", "θ'"; not the M of "1M". */
const isVariable = (letters: string, before: string) => /^[A-Za-zα-ωΑ-Ω]'*$/u.test(letters) && !/\d$/.test(before);

function pieces(text: string): ReactNode[] {
  return [...text.matchAll(PIECES)].map((match) => {
    const [whole, mark, group, single, letters] = match;
    const key = match.index;
    const inner = pieces(group ?? single ?? "");
    if (mark === "_") return <sub key={key}>{inner}</sub>;
    if (mark === "^") return <sup key={key}>{inner}</sup>;
    if (letters && isVariable(letters, text.slice(0, match.index))) return <i key={key}>{letters.replaceAll("'", "′")}</i>;
    // Between two words it joins ("back-to-back"); elsewhere it subtracts.
    const joins = whole === "-" && /[A-Za-z]$/.test(text.slice(0, match.index));
    return <Fragment key={key}>{joins ? whole : whole.replaceAll("-", "−").replaceAll("'", "′")}</Fragment>;
  });
}

/** Text with formulas between dollar signs: "the gain $K$ of ...". */
export const Prose = ({ children }: { children: string }) => (
  // biome-ignore lint/suspicious/noArrayIndexKey: the parts of a fixed text
  <>{children.split("$").map((part, i) => (i % 2 === 1 ? <Formula key={i}>{part}</Formula> : <Fragment key={i}>{part}</Fragment>))}</>
);

/** "x_{k+1} = A x_k": letters that stand alone are variables and slanted, words such as sin upright, _ and ^ lower and raise. */
export const Formula = ({ children }: { children: string }) => <>{pieces(children)}</>;
