import { useMemo, useState } from "react";
import type { Advice } from "#shared/network/advice.ts";
import type { FloodSurvey, SurveyedSlot } from "#shared/network/survey.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Choice } from "#src/components/ui/choice.tsx";
import { Mark, type MarkState } from "#src/components/ui/mark.tsx";
import { Scroller, SortHead, type Sorting } from "#src/components/ui/table.tsx";
import { Tell } from "#src/components/ui/tell.tsx";
import { counted, countText, fixed, percentText, significant, withUnit } from "#src/lib/format.ts";
import { type RoleAt, roleText } from "./model/floor-names.ts";

export interface SurveyControl {
  survey: FloodSurvey | null;
  /** The floor is another one than the one that was surveyed. */
  stale: boolean;
  /** 0 to 1 while one is under way. */
  share: number | null;
  broken: boolean;
  run(rounds: number): void;
  cancel(): void;
}

interface SurveySheetProps {
  control: SurveyControl;
  floor: Floor;
  roles: ReadonlyMap<number, readonly RoleAt[]>;
  slotId: string;
  impossible: string | null;
  readOnly: boolean;
  /** Weak nodes are marked on the plan. */
  onPlan: boolean;
  onOnPlan: (on: boolean) => void;
  onNode: (id: number) => void;
  onApply: (advice: Advice) => void;
}

const ROUNDS = ["2000", "20000", "100000"] as const;
type Rounds = (typeof ROUNDS)[number];

export function SurveySheet(props: SurveySheetProps) {
  const { control, floor, roles, slotId, impossible, readOnly, onPlan, onOnPlan, onNode, onApply } = props;
  const { survey, stale, share, broken } = control;
  const [rounds, setRounds] = useState<Rounds>("2000");
  const slot = survey?.slots.find(({ id }) => id === slotId) ?? survey?.slots[0];
  return (
    <section className="sheet doc fl-below" aria-label="Survey" aria-busy={share !== null || undefined}>
      <div className="pad">
        <div className="hrow">
          <h2>Survey</h2>
          <span className="rt">Every flood of so many rounds drawn, and counted node by node</span>
        </div>
        <div className="fl-line wrap">
          <Choice
            label="Rounds"
            options={ROUNDS.map((value) => ({ value, word: countText(Number(value)) }))}
            value={rounds}
            onChoose={setRounds}
            disabled={share !== null}
          />
          <span className="second small">rounds</span>
          {share === null ? (
            <Button small impossible={impossible} onClick={() => control.run(Number(rounds))}>
              {survey ? "Survey again" : "Survey the floor"}
            </Button>
          ) : (
            <span className="bench-progress" role="status">
              <progress max={1} value={share} aria-label="Progress of the survey" />
              <span className="num small">{percentText(share, 0)}</span>
              <Button small onClick={control.cancel}>
                Stop
              </Button>
            </span>
          )}
          {survey && (
            <label className="fl-check">
              <input type="checkbox" checked={onPlan} onChange={(event) => onOnPlan(event.target.checked)} /> received shares on the plan
            </label>
          )}
        </div>
        {broken && <Tell>The survey broke off: the engine stopped. Nothing that you entered is lost; survey again.</Tell>}
        {!survey && share === null && !broken && (
          <p className="second fl-lead">
            {impossible ??
              "How deep is each node, how much does it receive, what does that cost its battery, and what would help? Figures come with 95 % intervals; surveying changes nothing."}
          </p>
        )}
        {survey && stale && <Tell calm>The scenario has changed since this survey; the figures below are of what it was.</Tell>}
        {survey && slot && (
          <>
            <AdviceList advice={survey.advice} readOnly={readOnly} stale={stale} onNode={onNode} onApply={onApply} />
            <SlotFigures survey={survey} />
            <NodeFigures survey={survey} slot={slot} floor={floor} roles={roles} onNode={onNode} />
          </>
        )}
      </div>
    </section>
  );
}

const MARKS: Record<Advice["severity"], MarkState> = { problem: "crosses", warning: "near", hint: "not-decided" };

