import { Link } from "react-router-dom";
import { PLANT_LABELS, type ScenarioItem, type ScenarioListQuery } from "#shared/api/scenarios.ts";
import { paths } from "#src/app/paths.ts";
import { SmallRibbon } from "#src/components/drawings/small-ribbon.tsx";
import { VerdictCell } from "#src/components/ui/mark.tsx";
import { SortHead, type Sorting } from "#src/components/ui/table.tsx";
import { instantText, msText, percentText, whenText } from "#src/lib/format.ts";
import { useNow } from "#src/lib/use-now.ts";
import type { ChangeList } from "./list-state.ts";
import { RowMenu } from "./row-menu.tsx";
import type { ScenarioActs } from "./use-scenario-acts.ts";

export interface RowsProps {
  teamId: string;
  items: readonly ScenarioItem[];
  query: ScenarioListQuery;
  change: ChangeList;
  acts: ScenarioActs;
  /** The rows of the question before, while the new ones are on their way. */
  waiting: boolean;
}

export const Delivered = ({ item }: { item: ScenarioItem }) =>
  item.delivery && item.delivery.ratio !== null ? (
    <span title={`${item.delivery.sent - item.delivery.lost} of ${item.delivery.sent} messages in the latest run`}>
      {percentText(item.delivery.ratio)}
    </span>
  ) : (
    <span className="muted">{item.delivery ? "none sent" : "none yet"}</span>
  );

export const aboutPlant = (item: ScenarioItem): string =>
  `${PLANT_LABELS[item.plant.kind]} · revision ${item.revision}${item.archivedAt ? " · archived" : ""}`;

export function ScenarioTable({ teamId, items, query, change, acts, waiting }: RowsProps) {
  const now = useNow();
  const sorting: Sorting<ScenarioListQuery["sort"]> = { by: query.sort, direction: query.direction };
  const head = { sorting, onSort: ({ by, direction }: typeof sorting) => change({ sort: by, direction }) };
  return (
    <div className="scroll-x" aria-busy={waiting || undefined}>
      <table className="t home">
        <thead>
          <tr>
            <SortHead sortKey="name" {...head}>
              Scenario
            </SortHead>
            <SortHead sortKey="period" right {...head}>
              Round
            </SortHead>
            <th scope="col" className="light">
              slots, compute, reserve
            </th>
            <SortHead sortKey="delivery" right first="descending" {...head}>
              Delivered
            </SortHead>
            <SortHead sortKey="verdict" {...head}>
              Latest verdict
            </SortHead>
            <SortHead sortKey="owner" {...head}>
              Owner
            </SortHead>
            <SortHead sortKey="changed" right first="descending" {...head}>
              Changed
            </SortHead>
            <th scope="col">
              <span className="vh">More</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {items.map((item) => {
            const to = paths.scenario(teamId, item.id);
            return (
              <tr key={item.id}>
                <td>
                  <Link className="nm" to={to}>
                    {item.name}
                  </Link>
                  <span className="pl">{aboutPlant(item)}</span>
                </td>
                <td className="r strong nw text-body">{msText(item.round.periodS)}</td>
                <td className="rib">
                  <SmallRibbon timing={item.round} />
                </td>
                <td className="r nw">
                  <Delivered item={item} />
                </td>
                <td className="said" title={item.verdict.sentence}>
                  <VerdictCell verdict={item.verdict} />
                </td>
                <td className="nw">{item.owner.name}</td>
                <td className="r nw" title={instantText(item.changedAt)}>
                  {whenText(item.changedAt, now)}
                </td>
                <td className="r over-row">
                  <RowMenu item={item} to={to} acts={acts} />
                </td>
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}
