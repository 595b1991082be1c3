/** What every field of the set-up shares: the draft, its issues, and how to change it. */
import { createContext, useContext, useEffect, useMemo, useRef, useState } from "react";
import { pathText } from "#shared/scenario/parse.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { Draft, Edit } from "../model/draft.ts";
import { getAt, type Path, setAt } from "../model/json-path.ts";
import type { FieldIssue } from "../model/judge.ts";
import { firstOf, type Known, tagKey } from "../model/variants.ts";

export interface Form {
  draft: Draft;
  issues: readonly FieldIssue[];
  /** An old revision is shown: nothing can be changed. */
  readOnly: boolean;
  edit(edit: Edit): void;
  /** The field was left or Enter was pressed. */
  endStep(): void;
  /** Takes back what was typed in this field since it was entered. */
  takeBack(path: string): void;
  /** Another form of a part: the values that this form had before, else values to begin with. */
  chooseForm(path: Path, tag: string): void;
  /** Fields in the page; issues elsewhere are shown on top of their section. */
  place(path: string): () => void;
  placed: ReadonlySet<string>;
}

const FormContext = createContext<Form | null>(null);
export const FormProvider = FormContext;

export function useForm(): Form {
  const form = useContext(FormContext);
  if (!form) throw new Error("useForm: no form above this component.");
  return form;
}

/** Issues of a field; while it is in the page they belong to it. `below`: also those of what lies inside. */
export function useIssue(path: Path, below = false): FieldIssue | null {
  const { issues, place } = useForm();
  const at = pathText(path);
  useEffect(() => place(at), [place, at]);
  return issues.find((issue) => issue.path === at || (below && issue.path.startsWith(`${at}[`))) ?? null;
}

export function usePlaces(): Pick<Form, "place" | "placed"> {
  const [placed, setPlaced] = useState<ReadonlySet<string>>(new Set());
  const [place] = useState(() => {
    const counts = new Map<string, number>();
    let scheduled = false;
    // Many fields come and go at once when a section folds: one new set for all of them.
    const publish = () => {
      if (scheduled) return;
      scheduled = true;
      queueMicrotask(() => {
        scheduled = false;
        setPlaced((before) => (before.size === counts.size && [...before].every((path) => counts.has(path)) ? before : new Set(counts.keys())));
      });
    };
    return (path: string) => {
      counts.set(path, (counts.get(path) ?? 0) + 1);
      publish();
      return () => {
        const left = (counts.get(path) ?? 1) - 1;
        if (left > 0) counts.set(path, left);
        else counts.delete(path);
        publish();
      };
    };
  });
  return { place, placed };
}

/** Remembers, for as long as the page is open, what each form of a part held before another was chosen. */
export function useForms(draft: Draft, good: Scenario | null, edit: (edit: Edit) => void): Form["chooseForm"] {
  const parked = useRef(new Map<string, unknown>());
  const law = good?.loops[0].controller.law;
  const now = useRef<Known & { draft: Draft }>({ draft, good, modelLaw: null });
  now.current = { draft, good, modelLaw: law && law.type !== "pid" ? law : now.current.modelLaw };
  return useMemo(
    () => (path, tag) => {
      const { json } = now.current.draft;
      const at = pathText(path);
      const key = tagKey(path);
      const present = getAt(json, path) as Record<string, unknown>;
      if (present?.[key] === tag) return;
      parked.current.set(`${at}#${String(present?.[key])}`, present);
      edit({
        kind: "put",
        json: setAt(json, path, parked.current.get(`${at}#${tag}`) ?? firstOf(json, path, tag, now.current)),
        forget: [path],
      });
    },
    [edit],
  );
}
