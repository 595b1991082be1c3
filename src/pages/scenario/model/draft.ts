/**
 * The draft of a scenario: plain JSON with what was typed, and a history of both. Pure; the page keeps one of these in a
 * reducer. Text that is not a value yet stays beside the JSON, which keeps the last value that was one.
 */
import { pathText } from "#shared/scenario/parse.ts";
import { isWithin, type Path, sameJson, setAt } from "./json-path.ts";

const HISTORY_DEPTH = 200;

export interface TypedText {
  text: string;
  /** Why it is not a value yet; null when the JSON holds it. */
  problem: string | null;
}

export interface Draft {
  json: unknown;
  /** By path, as typed. */
  typed: Readonly<Record<string, TypedText>>;
}

export interface History {
  present: Draft;
  past: readonly Draft[];
  future: readonly Draft[];
  /** Field whose typing goes into the same step; null: the next edit begins a new step. */
  typingAt: string | null;
}

/** Where an entry of a list went: its new index, or null when it was taken out. */
export type Moved = { list: Path; to: (index: number) => number | null };

export type Edit =
  /** A value that was chosen, stepped or computed. */
  | { kind: "set"; path: Path; value: unknown; step?: string }
  /** Typed text, and the value that it stands for. */
  | { kind: "type"; path: Path; text: string; value: unknown }
  /** Typed text that stands for no value. */
  | { kind: "mistype"; path: Path; text: string; problem: string }
  /** Several values in one step. */
  | { kind: "put"; json: unknown; moved?: readonly Moved[]; forget?: readonly Path[] }
  /** Another scenario altogether: an import, an old revision, the draft of another tab. */
  | { kind: "replace"; draft: Draft };

export const cleanDraft = (json: unknown): Draft => ({ json, typed: {} });
export const startHistory = (draft: Draft): History => ({ present: draft, past: [], future: [], typingAt: null });

const NAMES_A_UNIT = new Set(["signal", "channel", "parameter", "type", "policy"]);

/** What was typed at the path or below it is void; beside a signal's name too, since the unit changes with it. */
function without(typed: Draft["typed"], path: Path): Draft["typed"] {
  const last = path.at(-1);
  const outer = pathText(typeof last === "string" && NAMES_A_UNIT.has(last) ? path.slice(0, -1) : path);
  const kept = Object.entries(typed).filter(([at]) => !isWithin(at, outer));
  return kept.length === Object.keys(typed).length ? typed : Object.fromEntries(kept);
}

function moveTyped(typed: Draft["typed"], { list, to }: Moved): Draft["typed"] {
  const prefix = `${pathText(list)}[`;
  return Object.fromEntries(
    Object.entries(typed).flatMap(([at, text]) => {
      if (!at.startsWith(prefix)) return [[at, text]];
      const end = at.indexOf("]", prefix.length);
      const index = to(Number(at.slice(prefix.length, end)));
      return index === null ? [] : [[`${prefix}${index}${at.slice(end)}`, text]];
    }),
  );
}

function apply(draft: Draft, edit: Edit): Draft {
  switch (edit.kind) {
    case "set":
      return { json: setAt(draft.json, edit.path, edit.value), typed: without(draft.typed, edit.path) };
    case "type":
      return {
        json: setAt(draft.json, edit.path, edit.value),
        typed: { ...without(draft.typed, edit.path), [pathText(edit.path)]: { text: edit.text, problem: null } },
      };
    case "mistype":
      return { json: draft.json, typed: { ...draft.typed, [pathText(edit.path)]: { text: edit.text, problem: edit.problem } } };
    case "put": {
      const moved = (edit.moved ?? []).reduce(moveTyped, draft.typed);
      return { json: edit.json, typed: (edit.forget ?? []).reduce(without, moved) };
    }
    case "replace":
      return edit.draft;
  }
}

const stepOf = (edit: Edit): string | null => {
  if (edit.kind === "type" || edit.kind === "mistype") return pathText(edit.path);
  return edit.kind === "set" ? (edit.step ?? null) : null;
};

export const sameDraft = (a: Draft, b: Draft): boolean => sameJson(a.json, b.json) && sameJson(a.typed, b.typed);

export function change(history: History, edit: Edit): History {
  const present = apply(history.present, edit);
  const step = stepOf(edit);
  if (sameDraft(present, history.present)) return history;
  if (step !== null && step === history.typingAt) return { ...history, present, future: [] };
  return { present, past: [...history.past, history.present].slice(-HISTORY_DEPTH), future: [], typingAt: step };
}

/** The field was left: what is typed next is another step. */
export const endStep = (history: History): History => (history.typingAt === null ? history : { ...history, typingAt: null });

export function undo(history: History): History {
  const back = history.past.at(-1);
  if (!back) return history;
  return { present: back, past: history.past.slice(0, -1), future: [history.present, ...history.future], typingAt: null };
}

export function redo(history: History): History {
  const [next, ...future] = history.future;
  if (!next) return history;
  return { present: next, past: [...history.past, history.present], future, typingAt: null };
}
