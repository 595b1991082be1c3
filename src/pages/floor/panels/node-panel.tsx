import { useState } from "react";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { Button, IconButton } from "#src/components/ui/button.tsx";
import { Field, type Problem, ProblemNote } from "#src/components/ui/field.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { significant, withUnit } from "#src/lib/format.ts";
import { append, remove } from "#src/pages/scenario/model/list-edits.ts";
import { NumberAt, TextAt } from "#src/pages/scenario/setup/fields.tsx";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import { CellAt } from "../cell-at.tsx";
import { duplicateNode, freeNumber, NODES, renumberNode } from "../model/floor-edits.ts";
import type { Studio } from "../use-studio.ts";

interface NodePanelProps {
  floor: Floor;
  index: number;
  /** "relay · first received in step 3" */
  sum: string;
  radioDbm: number;
  studio: Studio;
  onRemove: () => void;
}

const upTo = (most: number): string => `0 to ${significant(most, 4)}`;

/** One node: everything that can be dragged can be typed. */
export function NodePanel({ floor, index, sum, radioDbm, studio, onRemove }: NodePanelProps) {
  const { draft, edit, readOnly } = useForm();
  const node = floor.nodes[index];
  const path = [...NODES, index];
  const copy = () => {
    const made = duplicateNode(draft.json, index);
    if (!made) return;
    edit(made.edit);
    studio.select({ kind: "node", id: made.id });
  };
  return (
    <Section title={`Node ${node.id}`} sum={sum} defaultOpen>
      <div className="nf">
        <NumberField key={node.id} floor={floor} index={index} studio={studio} />
        <TextAt path={[...path, "name"]} />
        <NumberAt path={[...path, "xM"]} range={upTo(floor.widthM)} />
        <NumberAt path={[...path, "yM"]} range={upTo(floor.depthM)} />
        <NumberAt path={[...path, "heightM"]} />
        <NumberAt path={[...path, "txPowerDbm"]} empty={`${significant(radioDbm, 4)}`} />
        <Outages index={index} />
        <WayTable floor={floor} index={index} studio={studio} />
      </div>
      {!readOnly && (
        <div className="fl-acts">
          <Button small impossible={freeNumber(floor) === null ? "A floor has at most 120 nodes." : null} onClick={copy}>
            Duplicate
          </Button>
          <Button small kind="back" onClick={onRemove}>
            Remove node {node.id}
          </Button>
        </div>
      )}
    </Section>
  );
}

/** The node's number: another one only when nobody has it. Loops and messages that name the node go along. */
function NumberField({ floor, index, studio }: { floor: Floor; index: number; studio: Studio }) {
  const { draft, edit, readOnly } = useForm();
  const { id } = floor.nodes[index];
  const [text, setText] = useState(String(id));
  const value = Number(text.trim());
  const taken = floor.nodes.some((node, i) => i !== index && node.id === value);
  const whole = /^\d+$/.test(text.trim());
  const problem: Problem | null = !whole
    ? { title: text.trim() === "" ? "The number is empty." : `“${text.trim()}” is no whole number.`, text: "Enter 1 to 999." }
    : value < 1 || value > 999
      ? { title: `The number is ${value}: 1 to 999 is permitted.` }
      : taken
        ? { title: `There is a node ${value} already.`, text: `${freeNumber(floor) ?? id} is free.` }
        : null;
  const commit = () => {
    if (problem || value === id) return;
    edit(renumberNode(draft.json, index, value));
    studio.select({ kind: "node", id: value });
  };
  return (
    <Field
      label="Number"
      value={text}
      onText={setText}
      range="1 to 999"
      inputMode="numeric"
      problem={problem}
      readOnly={readOnly}
      onBlur={commit}
      onKeyDown={(event) => {
        if (event.key === "Enter") commit();
        if (event.key === "Escape") setText(String(id));
      }}
    />
  );
}

function Problems({ paths }: { paths: readonly string[] }) {
  const { issues } = useForm();
  const own = issues.filter((issue) => paths.some((path) => issue.path.startsWith(path)));
  return (
    <>
      {own.map((issue) => (
        <ProblemNote key={`${issue.path} ${issue.code}`} problem={{ title: issue.rule, text: issue.more || undefined }} />
      ))}
    </>
  );
}

