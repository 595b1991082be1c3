import type { ReactNode } from "react";
import { useMedia } from "#src/lib/use-media.ts";
import { Button } from "./button.tsx";
import { Icon } from "./icon.tsx";

/** A table that is wider than a phone scrolls by itself; then keys have to reach it. */
export function Scroller({ label, busy = false, children }: { label: string; busy?: boolean; children: ReactNode }) {
  const narrow = useMedia("(max-width: 719px)");
  return (
    <section className="scroll-x" aria-label={label} aria-busy={busy || undefined} tabIndex={narrow ? 0 : undefined}>
      {children}
    </section>
  );
}

export interface Sorting<Key extends string> {
  by: Key;
  direction: "ascending" | "descending";
}

interface SortHeadProps<Key extends string> {
  sortKey: Key;
  sorting: Sorting<Key>;
  /** Direction of the first press. */
  first?: Sorting<Key>["direction"];
  onSort: (sorting: Sorting<Key>) => void;
  right?: boolean;
  children: ReactNode;
}

export function SortHead<Key extends string>({ sortKey, sorting, first = "ascending", onSort, right, children }: SortHeadProps<Key>) {
  const chosen = sorting.by === sortKey;
  const turned = sorting.direction === "ascending" ? "descending" : "ascending";
  return (
    <th scope="col" className={right ? "r" : undefined} aria-sort={chosen ? sorting.direction : undefined}>
      <button type="button" onClick={() => onSort({ by: sortKey, direction: chosen ? turned : first })}>
        {children}
        {chosen && <Icon name="down" size={12} />}
      </button>
    </th>
  );
}

interface PagerProps {
  page: number;
  pageSize: number;
  total: number;
  onPage: (page: number) => void;
  /** The key to the marks, say. */
  children?: ReactNode;
}

export function Pager({ page, pageSize, total, onPage, children }: PagerProps) {
  const pages = Math.max(1, Math.ceil(total / pageSize));
  const first = Math.min((page - 1) * pageSize + 1, total);
  const last = Math.min(page * pageSize, total);
  return (
    <div className="pager">
      {children}
      <span className="rt">
        <span aria-live="polite">
          {first} to {last} of {total}
        </span>
        {pages > 1 && (
          <span className="flex gap-1.5">
            <Button small impossible={page <= 1 ? "This is the first page" : null} onClick={() => onPage(page - 1)}>
              Back
            </Button>
            <Button small impossible={page >= pages ? "This is the last page" : null} onClick={() => onPage(page + 1)}>
              Next
            </Button>
          </span>
        )}
      </span>
    </div>
  );
}
