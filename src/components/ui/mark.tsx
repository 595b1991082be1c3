import type { ReactNode } from "react";
import type { VerdictLine as Verdict } from "#shared/api/common.ts";

export type MarkState = Verdict["state"];

export const MARK_WORDS: Record<MarkState, string> = {
  holds: "Holds",
  near: "Near a limit",
  crosses: "Crosses",
  "not-decided": "Not decided",
  "does-not-fit": "Does not fit",
};

const SHAPES: Record<MarkState, ReactNode> = {
  holds: (
    <>
      <circle cx="8" cy="8" r="7.5" className="m-holds" />
      <path d="M4.6 8.3l2.4 2.4 4.4-5" className="m-tick" />
    </>
  ),
  near: (
    <>
      <path d="M8 1.2L15.2 14.4H.8Z" className="m-near" />
      <path d="M8 6v4M8 11.6v1.2" className="m-nearl" />
    </>
  ),
  crosses: <path d="M1 1H5.6V8.4H10.4V1H15V15H1Z" className="m-cross" />,
  "not-decided": <circle cx="8" cy="8" r="6.6" className="m-open" />,
  "does-not-fit": (
    <>
      <path d="M1.5 3.5H11V12.5H1.5Z" className="m-fit" />
      <path d="M11 8H15.5M11 3.5V12.5" className="m-fit2" />
    </>
  ),
};

/** Disc with tick, triangle, notched square, broken ring, box with bar. `quiet` where the word stands beside it. */
export function Mark({ state, size = 15, quiet = false }: { state: MarkState; size?: number; quiet?: boolean }) {
  const words = quiet ? ({ "aria-hidden": true } as const) : ({ role: "img", "aria-label": MARK_WORDS[state] } as const);
  return (
    // biome-ignore lint/a11y/noSvgWithoutTitle: named by aria-label, or hidden beside the word itself
    <svg className="mk" width={size} height={size} viewBox="0 0 16 16" {...words}>
      {SHAPES[state]}
    </svg>
  );
}

/** Mark, one bold word, one sentence with the decisive figure; at the right what it is based on. */
export function VerdictLine({ state, word, sentence, meta }: { state: MarkState; word: string; sentence: ReactNode; meta?: ReactNode }) {
  return (
    <div className="verdict">
      <Mark state={state} size={20} quiet />
      <p className="say">
        <b>{/[.,:]$/.test(word) ? word : `${word}.`}</b> {sentence}
      </p>
      {meta && <div className="meta">{meta}</div>}
    </div>
  );
}

/** In tables: mark, word, and the sentence below. */
export function VerdictCell({ verdict }: { verdict: Verdict }) {
  return (
    <span className="vd">
      <Mark state={verdict.state} quiet />
      <span>
        <b>{verdict.word}</b>
        <span className="pl">{verdict.sentence}</span>
      </span>
    </span>
  );
}
