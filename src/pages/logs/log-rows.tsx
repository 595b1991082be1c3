import { Link } from "react-router-dom";
import { LOG_SORTS, type LogItem, type LogListQuery, type LogSort } from "#shared/api/logs.ts";
import { counted, countText, durationText } from "#shared/reception/words.ts";
import { paths } from "#src/app/paths.ts";
import { Icon } from "#src/components/ui/icon.tsx";
import { Mark } from "#src/components/ui/mark.tsx";
import { Menu, MenuChoices, MenuRule } from "#src/components/ui/menu.tsx";
import { SortHead, type Sorting } from "#src/components/ui/table.tsx";
import { bytesText, instantText, whenText } from "#src/lib/format.ts";
import { useNow } from "#src/lib/use-now.ts";
import type { ChangeLogList } from "./list-state.ts";
import { lossText } from "./model/log-words.ts";
import { shortVerdict } from "./model/verdict.ts";

interface LogRowsProps {
  teamId: string;
  items: readonly LogItem[];
  query: LogListQuery;
  change: ChangeLogList;
  /** The rows of the question before, while the new ones are on their way. */
  waiting: boolean;
}

const lossOf = ({ lost, packets }: LogItem): string => (packets > 0 ? lossText(lost / packets) : "none");
/** Logs kept before their lists said more have neither pace nor verdicts here. */
const paceText = ({ intervalS, verdicts }: LogItem): string => (intervalS !== null ? durationText(intervalS) : verdicts === null ? "–" : "not known");
const usedText = ({ scenarios }: LogItem): string => (scenarios === 0 ? "not used" : `in ${counted(scenarios, "scenario")}`);
const troubleText = ({ troubles }: LogItem): string => (troubles === 0 ? "read without a remark" : counted(troubles, "remark"));

function LossVerdict({ item }: { item: LogItem }) {
  const verdict = shortVerdict(item);
  if (!verdict) return <span className="muted">open it to see</span>;
  return (
    <span className="vd">
      <Mark state={verdict.state} quiet />
      <span>{verdict.words}</span>
    </span>
  );
}

export function LogTable({ teamId, items, query, change, waiting }: LogRowsProps) {
  const now = useNow();
  const sorting: Sorting<LogSort> = { by: query.sort, direction: query.direction };
  const head = { sorting, onSort: ({ by, direction }: typeof sorting) => change({ sort: by, direction }) };
  return (
    <div className="scroll-x" aria-busy={waiting || undefined}>
      <table className="t home logs">
        <thead>
          <tr>
            <SortHead sortKey="name" {...head}>
              Reception log
            </SortHead>
            <SortHead sortKey="links" right first="descending" {...head}>
              Links
            </SortHead>
            <SortHead sortKey="packets" right first="descending" {...head}>
              Packets
            </SortHead>
            <SortHead sortKey="loss" right first="descending" {...head}>
              Lost
            </SortHead>
            <th scope="col" className="r">
              One packet every
            </th>
            <th scope="col">Losses</th>
            <th scope="col">Reading</th>
            <SortHead sortKey="used" first="descending" {...head}>
              Used
            </SortHead>
            <SortHead sortKey="author" {...head}>
              Uploaded by
            </SortHead>
            <SortHead sortKey="uploaded" right first="descending" {...head}>
              When
            </SortHead>
          </tr>
        </thead>
        <tbody>
          {items.map((item) => (
            <tr key={item.id}>
              <td>
                <Link className="nm" to={paths.log(teamId, item.id)}>
                  {item.name}
                </Link>
                <span className="pl">
                  {item.fileName && `${item.fileName}, `}
                  {bytesText(item.bytes)}
                </span>
              </td>
              <td className="r">{countText(item.links)}</td>
              <td className="r nw">{countText(item.packets)}</td>
              <td className="r nw strong text-body">{lossOf(item)}</td>
              <td className="r nw">{paceText(item)}</td>
              <td>
                <LossVerdict item={item} />
              </td>
              <td className="nw">{troubleText(item)}</td>
              <td className="nw">{item.scenarios === 0 ? <span className="muted">not used</span> : usedText(item)}</td>
              <td className="nw">{item.author.name}</td>
              <td className="r nw" title={instantText(item.uploadedAt)}>
                {whenText(item.uploadedAt, now)}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

const SORT_WORDS: Record<LogSort, string> = {
  name: "name",
  author: "person",
  uploaded: "time of upload",
  size: "size",
  links: "links",
  packets: "packets",
  loss: "share lost",
  used: "use",
};

/** The table on a phone: one entry below the other, with the same figures. */
export function LogCards({ teamId, items, query, change, waiting }: LogRowsProps) {
  const now = useNow();
  return (
    <>
      <Menu
        align="start"
        trigger={
          <button type="button" className="flt">
            Sorted by <b>{SORT_WORDS[query.sort]}</b> {query.direction}
            <Icon name="down" size={12} />
          </button>
        }
      >
        <MenuChoices
          options={LOG_SORTS.map((value) => ({ value, word: SORT_WORDS[value] }))}
          value={query.sort}
          onChoose={(sort) => change({ sort })}
        />
        <MenuRule />
        <MenuChoices
          options={(["ascending", "descending"] as const).map((value) => ({ value, word: value }))}
          value={query.direction}
          onChoose={(direction) => change({ direction })}
        />
      </Menu>
      <ul className="cards" aria-busy={waiting || undefined}>
        {items.map((item) => (
          <li key={item.id}>
            <Link className="nm" to={paths.log(teamId, item.id)}>
              {item.name}
            </Link>
            <p className="small">
              <b className="strong">{lossOf(item)}</b> of {countText(item.packets)} packets lost, {counted(item.links, "link")}, one packet each{" "}
              {paceText(item)}
            </p>
            <p className="small">
              <LossVerdict item={item} />
            </p>
            <p className="note second">
              {troubleText(item)} · {usedText(item)}
            </p>
            <p className="note second">
              {item.author.name} · {whenText(item.uploadedAt, now)}
            </p>
          </li>
        ))}
      </ul>
    </>
  );
}
