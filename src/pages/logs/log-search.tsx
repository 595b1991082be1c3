import { useEffect, useState } from "react";
import { Icon } from "#src/components/ui/icon.tsx";
import type { ChangeLogList } from "./list-state.ts";

const PAUSE_MS = 250;

export function LogSearch({ search, change }: { search: string; change: ChangeLogList }) {
  const [text, setText] = useState(search);
  const [asked, setAsked] = useState(search);
  // "Back" or "Clear the search" changed the address, not the typing here: the box follows.
  if (search !== asked && text.trim() === asked) {
    setText(search);
    setAsked(search);
  }
  // Asked for when the typing pauses, not at every key.
  useEffect(() => {
    const wanted = text.trim();
    if (wanted === asked) return;
    const timer = setTimeout(() => {
      setAsked(wanted);
      change({ search: wanted }, true);
    }, PAUSE_MS);
    return () => clearTimeout(timer);
  }, [text, asked, change]);
  return (
    <div className="search">
      <Icon name="search" />
      <input
        type="search"
        className="box"
        aria-label="Search reception logs"
        placeholder="Search name, file or person"
        autoComplete="off"
        maxLength={200}
        value={text}
        onChange={(event) => setText(event.target.value)}
        onKeyDown={(event) => event.key === "Escape" && setText("")}
      />
    </div>
  );
}
