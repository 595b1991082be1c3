import { type ReactNode, useState } from "react";
import { Icon } from "./icon.tsx";

export interface SectionProps {
  title: string;
  /** What it comes to: read without opening it. */
  sum?: ReactNode;
  /** Something inside has to be put right. */
  bad?: boolean;
  defaultOpen?: boolean;
  open?: boolean;
  onOpenChange?: (open: boolean) => void;
  children: ReactNode;
  id?: string;
}

/** Folds; its content is in the page only while it is open, or was once. */
export function Section({ title, sum, bad = false, defaultOpen = false, open, onOpenChange, children, id }: SectionProps) {
  const [own, setOwn] = useState(defaultOpen);
  const isOpen = open ?? own;
  return (
    <details
      className="sect"
      id={id}
      open={isOpen}
      onToggle={(event) => {
        const next = event.currentTarget.open;
        if (next === isOpen) return;
        setOwn(next);
        onOpenChange?.(next);
      }}
    >
      <summary>
        <h2>{title}</h2>
        <span className={`sum ${bad ? "bad" : ""}`}>{sum}</span>
        <span className="chev">
          <Icon name="down" size={14} />
        </span>
      </summary>
      <div className="inner">{isOpen && children}</div>
    </details>
  );
}
