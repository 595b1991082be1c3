import { type KeyboardEvent, type ReactNode, useRef, useState } from "react";
import { pathText } from "#shared/scenario/parse.ts";
import { Button, IconButton } from "#src/components/ui/button.tsx";
import { ProblemNote } from "#src/components/ui/field.tsx";
import type { Edit } from "../model/draft.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { append, duplicate, move, remove } from "../model/list-edits.ts";
import { asProblem } from "./fields.tsx";
import { Fold } from "./fold.tsx";
import { useForm, useIssue } from "./form.tsx";
import { sumOrIssues, useIssuesIn } from "./setup-section.tsx";

interface EntryListProps {
  path: Path;
  /** One entry: "push". */
  noun: string;
  /** All of an entry in a few words. */
  say: (index: number) => string;
  /** What a new entry begins with. */
  first: () => unknown;
  /** Said when there are none. */
  none?: string;
  ordered?: boolean;
  copies?: boolean;
  /** Entries with an id of their own: what a copy is. */
  copyOf?: (entry: unknown) => unknown;
  /** Fewest and most entries. */
  least?: number;
  most: number;
  /** Lists whose entries have company elsewhere bring their own edits. */
  edits?: { add?: () => Edit; remove?: (index: number) => Edit; move?: (from: number, to: number) => Edit };
  addWord?: string;
  children: (index: number, path: Path) => ReactNode;
}

/** A list of the set-up: entries fold; they are added, copied, removed and, where the order matters, moved by keyboard too. */
export function EntryList(props: EntryListProps) {
  const { path, noun, first, none, ordered = false, copies = false, copyOf, least = 0, most, edits, addWord } = props;
  const { draft, edit, readOnly } = useForm();
  const issue = useIssue(path);
  const box = useRef<HTMLDivElement>(null);
  const [open, setOpen] = useState<ReadonlySet<number>>(new Set());
  const value = getAt(draft.json, path);
  const count = Array.isArray(value) ? value.length : 0;

  /** After the edit is on the screen. */
  const focusAt = (index: number, what: "summary" | "input") =>
    requestAnimationFrame(() => {
      const entry = box.current?.querySelectorAll<HTMLElement>(":scope > .su-entry")[index];
      const target =
        what === "input" ? entry?.querySelector<HTMLElement>(".su-in input, .su-in select") : entry?.querySelector<HTMLElement>("summary");
      (target ?? box.current?.querySelector<HTMLElement>(":scope > .su-add"))?.focus();
    });
  const shift = (map: (index: number) => number | null) =>
    setOpen((before) => new Set([...before].map(map).filter((index): index is number => index !== null)));

  const add = () => {
    edit(edits?.add?.() ?? append(draft.json, path, first()));
    setOpen((before) => new Set([...before, count]));
    focusAt(count, "input");
  };
  const copy = (index: number) => {
    edit(duplicate(draft.json, path, index, copyOf));
    shift((at) => (at > index ? at + 1 : at));
    setOpen((before) => new Set([...before, index + 1]));
    focusAt(index + 1, "input");
  };
  const take = (index: number) => {
    edit(edits?.remove?.(index) ?? remove(draft.json, path, index));
    shift((at) => (at === index ? null : at > index ? at - 1 : at));
    focusAt(Math.min(index, count - 2), "summary");
  };
  const carry = (index: number, to: number) => {
    if (to < 0 || to >= count) return;
    edit(edits?.move?.(index, to) ?? move(draft.json, path, index, to));
    shift((at) => (at === index ? to : at === to ? index : at));
    focusAt(to, "summary");
  };
  const onKeyDown = (index: number) => (event: KeyboardEvent) => {
    if (!ordered || readOnly || !event.altKey || (event.key !== "ArrowUp" && event.key !== "ArrowDown")) return;
    event.preventDefault();
    carry(index, index + (event.key === "ArrowUp" ? -1 : 1));
  };

  const problem = asProblem(issue);
  return (
    <div ref={box} className="su-list">
      {problem && <ProblemNote problem={problem} />}
      {count === 0 && none && <p className="note second py-1">{none}</p>}
      {Array.from({ length: count }, (_, index) => (
        <EntryView
          // biome-ignore lint/suspicious/noArrayIndexKey: entries of the format have no identity of their own
          key={index}
          {...props}
          index={index}
          isOpen={open.has(index)}
          onOpenChange={(next) => setOpen((before) => (next ? new Set([...before, index]) : new Set([...before].filter((at) => at !== index))))}
          onKeyDown={onKeyDown(index)}
          acts={
            readOnly ? null : (
              <div className="su-acts">
                {ordered && (
                  <>
                    <IconButton
                      small
                      kind="bare"
                      icon="up"
                      iconSize={14}
                      label={`Move ${noun} ${index + 1} up (Alt and arrow up)`}
                      impossible={index === 0 ? "It is the first." : null}
                      onClick={() => carry(index, index - 1)}
                    />
                    <IconButton
                      small
                      kind="bare"
                      icon="down"
                      iconSize={14}
                      label={`Move ${noun} ${index + 1} down (Alt and arrow down)`}
                      impossible={index === count - 1 ? "It is the last." : null}
                      onClick={() => carry(index, index + 1)}
                    />
                  </>
                )}
                <span className="ml-auto" />
                {copies && (
                  <Button
                    small
                    kind="bare"
                    impossible={count >= most ? `At most ${most}.` : null}
                    onClick={() => copy(index)}
                    aria-label={`Duplicate ${noun} ${index + 1}`}
                  >
                    Duplicate
                  </Button>
                )}
                <Button small kind="bare" impossible={count <= least ? `At least ${least} ${noun} is needed.` : null} onClick={() => take(index)}>
                  Remove {noun}
                </Button>
              </div>
            )
          }
        />
      ))}
      {!readOnly && (
        <Button small icon="plus" className="su-add" impossible={count >= most ? `At most ${most}.` : null} onClick={add}>
          {addWord ?? `Add ${/^[aeiou]/.test(noun) ? "an" : "a"} ${noun}`}
        </Button>
      )}
    </div>
  );
}

interface EntryViewProps extends EntryListProps {
  index: number;
  isOpen: boolean;
  onOpenChange: (open: boolean) => void;
  onKeyDown: (event: KeyboardEvent) => void;
  acts: ReactNode;
}

function EntryView({ path, say, index, isOpen, onOpenChange, onKeyDown, acts, children }: EntryViewProps) {
  const bad = useIssuesIn(pathText([...path, index]));
  return (
    <div className="su-entry">
      <Fold
        title={say(index)}
        sum={isOpen ? undefined : sumOrIssues(bad, "") || undefined}
        bad={bad > 0}
        open={isOpen}
        onOpenChange={onOpenChange}
        onKeyDown={onKeyDown}
      >
        {children(index, [...path, index])}
        {acts}
      </Fold>
    </div>
  );
}
