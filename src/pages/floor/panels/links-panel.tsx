import { useMemo, useState } from "react";
import { crosses } from "#shared/network/geometry.ts";
import type { LinkRow } from "#shared/network/link-table.ts";
import type { Floor, FloorNode } from "#shared/scenario/floor-schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { SortHead, type Sorting } from "#src/components/ui/table.tsx";
import { download } from "#src/lib/download.ts";
import { counted, fixed, percentText } from "#src/lib/format.ts";
import { linkModelText } from "../model/floor-names.ts";

const HEARD = 0.05;
const FIRST_ROWS = 8;

/** "clear", "Rack 2", "2 walls, 1 block": what the straight line crosses, by name where there is one. */
export function betweenText(floor: Floor, a: FloorNode, b: FloorNode): string {
  const crossed = floor.obstacles.filter((one) => crosses(one, a.xM, a.yM, b.xM, b.yM));
  if (crossed.length === 0) return "clear";
  if (crossed.length === 1 && crossed[0].name) return crossed[0].name;
  const walls = crossed.filter(({ type }) => type === "wall").length;
  const blocks = crossed.length - walls;
  return [...(walls > 0 ? [counted(walls, "wall")] : []), ...(blocks > 0 ? [counted(blocks, "block")] : [])].join(", ");
}

/** Share as a strip that fills. */
export const ShareBar = ({ share }: { share: number }) => (
  <svg width="56" height="10" viewBox="0 0 56 10" aria-hidden="true" className="fl-bar">
    <rect x="0.5" y="2" width="55" height="6" className="neat" />
    <rect x="0.5" y="2" width={55 * share} height="6" className="fl-barf" />
  </svg>
);

/** 99.96 stays 99.96: what decides is how far it is from 100. */
export const prrText = (prr: number): string => fixed(prr * 100, prr > 0.999 && prr < 0.99995 ? 2 : 1);

type Column = "to" | "distance" | "signal" | "snr" | "received";
const VALUE: Record<Column, (row: LinkRow) => number> = {
  to: ({ to }) => to,
  distance: ({ distanceM }) => distanceM,
  signal: ({ budget }) => budget?.signalDbm ?? 0,
  snr: ({ budget }) => budget?.sinrDb ?? 0,
  received: ({ prr }) => prr,
};

interface LinksPanelProps {
  floor: Floor;
  node: FloorNode;
  links: readonly LinkRow[] | null;
  /** Why there are none. */
  missing: string | null;
  onNode: (id: number) => void;
}

/** Links from the selected node: who hears it, and why not. */
export function LinksPanel({ floor, node, links, missing, onNode }: LinksPanelProps) {
  const [sorting, setSorting] = useState<Sorting<Column>>({ by: "received", direction: "descending" });
  const [all, setAll] = useState(false);
  const own = useMemo(() => (links ?? []).filter(({ from }) => from === node.id), [links, node.id]);
  const heard = own.filter(({ prr }) => prr >= HEARD).length;
  const rows = useMemo(() => {
    const value = VALUE[sorting.by];
    const sign = sorting.direction === "ascending" ? 1 : -1;
    return own.toSorted(
      (a, b) => sign * (value(a) - value(b)) || (b.budget?.signalDbm ?? 0) - (a.budget?.signalDbm ?? 0) || a.distanceM - b.distanceM,
    );
  }, [own, sorting]);
  const shown = all ? rows : rows.slice(0, Math.max(FIRST_ROWS, sorting.by === "received" ? Math.min(heard, 12) : 0));
  const matrix = floor.links.type === "matrix";
  const byId = new Map(floor.nodes.map((one) => [one.id, one]));
  const interfered = floor.interferers.length > 0;
  return (
    <Section title={`Links of node ${node.id}`} sum={links ? `${heard} of ${own.length} above ${percentText(HEARD, 0)}` : undefined} defaultOpen>
      {!links ? (
        <p className="note second">{missing ?? "Links are computed …"}</p>
      ) : own.length === 0 ? (
        <p className="note second">There is no other node yet.</p>
      ) : (
        <>
          <div className="scroll-x">
            <table className="t fl-links">
              <thead>
                <tr>
                  <SortHead sortKey="to" sorting={sorting} onSort={setSorting}>
                    To
                  </SortHead>
                  <SortHead sortKey="distance" sorting={sorting} onSort={setSorting} right>
                    Distance, m
                  </SortHead>
                  <th scope="col">Between</th>
                  {!matrix && (
                    <>
                      <SortHead sortKey="signal" sorting={sorting} first="descending" onSort={setSorting} right>
                        Signal, dBm
                      </SortHead>
                      <SortHead sortKey="snr" sorting={sorting} first="descending" onSort={setSorting} right>
                        {interfered ? "SINR, dB" : "SNR, dB"}
                      </SortHead>
                    </>
                  )}
                  <SortHead sortKey="received" sorting={sorting} first="descending" onSort={setSorting} right>
                    Received, %
                  </SortHead>
                  <th>
                    <span className="vh">As a strip</span>
                  </th>
                </tr>
              </thead>
              <tbody>
                {shown.map((row) => {
                  const other = byId.get(row.to);
                  return (
                    <tr key={row.to}>
                      <th scope="row">
                        <button type="button" className="fl-to" onClick={() => onNode(row.to)}>
                          {row.to}
                        </button>
                        {other?.name && <span className="second"> {other.name}</span>}
                      </th>
                      <td className="r">{fixed(row.distanceM, 1)}</td>
                      <td className="second">{other ? betweenText(floor, node, other) : ""}</td>
                      {!matrix && (
                        <>
                          <td className="r">{row.budget ? fixed(row.budget.signalDbm, 1) : ""}</td>
                          <td className="r">{row.budget ? fixed(row.budget.sinrDb, 1) : ""}</td>
                        </>
                      )}
                      <td className="r strong">{prrText(row.prr)}</td>
                      <td className="r">
                        <ShareBar share={row.prr} />
                      </td>
                    </tr>
                  );
                })}
              </tbody>
            </table>
          </div>
          <div className="fl-line spread">
            <p className="note muted">
              {floor.links.type === "budget" ? linkModelText(floor.links, floor) : "Reception ratios as they were entered."}
            </p>
            {rows.length > shown.length || all ? (
              <Button small kind="bare" onClick={() => setAll(!all)}>
                {all ? "Fewer" : `All ${rows.length}`}
              </Button>
            ) : null}
          </div>
        </>
      )}
    </Section>
  );
}

