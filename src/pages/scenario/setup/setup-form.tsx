import { type ReactNode, useCallback, useMemo, useRef } from "react";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { FieldIssue } from "../model/judge.ts";
import type { DraftControl } from "../use-draft.ts";
import { type Form, FormProvider, useForms, usePlaces } from "./form.tsx";
import { type Folds, FoldsProvider } from "./setup-section.tsx";

interface SetupFormProps {
  control: Pick<DraftControl, "draft" | "edit" | "endStep" | "undo" | "typingAt">;
  issues: readonly FieldIssue[];
  /** The last scenario that could be run. */
  good: Scenario | null;
  readOnly: boolean;
  folds: Folds;
  children: ReactNode;
}

/** Gives the fields below what they work on. */
export function SetupForm({ control, issues, good, readOnly, folds, children }: SetupFormProps) {
  const { draft, edit, endStep, undo } = control;
  const { place, placed } = usePlaces();
  const chooseForm = useForms(draft, good, edit);
  const typingAt = useRef(control.typingAt);
  typingAt.current = control.typingAt;
  const takeBack = useCallback(
    (path: string) => {
      if (typingAt.current === path) undo();
    },
    [undo],
  );
  const form: Form = useMemo(
    () => ({ draft, issues, readOnly, edit, endStep, takeBack, chooseForm, place, placed }),
    [draft, issues, readOnly, edit, endStep, takeBack, chooseForm, place, placed],
  );
  return (
    <FoldsProvider value={folds}>
      <FormProvider value={form}>{children}</FormProvider>
    </FoldsProvider>
  );
}
