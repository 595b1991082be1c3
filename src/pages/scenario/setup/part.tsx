import type { ReactNode } from "react";
import { Fold } from "./fold.tsx";
import { sumOrIssues, useIssuesIn } from "./setup-section.tsx";

/** A group of fields inside a section. Closed, it says its sum, or how much is wrong inside. */
export function Part({ title, sum, owns, children }: { title: string; sum: string; owns: readonly string[]; children: ReactNode }) {
  const bad = useIssuesIn(...owns);
  return (
    <Fold title={title} sum={sumOrIssues(bad, sum)} bad={bad > 0}>
      {children}
    </Fold>
  );
}
