import { createContext, type ReactNode, useContext } from "react";
import { ProblemNote } from "#src/components/ui/field.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { isWithin } from "../model/json-path.ts";
import type { FieldIssue } from "../model/judge.ts";
import { type SectionId, sectionOf } from "../model/sections.ts";
import { asProblem } from "./fields.tsx";
import { useForm } from "./form.tsx";

export interface Folds {
  open: ReadonlySet<SectionId>;
  setOpen(id: SectionId, open: boolean): void;
}
const FoldsContext = createContext<Folds | null>(null);
export const FoldsProvider = FoldsContext;

function useFolds(): Folds {
  const folds = useContext(FoldsContext);
  if (!folds) throw new Error("SetupSection: no FoldsProvider above this component.");
  return folds;
}

const toPutRight = (count: number): string => `${count} to put right`;

/** A section of the set-up. Closed, it says its sum, or how much is wrong inside; open, it tells what no field of it can. */
export function SetupSection({ id, title, sum, children }: { id: SectionId; title: string; sum: string; children: ReactNode }) {
  const { issues, placed } = useForm();
  const { open, setOpen } = useFolds();
  const own = issues.filter((issue) => sectionOf(issue.path) === id);
  const homeless = own.filter((issue) => !placed.has(issue.path) && ![...placed].some((path) => issue.path.startsWith(`${path}[`)));
  return (
    <Section
      id={`setup-${id}`}
      title={title}
      sum={own.length > 0 && !open.has(id) ? toPutRight(own.length) : sum}
      bad={own.length > 0 && !open.has(id)}
      open={open.has(id)}
      onOpenChange={(next) => setOpen(id, next)}
    >
      {homeless.map((issue) => (
        <Homeless key={`${issue.path} ${issue.code}`} issue={issue} />
      ))}
      {children}
    </Section>
  );
}

const Homeless = ({ issue }: { issue: FieldIssue }) => {
  const problem = asProblem(issue);
  return problem && <ProblemNote problem={problem} />;
};

/** How many issues lie inside a folded part, for its mark. */
export function useIssuesIn(...outer: string[]): number {
  return useForm().issues.filter((issue) => outer.some((path) => isWithin(issue.path, path))).length;
}
export const sumOrIssues = (count: number, sum: string): string => (count > 0 ? toPutRight(count) : sum);
