import { useCallback, useEffect, useRef, useState } from "react";
import { describeChanges } from "./model/changes.ts";
import { isWithin } from "./model/json-path.ts";
import { sectionOf } from "./model/sections.ts";
import type { Folds } from "./setup/setup-section.tsx";
import type { DraftControl } from "./use-draft.ts";

/** Undo and redo that say which setting went where, to the ear, and open the section in which it lies, for the eye. */
export function useTold({ draft, undo, redo }: Pick<DraftControl, "draft" | "undo" | "redo">, { setOpen }: Folds) {
  const [told, setTold] = useState("");
  const pending = useRef<{ word: string; json: unknown } | null>(null);
  useEffect(() => {
    const { current } = pending;
    pending.current = null;
    if (!current) return;
    const [first, ...more] = describeChanges(current.json, draft.json);
    if (!first) return setTold(`${current.word}.`);
    if (!isWithin(first.path, "floor")) setOpen(sectionOf(first.path), true);
    setTold(`${current.word}: ${first.label} is ${first.after}${more.length > 0 ? `, and ${more.length} more` : ""}.`);
  }, [draft, setOpen]);
  const { json } = draft;
  return {
    told,
    undo: useCallback(() => {
      pending.current = { word: "Undone", json };
      undo();
    }, [json, undo]),
    redo: useCallback(() => {
      pending.current = { word: "Redone", json };
      redo();
    }, [json, redo]),
  };
}