function AdviceList({
  advice,
  readOnly,
  stale,
  onNode,
  onApply,
}: {
  advice: readonly Advice[];
  readOnly: boolean;
  stale: boolean;
  onNode: (id: number) => void;
  onApply: (advice: Advice) => void;
}) {
  if (advice.length === 0)
    return (
      <p className="verdict fl-advice-none">
        <Mark state="holds" size={16} />
        <span>Every message reaches everybody who needs it; there is nothing to advise.</span>
      </p>
    );
  return (
    <ul className="fl-advice" aria-label="Advice">
      {advice.map((one) => (
        <li key={one.text}>
          <Mark state={MARKS[one.severity]} size={16} quiet />
          <div>
            <p>
              <span className="vh">{one.severity}: </span>
              {one.text}
            </p>
            {one.figures.length > 0 && (
              <p className="note second">{one.figures.map(({ label, value, unit }) => `${label} ${figureText(value, unit)}`).join(" · ")}</p>
            )}
          </div>
          <span className="fl-advice-acts">
            {one.nodes.slice(0, 3).map((id) => (
              <Button key={id} small kind="bare" onClick={() => onNode(id)}>
                Node {id}
              </Button>
            ))}
            {one.edits.length > 0 && !readOnly && (
              <Button small impossible={stale ? "The scenario has changed since: survey again." : null} onClick={() => onApply(one)}>
                Apply
              </Button>
            )}
          </span>
        </li>
      ))}
    </ul>
  );
}

/** Shares and counts come without a unit: what is at most 1 and no whole number is a share. */
function figureText(value: number, unit: string): string {
  if (unit === "s") return withUnit(significant(value * 1000, 3), "ms");
  if (unit !== "") return withUnit(Number.isInteger(value) ? fixed(value, 0) : significant(value, 3), unit);
  return value > 0 && value < 1 ? percentText(value, value > 0.99 ? 3 : 1) : significant(value, 4);
}

const ratioText = (ratio: number): string => fixed(ratio * 100, ratio > 0.999 && ratio < 1 ? 3 : 2);
/** "99.81 to 99.97" */
const intervalText = (lo: number, hi: number): string => `${ratioText(lo)} to ${ratioText(hi)}`;

