import "./drawings.css";
import type { Slot } from "#shared/network/round.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Scroller } from "#src/components/ui/table.tsx";
import { download, fileStem } from "#src/lib/download.ts";
import { fixed, withUnit } from "#src/lib/format.ts";
import { useMedia } from "#src/lib/use-media.ts";
import type { RoundPicture } from "./ribbon-geometry.ts";
import { neededByText, nodeText, occupiedS, roundSum, roundsWord, slotsCsv } from "./slot-facts.ts";

export interface SlotTableProps {
  timing: RoundPicture;
  /** For the names of nodes; null: the scenario has none. */
  floor?: Floor | null;
  /** Share of floods that reached every node that needs the message, by the slot's id; left out where nothing is known. */
  delivered?: Readonly<Record<string, number>>;
  /** What the shares were counted over: "500 floods each", "this run". */
  deliveredOver?: string;
  /** Id of the slot that is looked at. */
  selected?: string | null;
  onSelect?: (slotId: string) => void;
  /** What the file is named after. */
  fileStem?: string;
}

const ms = (seconds: number) => fixed(seconds * 1000, 2);
const us = (seconds: number) => fixed(seconds * 1e6, 0);
const percent = (share: number | undefined) => (share === undefined ? "–" : fixed(share * 100, share > 0.999 && share < 1 ? 3 : 2));
const label = ({ label: words, copy }: Slot) => (copy > 1 ? `${words}, second slot` : words);

/** Every slot of the round with its message, instants and costs; a row may be chosen. */
export function SlotTable(props: SlotTableProps) {
  const { timing, floor, delivered, deliveredOver, fileStem: stem = "round" } = props;
  const phone = useMedia("(max-width: 719px)");
  const file = () => download(`${fileStem(stem)}-slots.csv`, slotsCsv(timing, floor, delivered), "text/csv;charset=utf-8");
  return (
    <div className="slot-table">
      {timing.slots.length === 0 ? <p className="second">The round has no slots.</p> : phone ? <Cards {...props} /> : <Wide {...props} />}
      <div className="slot-foot">
        {phone && <p className="strong">{roundSum(timing)}</p>}
        {delivered && deliveredOver && <p className="note-line">Delivered: to every node that needs the message, {deliveredOver}.</p>}
        <Button small icon="export" onClick={file} className="ml-auto">
          Slots as CSV
        </Button>
      </div>
    </div>
  );
}

function Wide({ timing, floor, delivered, selected, onSelect }: SlotTableProps) {
  const several = timing.loops.length > 1;
  const placed = timing.slots.some(({ from }) => from !== null) || Boolean(floor);
  const rhythm = timing.slots.some(({ everyRounds }) => everyRounds > 1);
  const before = 2 + (placed ? 2 : 1) + Number(rhythm) + 5;
  return (
    <Scroller label="Table of the slots">
      <table className="t">
        <thead>
          <tr>
            <th scope="col" className="r">
              #
            </th>
            <th scope="col">Message</th>
            {placed && <th scope="col">From</th>}
            <th scope="col">Needed by</th>
            {rhythm && <th scope="col">Rounds</th>}
            <th scope="col" className="r">
              Payload, B
            </th>
            <th scope="col" className="r">
              Airtime, µs
            </th>
            <th scope="col" className="r">
              Steps
            </th>
            <th scope="col" className="r">
              Starts, ms
            </th>
            <th scope="col" className="r">
              Ends, ms
            </th>
            <th scope="col" className="r">
              Slot, ms
            </th>
            {delivered && (
              <th scope="col" className="r">
                Delivered, %
              </th>
            )}
          </tr>
        </thead>
        <tbody>
          {timing.slots.map((slot, i) => (
            <tr key={slot.id} className={slot.id === selected ? "on" : undefined} onClick={onSelect && (() => onSelect(slot.id))}>
              <td className="r">{i + 1}</td>
              <th scope="row">
                {onSelect ? (
                  <button type="button" className="link" aria-pressed={slot.id === selected} onClick={() => onSelect(slot.id)}>
                    {label(slot)}
                  </button>
                ) : (
                  label(slot)
                )}
                {several && slot.loop && <span className="pl">{timing.loops.find(({ loop }) => loop === slot.loop)?.name}</span>}
              </th>
              {placed && <td className="nw">{nodeText(floor, slot.from)}</td>}
              <td>{neededByText(floor, slot.to)}</td>
              {rhythm && <td className="nw">{roundsWord(slot)}</td>}
              <td className="r">{slot.payloadBytes}</td>
              <td className="r">{us(slot.airtimeS)}</td>
              <td className="r">{slot.steps}</td>
              <td className="r">{ms(slot.startS)}</td>
              <td className={slot.endS > timing.periodS + 1e-12 ? "r coral strong" : "r"}>{ms(slot.endS)}</td>
              <td className="r">{ms(slot.endS - slot.startS)}</td>
              {delivered && <td className="r">{percent(delivered[slot.id])}</td>}
            </tr>
          ))}
        </tbody>
        <tfoot>
          <tr>
            <td />
            <td colSpan={before - 1}>{roundSum(timing)}</td>
            <td className="r">{ms(occupiedS(timing))}</td>
            {delivered && <td />}
          </tr>
        </tfoot>
      </table>
    </Scroller>
  );
}

/** On a phone: a slot a row, in words. */
function Cards({ timing, floor, delivered, selected, onSelect }: SlotTableProps) {
  const several = timing.loops.length > 1;
  return (
    <ol className="slot-cards">
      {timing.slots.map((slot, i) => {
        const loop = several ? timing.loops.find((one) => one.loop === slot.loop)?.name : undefined;
        const share = delivered?.[slot.id];
        const words = (
          <>
            <span className="slot-line">
              <b>
                {i + 1} {label(slot)}
                {loop && `, ${loop}`}
              </b>
              <span className="num">{withUnit(ms(slot.endS - slot.startS), "ms")}</span>
            </span>
            <span className="second">
              {[
                ...(slot.from === null ? [] : [`${nodeText(floor, slot.from)} to ${neededByText(floor, slot.to)}`]),
                `${withUnit(ms(slot.startS), "ms")} to ${withUnit(ms(slot.endS), "ms")}`,
                `${withUnit(String(slot.payloadBytes), "B")}, ${withUnit(us(slot.airtimeS), "µs")}, ${slot.steps} steps`,
                ...(slot.everyRounds > 1 ? [`rounds ${roundsWord(slot)}`] : []),
                ...(share === undefined ? [] : [`delivered ${withUnit(percent(share), "%")}`]),
              ].join(" · ")}
            </span>
          </>
        );
        return (
          <li key={slot.id} className={slot.id === selected ? "on" : undefined}>
            {onSelect ? (
              <button type="button" aria-pressed={slot.id === selected} onClick={() => onSelect(slot.id)}>
                {words}
              </button>
            ) : (
              words
            )}
          </li>
        );
      })}
    </ol>
  );
}
