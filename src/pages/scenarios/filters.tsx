import { type ReactNode, useEffect, useRef, useState } from "react";
import { VERDICTS } from "#shared/api/common.ts";
import { ARCHIVED, CHANGED_WITHIN, PLANT_LABELS, type ScenarioListQuery, type ScenarioListResponse } from "#shared/api/scenarios.ts";
import { Icon } from "#src/components/ui/icon.tsx";
import { Menu, MenuChoices } from "#src/components/ui/menu.tsx";
import type { ChangeList } from "./list-state.ts";
import { ARCHIVED_WORDS, CHANGED_WORDS, VERDICT_WORDS } from "./words.ts";

const PAUSE_MS = 250;
const ANY = "any";

interface FilterProps<Value extends string> {
  name: string;
  any?: string;
  options: readonly { value: Value; word: string }[];
  value: Value | undefined;
  onChoose: (value: Value | undefined) => void;
}

/** "Plant any v": name, what is chosen, and the list behind it. */
function Filter<Value extends string>({ name, any, options, value, onChoose }: FilterProps<Value>) {
  const all = any === undefined ? options : [{ value: ANY as Value, word: any }, ...options];
  const chosen = value ?? (ANY as Value);
  return (
    <Menu
      align="start"
      trigger={
        <button type="button" className="flt">
          {name} <b>{all.find((option) => option.value === chosen)?.word ?? any}</b>
          <Icon name="down" size={12} />
        </button>
      }
    >
      <MenuChoices options={all} value={chosen} onChoose={(next) => onChoose(any !== undefined && next === ANY ? undefined : next)} />
    </Menu>
  );
}

const lower = (word: string) => word.charAt(0).toLowerCase() + word.slice(1);

interface FiltersProps {
  query: ScenarioListQuery;
  change: ChangeList;
  list: ScenarioListResponse | undefined;
  /** How many there are, at the end of the line. */
  children: ReactNode;
}

export function Filters({ query, change, list, children }: FiltersProps) {
  return (
    <div className="filters">
      <Search query={query} change={change} />
      <Filter
        name="Plant"
        any="any"
        options={(list?.plants ?? []).map((value) => ({ value, word: lower(PLANT_LABELS[value]) }))}
        value={query.plant}
        onChoose={(plant) => change({ plant })}
      />
      <Filter
        name="Verdict"
        any="any"
        options={VERDICTS.map((value) => ({ value, word: VERDICT_WORDS[value] }))}
        value={query.verdict}
        onChoose={(verdict) => change({ verdict })}
      />
      <Filter
        name="Owner"
        any="anyone"
        options={(list?.owners ?? []).map(({ id, name }) => ({ value: id, word: name }))}
        value={query.owner}
        onChoose={(owner) => change({ owner })}
      />
      <Filter
        name="Changed"
        options={CHANGED_WITHIN.map((value) => ({ value, word: CHANGED_WORDS[value] }))}
        value={query.changed}
        onChoose={(changed) => change({ changed })}
      />
      <Filter
        name="Archived"
        options={ARCHIVED.map((value) => ({ value, word: ARCHIVED_WORDS[value] }))}
        value={query.archived}
        onChoose={(archived) => change({ archived })}
      />
      <span className="rt small" aria-live="polite">
        {children}
      </span>
    </div>
  );
}

const isTyping = (target: EventTarget | null) =>
  target instanceof HTMLElement && (target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName));

function Search({ query, change }: { query: ScenarioListQuery; change: ChangeList }) {
  const box = useRef<HTMLInputElement>(null);
  const [text, setText] = useState(query.search);
  const [asked, setAsked] = useState(query.search);
  const [known, setKnown] = useState(query.search);

  // "Back" or "Clear the filter" changed the address, not the typing here: the box follows.
  if (query.search !== known) {
    setKnown(query.search);
    if (query.search !== asked) {
      setText(query.search);
      setAsked(query.search);
    }
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

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key !== "/" || event.ctrlKey || event.metaKey || event.altKey || isTyping(event.target) || document.querySelector("[role=dialog]"))
        return;
      event.preventDefault();
      box.current?.focus();
      box.current?.select();
    };
    document.addEventListener("keydown", onKey);
    return () => document.removeEventListener("keydown", onKey);
  }, []);

  return (
    <div className="search">
      <Icon name="search" />
      <input
        ref={box}
        type="search"
        className="box"
        aria-label="Search scenarios"
        aria-keyshortcuts="/"
        placeholder="Search scenarios"
        autoComplete="off"
        maxLength={200}
        value={text}
        onChange={(event) => setText(event.target.value)}
        onKeyDown={(event) => event.key === "Escape" && setText("")}
      />
      {text === "" && <kbd>/</kbd>}
    </div>
  );
}
