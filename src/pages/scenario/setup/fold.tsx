import { type KeyboardEvent, type ReactNode, useState } from "react";
import { Icon } from "#src/components/ui/icon.tsx";

interface FoldProps {
  title: ReactNode;
  sum?: ReactNode;
  bad?: boolean;
  defaultOpen?: boolean;
  open?: boolean;
  onOpenChange?: (open: boolean) => void;
  onKeyDown?: (event: KeyboardEvent<HTMLElement>) => void;
  children: ReactNode;
}

/** A part of a section that folds by itself: a list's entry, or a group of fields. */
export function Fold({ title, sum, bad = false, defaultOpen = false, open, onOpenChange, onKeyDown, children }: FoldProps) {
  const [own, setOwn] = useState(defaultOpen);
  const isOpen = open ?? own;
  return (
    <details
      className="su-fold"
      open={isOpen}
      onToggle={(event) => {
        const next = event.currentTarget.open;
        if (next === isOpen) return;
        setOwn(next);
        onOpenChange?.(next);
      }}
    >
      {/* biome-ignore lint/a11y/noStaticElementInteractions: a summary is a button by itself */}
      <summary onKeyDown={onKeyDown}>
        <span className="su-chev">
          <Icon name="right" size={12} />
        </span>
        <span className="su-name">{title}</span>
        {sum && <span className={bad ? "sum bad" : "sum"}>{sum}</span>}
      </summary>
      {isOpen && <div className="su-in">{children}</div>}
    </details>
  );
}
