import { useCallback, useEffect, useMemo, useReducer, useRef, useState } from "react";
import type { Scenario } from "#shared/scenario/schema.ts";
import { change, cleanDraft, type Draft, type Edit, endStep, type History, redo, sameDraft, startHistory, undo } from "./model/draft.ts";
import { type DraftStore, type StoredDraft, sameWriting } from "./model/draft-store.ts";
import { sameJson } from "./model/json-path.ts";

/** The revision that a draft began from. */
export interface Base {
  revision: number;
  scenario: Scenario;
}

export type DraftNotice =
  /** The draft of an earlier visit is back. */
  | { kind: "restored"; at: number }
  /** Another tab edited; this one follows. */
  | { kind: "followed"; at: number }
  /** Another tab edited while this one did not hear of it: one of the two has to be chosen. */
  | { kind: "split"; other: StoredDraft };

export interface DraftControl {
  base: Base;
  draft: Draft;
  /** Field in which a step of typing is going on. */
  typingAt: string | null;
  canUndo: boolean;
  canRedo: boolean;
  /** Is there anything that differs from the base, or is not a value yet? */
  touched: boolean;
  /** Does the browser hold what is on the screen? */
  stored: boolean;
  notice: DraftNotice | null;
  edit(edit: Edit): void;
  endStep(): void;
  undo(): void;
  redo(): void;
  dismissNotice(): void;
  /** Back to the base; can be undone. */
  discard(): void;
  takeOther(): void;
  keepMine(): void;
  /** A revision was saved from the draft, or the draft moves on top of a newer one. */
  rebase(base: Base, draft?: Draft): void;
}

type Action = { kind: "edit"; edit: Edit } | { kind: "end-step" } | { kind: "undo" } | { kind: "redo" };

function reduce(history: History, action: Action): History {
  switch (action.kind) {
    case "edit":
      return change(history, action.edit);
    case "end-step":
      return endStep(history);
    case "undo":
      return undo(history);
    case "redo":
      return redo(history);
  }
}

const hasProblem = (draft: Draft): boolean => Object.values(draft.typed).some(({ problem }) => problem !== null);
const isTouched = (draft: Draft, base: Base): boolean => hasProblem(draft) || !sameJson(draft.json, base.scenario);
const tabName = (): string => `${Date.now().toString(36)}-${Math.random().toString(36).slice(2, 10)}`;

export interface DraftOptions {
  base: Base;
  store: DraftStore;
  /** What the store held when the page opened. */
  found: StoredDraft | null;
  now: () => number;
  /** Another tab works on another revision than this one: it has to be fetched anew. */
  onOtherBase: () => void;
}

/** The draft of one scenario with its history, kept in the browser and in step with other tabs. */
export function useDraft({ base: first, store, found, now, onOtherBase }: DraftOptions): DraftControl {
  const [base, setBase] = useState(first);
  const restored = found?.draft && found.state === "open" && found.base === first.revision ? (found.draft as Draft) : null;
  const [history, act] = useReducer(reduce, null, () => {
    const clean = startHistory(cleanDraft(first.scenario));
    return restored ? change(clean, { kind: "replace", draft: restored }) : clean;
  });
  const [notice, setNotice] = useState<DraftNotice | null>(() =>
    restored && found && isTouched(restored, first) ? { kind: "restored", at: found.at } : null,
  );
  const [stored, setStored] = useState(true);
  const draft = history.present;

  const tab = useMemo(tabName, []);
  const turn = useRef(0);
  /** The writing that this tab knows of, and the draft that it stands for. */
  const known = useRef(found);
  const settled = useRef(draft);

  const write = useCallback(
    (entry: Pick<StoredDraft, "state" | "base" | "draft">) => {
      const full: StoredDraft = { ...entry, at: now(), tab, turn: ++turn.current };
      const done = store.write(full);
      if (done) known.current = full;
      setStored(done);
    },
    [store, tab, now],
  );

  useEffect(() => {
    if (settled.current === draft) return;
    const before = store.read();
    if (!sameWriting(before, known.current) && before?.draft && !sameDraft(before.draft as Draft, draft)) {
      setNotice({ kind: "split", other: before });
      setStored(false);
      return;
    }
    settled.current = draft;
    write({ state: "open", base: base.revision, draft: isTouched(draft, base) ? draft : null });
  }, [draft, base, store, write]);

  const follow = useCallback(
    (entry: StoredDraft) => {
      known.current = entry;
      if (entry.base !== base.revision || entry.state === "saved") {
        onOtherBase();
        return;
      }
      const next = entry.draft ? (entry.draft as Draft) : cleanDraft(base.scenario);
      if (sameDraft(next, settled.current)) return;
      settled.current = next;
      act({ kind: "edit", edit: { kind: "replace", draft: next } });
      setNotice({ kind: "followed", at: entry.at });
      setStored(true);
    },
    [base, onOtherBase],
  );
  useEffect(() => store.listen((entry) => entry && follow(entry)), [store, follow]);

  // A tab that slept or came back from the browser's page cache has missed the others' writing.
  useEffect(() => {
    const wake = () => {
      const entry = store.read();
      if (document.visibilityState === "visible" && entry && !sameWriting(entry, known.current) && settled.current === draft) follow(entry);
    };
    document.addEventListener("visibilitychange", wake);
    window.addEventListener("pageshow", wake);
    return () => {
      document.removeEventListener("visibilitychange", wake);
      window.removeEventListener("pageshow", wake);
    };
  }, [store, follow, draft]);

  const touched = useMemo(() => isTouched(draft, base), [draft, base]);

  useEffect(() => {
    if (stored || !touched) return;
    const hold = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", hold);
    return () => window.removeEventListener("beforeunload", hold);
  }, [stored, touched]);

  return {
    base,
    draft,
    typingAt: history.typingAt,
    canUndo: history.past.length > 0,
    canRedo: history.future.length > 0,
    touched,
    stored,
    notice,
    edit: useCallback((edit: Edit) => act({ kind: "edit", edit }), []),
    endStep: useCallback(() => act({ kind: "end-step" }), []),
    undo: useCallback(() => act({ kind: "undo" }), []),
    redo: useCallback(() => act({ kind: "redo" }), []),
    dismissNotice: useCallback(() => setNotice(null), []),
    discard: useCallback(() => {
      act({ kind: "edit", edit: { kind: "replace", draft: cleanDraft(base.scenario) } });
      setNotice(null);
    }, [base]),
    takeOther: useCallback(() => {
      if (notice?.kind !== "split") return;
      setNotice(null);
      follow(notice.other);
    }, [notice, follow]),
    keepMine: useCallback(() => {
      setNotice(null);
      settled.current = draft;
      write({ state: "open", base: base.revision, draft: isTouched(draft, base) ? draft : null });
    }, [draft, base, write]),
    rebase: useCallback(
      (next: Base, onTop?: Draft) => {
        const kept = onTop ?? cleanDraft(next.scenario);
        setBase(next);
        setNotice(null);
        settled.current = kept;
        act({ kind: "edit", edit: { kind: "replace", draft: kept } });
        const open = isTouched(kept, next);
        write({ state: open ? "open" : "saved", base: next.revision, draft: open ? kept : null });
      },
      [write],
    ),
  };
}
