import { useCallback, useMemo, useState } from "react";
import { z } from "zod";
import { SECTION_IDS, type SectionId } from "../model/sections.ts";
import type { Folds } from "./setup-section.tsx";

const KEY = "holdfast.setup-open";
const FIRST: readonly SectionId[] = ["machine", "loop", "losses"];
const stored = z.array(z.enum(SECTION_IDS as [SectionId, ...SectionId[]]));

function remembered(): readonly SectionId[] {
  try {
    const parsed = stored.safeParse(JSON.parse(localStorage.getItem(KEY) ?? "null"));
    if (parsed.success) return parsed.data;
  } catch {
    // Nothing is remembered, then.
  }
  // Where set-up and bench lie one above the other, the set-up begins closed, so that both are seen.
  return window.matchMedia("(max-width: 1199px)").matches ? [] : FIRST;
}

/** Which sections are open; remembered for all scenarios of this browser. */
export function useFolds(): Folds {
  const [open, set] = useState<ReadonlySet<SectionId>>(() => new Set(remembered()));
  const setOpen = useCallback((id: SectionId, next: boolean) => {
    set((before) => {
      if (before.has(id) === next) return before;
      const now = new Set(before);
      if (next) now.add(id);
      else now.delete(id);
      try {
        localStorage.setItem(KEY, JSON.stringify([...now]));
      } catch {
        // Not remembered, then.
      }
      return now;
    });
  }, []);
  return useMemo(() => ({ open, setOpen }), [open, setOpen]);
}
