import { type KeyboardEvent, useId, useMemo, useRef, useState } from "react";
import { wilson } from "#shared/math/statistics.ts";
import { type LinkTrace, linkName } from "#shared/reception/types.ts";
import { counted, countText } from "#shared/reception/words.ts";
import { niceStep } from "#src/components/plots/units.ts";
import { withUnit } from "#src/lib/format.ts";
import { lossText, rangeOfLoss } from "../model/log-words.ts";

const MANY = 12;

interface LinkListProps {
  links: readonly LinkTrace[];
  chosen: number;
  onChoose: (link: number) => void;
}

function targetOf(key: string, at: number, last: number): number | undefined {
  if (key === "ArrowDown") return at + 1;
  if (key === "ArrowUp") return at - 1;
  if (key === "Home") return 0;
  return key === "End" ? last : undefined;
}

/** All links with their share of losses and its interval on one scale; arrow keys go from one to the next. */
export function LinkList({ links, chosen, onChoose }: LinkListProps) {
  const [search, setSearch] = useState("");
  const searchId = useId();
  const list = useRef<HTMLUListElement>(null);
  const rows = useMemo(() => links.map((link, index) => ({ index, name: linkName(link), link, interval: wilson(link.lost, link.packets) })), [links]);
  const highest = Math.max(0.001, ...rows.map(({ interval }) => interval[1]));
  const step = niceStep(highest / 2);
  const top = Math.min(1, Math.ceil(highest / step - 1e-9) * step);
  const wanted = search.trim().toLowerCase();
  const shown = wanted ? rows.filter(({ name }) => name.toLowerCase().includes(wanted)) : rows;

  const onKeyDown = (event: KeyboardEvent) => {
    const buttons = [...(list.current?.querySelectorAll<HTMLButtonElement>("button") ?? [])];
    const at = buttons.indexOf(document.activeElement as HTMLButtonElement);
    const to = targetOf(event.key, at, buttons.length - 1);
    const target = to === undefined || at < 0 ? undefined : buttons[to];
    if (!target) return;
    event.preventDefault();
    target.focus();
    target.click();
  };

  return (
    <nav className="lg-links" aria-label="Links of the log">
      <div className="hrow">
        <h2>Links</h2>
        <span className="rt">{wanted ? `${shown.length} of ${links.length}` : "share lost, 95 % interval"}</span>
      </div>
      {links.length > MANY && (
        <>
          <label className="vh" htmlFor={searchId}>
            Search links
          </label>
          <input
            id={searchId}
            type="search"
            className="box"
            placeholder="Search links"
            autoComplete="off"
            value={search}
            onChange={(event) => setSearch(event.target.value)}
          />
        </>
      )}
      {shown.length === 0 && <p className="second py-2">No link is named like “{search.trim()}”.</p>}
      <ul ref={list} onKeyDown={onKeyDown}>
        {shown.map(({ index, name, link, interval: [low, high] }) => (
          <li key={name}>
            <button
              type="button"
              aria-current={index === chosen ? "true" : undefined}
              onClick={() => onChoose(index)}
              title={`${countText(link.lost)} of ${countText(link.packets)} packets lost; 95 % interval ${rangeOfLoss(low, high)}`}
            >
              <span className="name">{name}</span>
              <span className="share">{link.packets > 0 ? lossText(link.lost / link.packets) : "none"}</span>
              <IntervalBar ratio={link.packets > 0 ? link.lost / link.packets : 0} low={low} high={high} top={top} />
            </button>
          </li>
        ))}
      </ul>
      <p className="note second lg-scale" aria-hidden="true">
        <span>0</span>
        <span>{withUnit(String(Number((top * 100).toPrecision(3))), "%")}</span>
      </p>
      <p className="vh">{counted(links.length, "link")}</p>
    </nav>
  );
}

const WIDTH = 264;

/** The share as a notch on a line from 0 to the common top; the interval as a thick piece of it. */
function IntervalBar({ ratio, low, high, top }: { ratio: number; low: number; high: number; top: number }) {
  const xOf = (value: number) => 1 + (WIDTH - 2) * Math.min(1, value / top);
  return (
    <svg className="bar" viewBox={`0 0 ${WIDTH} 10`} preserveAspectRatio="none" aria-hidden="true" focusable="false">
      <path d={`M1 5H${WIDTH - 1}`} className="hair" />
      <rect x={xOf(low)} y="2.5" width={Math.max(1.5, xOf(high) - xOf(low))} height="5" className="lg-interval" />
      <rect x={xOf(ratio) - 1} y="0" width="2" height="10" className="cut" />
    </svg>
  );
}