/** Every link of the floor as a table of received shares: row sends, column receives. */
export function AllLinks({ floor, links, fileStem }: { floor: Floor; links: readonly LinkRow[] | null; fileStem: string }) {
  const byPair = useMemo(() => new Map((links ?? []).map((row) => [`${row.from} ${row.to}`, row])), [links]);
  if (!links || floor.nodes.length === 0) return null;
  const csv = () => {
    const head = "from,to,distance_m,obstacles,path_loss_db,obstacles_db,shadowing_db,signal_dbm,snr_db,sinr_db,received";
    const number = (value: number | undefined) => (value === undefined ? "" : Number(value.toPrecision(8)));
    const lines = links.map(({ from, to, distanceM, obstacles, budget, prr }) =>
      [
        from,
        to,
        number(distanceM),
        obstacles,
        number(budget?.pathLossDb),
        number(budget?.obstaclesDb),
        number(budget?.shadowingDb),
        number(budget?.signalDbm),
        number(budget?.snrDb),
        number(budget?.sinrDb),
        number(prr),
      ].join(","),
    );
    download(`${fileStem}-links.csv`, `${[head, ...lines].join("\n")}\n`, "text/csv;charset=utf-8");
  };
  return (
    <>
      {/* biome-ignore lint/a11y/noNoninteractiveTabindex: a table that scrolls has to be reached by keys */}
      <section className="scroll-x fl-matrix" aria-label="Received shares of all links" tabIndex={0}>
        <table className="t">
          <thead>
            <tr>
              <th scope="col">from \ to</th>
              {floor.nodes.map(({ id }) => (
                <th key={id} scope="col" className="r">
                  {id}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {floor.nodes.map(({ id }) => (
              <tr key={id}>
                <th scope="row">{id}</th>
                {floor.nodes.map(({ id: to }) => {
                  const row = byPair.get(`${id} ${to}`);
                  if (!row)
                    return (
                      <td key={to} className="r muted">
                        –
                      </td>
                    );
                  return (
                    <td key={to} className={row.prr >= 0.9 ? "r good" : row.prr >= HEARD ? "r" : "r muted"}>
                      {row.prr >= 0.9995 ? "100" : fixed(row.prr * 100, row.prr > 0.99 ? 1 : 0)}
                    </td>
                  );
                })}
              </tr>
            ))}
          </tbody>
        </table>
      </section>
      <div className="fl-line spread">
        <p className="note muted">
          Received, %: mean over fading, interferers on and off, and the channels in use, for the longest message of the round.
        </p>
        <Button small icon="export" onClick={csv}>
          Links as CSV
        </Button>
      </div>
    </>
  );
}