function SlotFigures({ survey }: { survey: FloodSurvey }) {
  return (
    <Scroller label="Delivery of each message">
      <table className="t fl-tab">
        <thead>
          <tr>
            <th scope="col">Message</th>
            <th scope="col">From</th>
            <th scope="col" className="r">
              Floods
            </th>
            <th scope="col" className="r">
              Delivered, %
            </th>
            <th scope="col" className="r">
              95 % interval, %
            </th>
          </tr>
        </thead>
        <tbody>
          {survey.slots.map((slot) => (
            <tr key={slot.id}>
              <th scope="row">{slot.label}</th>
              <td>{slot.from ?? "–"}</td>
              <td className="r">{countText(slot.floods)}</td>
              <td className="r strong">{ratioText(slot.delivered.ratio)}</td>
              <td className="r second">{intervalText(slot.delivered.lo, slot.delivered.hi)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </Scroller>
  );
}

type Column = "node" | "hops" | "received" | "lower" | "beacon" | "on" | "charge" | "battery";

interface Row {
  node: number;
  name: string;
  needed: boolean;
  starts: boolean;
  medianStep: number | null;
  ratio: number | null;
  lo: number;
  hi: number;
  beacon: number | null;
  onS: number;
  chargeC: number;
  batteryDays: number | null;
}

const VALUE: Record<Column, (row: Row) => number> = {
  node: ({ node }) => node,
  hops: ({ medianStep, starts }) => (starts ? 0 : (medianStep ?? 999)),
  received: ({ ratio }) => ratio ?? 2,
  lower: ({ lo, ratio }) => (ratio === null ? 2 : lo),
  beacon: ({ beacon }) => beacon ?? 2,
  on: ({ onS }) => onS,
  charge: ({ chargeC }) => chargeC,
  battery: ({ batteryDays }) => batteryDays ?? Number.POSITIVE_INFINITY,
};

export function batteryText(days: number | null): string {
  if (days === null || !Number.isFinite(days)) return "no limit";
  if (days >= 730) return withUnit(fixed(days / 365.25, 1), "years");
  return days >= 2 ? withUnit(fixed(days, 0), "days") : withUnit(fixed(days * 24, 1), "h");
}

function NodeFigures({
  survey,
  slot,
  floor,
  roles,
  onNode,
}: {
  survey: FloodSurvey;
  slot: SurveyedSlot;
  floor: Floor;
  roles: ReadonlyMap<number, readonly RoleAt[]>;
  onNode: (id: number) => void;
}) {
  const [sorting, setSorting] = useState<Sorting<Column>>({ by: "node", direction: "ascending" });
  const rows = useMemo(() => {
    const byNode = new Map(slot.nodes.map((one) => [one.node, one]));
    return survey.nodes.map(({ node, name, radioOnS, chargeC, batteryDays, beaconRatio }): Row => {
      const got = byNode.get(node);
      return {
        node,
        name,
        needed: got?.needed ?? false,
        starts: node === slot.from,
        medianStep: got?.medianStep ?? null,
        ratio: got ? got.ratio : null,
        lo: got?.lo ?? 0,
        hi: got?.hi ?? 1,
        beacon: beaconRatio,
        onS: radioOnS,
        chargeC,
        batteryDays,
      };
    });
  }, [survey, slot]);
  const sorted = useMemo(() => {
    const value = VALUE[sorting.by];
    const sign = sorting.direction === "ascending" ? 1 : -1;
    return rows.toSorted((a, b) => sign * (value(a) - value(b)) || a.node - b.node);
  }, [rows, sorting]);
  const head = { sorting, onSort: setSorting };
  const beacons = rows.some(({ beacon }) => beacon !== null);
  return (
    <>
      <p className="sub3 fl-tab-name">
        {slot.label} at every node, {countText(slot.floods)} floods; radio and battery over the whole round. Another message: choose its slot above.
      </p>
      <Scroller label={`${slot.label} at every node`}>
        <table className="t fl-tab">
          <thead>
            <tr>
              <SortHead sortKey="node" {...head}>
                Node
              </SortHead>
              <th scope="col">Runs</th>
              <SortHead sortKey="hops" right {...head}>
                Half by step
              </SortHead>
              <SortHead sortKey="received" right {...head}>
                Received, %
              </SortHead>
              <SortHead sortKey="lower" right {...head}>
                95 % interval, %
              </SortHead>
              {beacons && (
                <SortHead sortKey="beacon" right {...head}>
                  Beacons, %
                </SortHead>
              )}
              <SortHead sortKey="on" first="descending" right {...head}>
                Radio on, ms a round
              </SortHead>
              <SortHead sortKey="charge" first="descending" right {...head}>
                Charge, µC a round
              </SortHead>
              <SortHead sortKey="battery" right {...head}>
                Battery
              </SortHead>
            </tr>
          </thead>
          <tbody>
            {sorted.map((row) => (
              <tr key={row.node}>
                <th scope="row">
                  <button type="button" className="fl-to" onClick={() => onNode(row.node)}>
                    {row.node}
                  </button>
                  {row.name && <span className="second"> {row.name}</span>}
                </th>
                <td className="second">{roleText(roles.get(row.node))}</td>
                <td className="r">{row.starts ? "starts it" : (row.medianStep ?? "never")}</td>
                <td className={`r strong ${row.needed && row.ratio !== null && row.ratio < 0.999 ? "coral" : ""}`}>
                  {row.ratio === null ? "–" : ratioText(row.ratio)}
                </td>
                <td className="r second">{row.ratio === null ? "–" : intervalText(row.lo, row.hi)}</td>
                {beacons && <td className="r">{row.beacon === null ? "–" : ratioText(row.beacon)}</td>}
                <td className="r">{fixed(row.onS * 1000, 2)}</td>
                <td className="r">{significant(row.chargeC * 1e6, 3)}</td>
                <td className="r nw">{batteryText(row.batteryDays)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroller>
      <p className="note muted">
        Half by step: the step by which half of all floods have arrived, its distance in hops where links are good. Intervals after Clopper and
        Pearson: of {counted(floor.nodes.length, "interval")} about one in twenty misses the true value. Battery from the radio alone.
        {survey.outagesLeftOut.length > 0 && ` Scripted outages of ${counted(survey.outagesLeftOut.length, "node")} are left out.`}
      </p>
    </>
  );
}
