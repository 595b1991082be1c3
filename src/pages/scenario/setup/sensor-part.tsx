import { NOISE, NOISE_THEN } from "../model/choices.ts";
import { describeEncoding, shown } from "../model/describe.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { addSensorSignal, moveSensorSignal, removeSensorSignal } from "../model/list-edits.ts";
import { outputNamed, plantOf } from "../model/machine.ts";
import { SignalAt } from "./controller-part.tsx";
import { EncodingFields } from "./encoding-fields.tsx";
import { EntryList } from "./entry-list.tsx";
import { NumberAt, PickAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { CopiesAt } from "./node-fields.tsx";
import { SequenceAt } from "./sequence-field.tsx";

const SENSOR = ["loops", 0, "sensor"] as const;
const SIGNALS = [...SENSOR, "signals"];

export function SensorPart() {
  const { json } = useForm().draft;
  const plant = plantOf(json);
  const signals = (getAt(json, SIGNALS) as { signal: string }[] | undefined) ?? [];
  const used = signals.map(({ signal }) => signal);
  const free = () => plant?.outputs.find(({ name }) => !used.includes(name))?.name ?? plant?.outputs[0]?.name ?? "x1";
  const angles = (path: Path) => outputNamed(json, getAt(json, [...path, "signal"]))?.unit.startsWith("rad");
  const say = (i: number) =>
    `${outputNamed(json, used[i])?.label ?? used[i]}: noise ${shown(json, [...SIGNALS, i, "noiseStd"])}, ${describeEncoding(json, [...SIGNALS, i, "encoding"])}`;
  return (
    <>
      <EntryList
        path={SIGNALS}
        noun="signal"
        addWord="Measure a signal"
        say={say}
        first={() => null}
        ordered
        least={1}
        most={24}
        edits={{
          add: () => addSensorSignal(json, free(), 0.001),
          remove: (index) => removeSensorSignal(json, index),
          move: (from, to) => moveSensorSignal(json, from, to),
        }}
      >
        {(_, path) => (
          <>
            <SignalAt path={[...path, "signal"]} label="Signal" />
            <NumberAt path={[...path, "noiseStd"]} />
            <EncodingFields path={[...path, "encoding"]} first={angles(path) ? { lo: -Math.PI, hi: Math.PI } : { lo: -1, hi: 1 }} />
          </>
        )}
      </EntryList>
      <PickAt path={[...SENSOR, "noise"]} options={NOISE} form />
      {getAt(json, [...SENSOR, "noise", "type"]) === "given" && (
        <>
          <SequenceAt path={[...SENSOR, "noise", "values"]} kind="rows" columns={used.map((name) => outputNamed(json, name)?.label ?? name)} />
          <PickAt path={[...SENSOR, "noise", "then"]} options={NOISE_THEN} />
        </>
      )}
      <CopiesAt path={[...SENSOR, "copies"]} />
      <NumberAt path={[...SENSOR, "busTransferS"]} />
    </>
  );
}