function Outages({ index }: { index: number }) {
  const { draft, edit, readOnly } = useForm();
  const path = [...NODES, index, "outages"];
  const outages = (draft.json as { floor: Floor }).floor.nodes[index].outages;
  const last = outages.at(-1);
  const add = () =>
    edit(
      append(draft.json, path, {
        fromS: Number(((last?.untilS ?? last?.fromS ?? 0) + 1).toFixed(3)),
        untilS: Number(((last?.untilS ?? last?.fromS ?? 0) + 2).toFixed(3)),
      }),
    );
  return (
    <>
      <div className="field wide">
        <span className="lab">Out of service</span>
        <span className="fl-line">
          {outages.length === 0 && <span className="second">never</span>}
          {!readOnly && (
            <Button small kind="bare" impossible={outages.length >= 50 ? "At most 50." : null} onClick={add}>
              Add
            </Button>
          )}
        </span>
      </div>
      {outages.length > 0 && (
        <table className="t fl-cells">
          <thead>
            <tr>
              <th className="r">From, s</th>
              <th className="r">Until, s</th>
              <th>
                <span className="vh">Remove</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {outages.map((_, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: outages have no other name
              <tr key={i}>
                <td className="r">
                  <CellAt path={[...path, i, "fromS"]} label={`Outage ${i + 1}, from, s`} />
                </td>
                <td className="r">
                  <CellAt path={[...path, i, "untilS"]} label={`Outage ${i + 1}, until, s`} empty="the end" />
                </td>
                <td className="r">
                  {!readOnly && (
                    <IconButton
                      small
                      kind="bare"
                      icon="cross"
                      iconSize={12}
                      label={`Remove outage ${i + 1}`}
                      onClick={() => edit(remove(draft.json, path, i))}
                    />
                  )}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
      <Problems paths={[`floor.nodes[${index}].outages`]} />
    </>
  );
}

/** Where the node is at later times. */
function WayTable({ floor, index, studio }: { floor: Floor; index: number; studio: Studio }) {
  const { draft, edit, readOnly } = useForm();
  const node = floor.nodes[index];
  const path = [...NODES, index, "wayPoints"];
  const last = node.wayPoints.at(-1) ?? { atS: 0, xM: node.xM, yM: node.yM };
  const add = () => {
    const xM = Number((last.xM + 5 <= floor.widthM ? last.xM + 5 : Math.max(0, last.xM - 5)).toFixed(1));
    edit(append(draft.json, path, { atS: Number((last.atS + 5).toFixed(1)), xM, yM: last.yM }));
  };
  const speed = (i: number): number => {
    const from = i === 0 ? { atS: 0, xM: node.xM, yM: node.yM } : node.wayPoints[i - 1];
    const to = node.wayPoints[i];
    return Math.hypot(to.xM - from.xM, to.yM - from.yM) / (to.atS - from.atS);
  };
  return (
    <>
      <div className="field wide">
        <span className="lab">Way-points</span>
        <span className="fl-line">
          {node.wayPoints.length === 0 && <span className="second">stays</span>}
          {!readOnly && (
            <>
              <Button small kind="bare" onClick={() => studio.setTool("way")}>
                Draw
              </Button>
              <Button small kind="bare" impossible={node.wayPoints.length >= 200 ? "At most 200." : null} onClick={add}>
                Add
              </Button>
            </>
          )}
        </span>
      </div>
      {node.wayPoints.length > 0 && (
        <table className="t fl-cells">
          <thead>
            <tr>
              <th className="r">At, s</th>
              <th className="r">Across, m</th>
              <th className="r">Down, m</th>
              <th className="r">Speed</th>
              <th>
                <span className="vh">Remove</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {node.wayPoints.map((_, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: way-points have no other name
              <tr key={i}>
                <td className="r">
                  <CellAt path={[...path, i, "atS"]} label={`Way-point ${i + 1}, time, s`} />
                </td>
                <td className="r">
                  <CellAt path={[...path, i, "xM"]} label={`Way-point ${i + 1}, across, m`} />
                </td>
                <td className="r">
                  <CellAt path={[...path, i, "yM"]} label={`Way-point ${i + 1}, down, m`} />
                </td>
                <td className="r nw second">{speed(i) > 0 && Number.isFinite(speed(i)) ? withUnit(significant(speed(i), 2), "m/s") : "–"}</td>
                <td className="r">
                  {!readOnly && (
                    <IconButton
                      small
                      kind="bare"
                      icon="cross"
                      iconSize={12}
                      label={`Remove way-point ${i + 1}`}
                      onClick={() => edit(remove(draft.json, path, i))}
                    />
                  )}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
      <Problems paths={[`floor.nodes[${index}].wayPoints`]} />
    </>
  );
}
