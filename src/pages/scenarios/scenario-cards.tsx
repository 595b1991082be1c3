import { Link } from "react-router-dom";
import { SCENARIO_SORTS, type ScenarioListQuery } from "#shared/api/scenarios.ts";
import { paths } from "#src/app/paths.ts";
import { SmallRibbon } from "#src/components/drawings/small-ribbon.tsx";
import { Icon } from "#src/components/ui/icon.tsx";
import { VerdictCell } from "#src/components/ui/mark.tsx";
import { Menu, MenuChoices, MenuRule } from "#src/components/ui/menu.tsx";
import { msText, whenText } from "#src/lib/format.ts";
import { useNow } from "#src/lib/use-now.ts";
import { RowMenu } from "./row-menu.tsx";
import { aboutPlant, Delivered, type RowsProps } from "./scenario-table.tsx";

const SORT_WORDS: Record<ScenarioListQuery["sort"], string> = {
  name: "name",
  plant: "plant",
  period: "round period",
  delivery: "delivered",
  verdict: "verdict",
  owner: "owner",
  changed: "time of change",
};

/** The table on a phone: one entry below the other, with the same figures. */
export function ScenarioCards({ teamId, items, query, change, acts, waiting }: RowsProps) {
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
          options={SCENARIO_SORTS.map((value) => ({ value, word: SORT_WORDS[value] }))}
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
        {items.map((item) => {
          const to = paths.scenario(teamId, item.id);
          return (
            <li key={item.id}>
              <div className="flex items-start gap-2">
                <div className="min-w-0 flex-1">
                  <Link className="nm" to={to}>
                    {item.name}
                  </Link>
                  <span className="pl">{aboutPlant(item)}</span>
                </div>
                <span className="over-row">
                  <RowMenu item={item} to={to} acts={acts} />
                </span>
              </div>
              <VerdictCell verdict={item.verdict} />
              <div className="mt-1.5 flex items-center justify-between gap-3">
                <SmallRibbon timing={item.round} />
                <span className="r small">
                  <b className="strong">{msText(item.round.periodS)}</b>
                  <span className="pl">
                    delivered <Delivered item={item} />
                  </span>
                </span>
              </div>
              <p className="note second mt-1">
                {item.owner.name} · {whenText(item.changedAt, now)}
              </p>
            </li>
          );
        })}
      </ul>
    </>
  );
}
