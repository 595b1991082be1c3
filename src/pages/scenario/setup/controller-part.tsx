import type { ReactNode } from "react";
import { ACKNOWLEDGEMENT, ESTIMATOR, KALMAN_UPDATE, LAW, PLACEMENT } from "../model/choices.ts";
import { shown } from "../model/describe.ts";
import { fieldSpec } from "../model/field-spec.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { plantOf, signalNamed } from "../model/machine.ts";
import { EntryList } from "./entry-list.tsx";
import { ChoiceAt, NumberAt, PickAt, SwitchAt } from "./fields.tsx";
import { useForm } from "./form.tsx";

const CONTROLLER = ["loops", 0, "controller"] as const;
const LAW_PATH = [...CONTROLLER, "law"];
const ESTIMATOR_PATH = [...CONTROLLER, "estimator"];

const indices = (value: unknown): number[] => (Array.isArray(value) ? value.map((_, i) => i) : []);

export function ControllerPart() {
  const { json } = useForm().draft;
  const law = getAt(json, [...LAW_PATH, "type"]);
  return (
    <>
      <PickAt path={LAW_PATH} options={LAW} form />
      {law === "lqr" && <Weights />}
      {law === "gain" && <Gains />}
      {law === "pid" ? <Pid /> : <Estimator />}
      <p className="sub3">Place and time</p>
      <PickAt path={[...CONTROLLER, "placement"]} options={PLACEMENT} />
      <NumberAt path={[...CONTROLLER, "computeS"]} />
      {(getAt(json, [...CONTROLLER, "placement"]) !== "actuator" || getAt(json, [...CONTROLLER, "acknowledgement"]) !== "none") && (
        <PickAt path={[...CONTROLLER, "acknowledgement"]} options={ACKNOWLEDGEMENT} />
      )}
      <OwnLimits />
    </>
  );
}

function Weights() {
  const { json } = useForm().draft;
  return (
    <>
      <p className="sub3">Weights</p>
      {indices(getAt(json, [...LAW_PATH, "stateWeights"])).map((i) => (
        <NumberAt key={`x${i}`} path={[...LAW_PATH, "stateWeights", i]} />
      ))}
      {indices(getAt(json, [...LAW_PATH, "inputWeights"])).map((i) => (
        <NumberAt key={`u${i}`} path={[...LAW_PATH, "inputWeights", i]} />
      ))}
      <Integral first={(signal) => ({ signal, weight: 1 })}>{(path) => <NumberAt path={[...path, "weight"]} label="Weight" />}</Integral>
    </>
  );
}

function Gains() {
  const { json } = useForm().draft;
  const plant = plantOf(json);
  const inputs = indices(getAt(json, [...LAW_PATH, "gain"]));
  return (
    <>
      {inputs.map((input) => (
        <div key={input}>
          <p className="sub3">{inputs.length === 1 ? "Gains" : `Gains, ${plant?.inputs[input]?.label ?? `input ${input + 1}`}`}</p>
          {indices(getAt(json, [...LAW_PATH, "gain", input])).map((state) => (
            <NumberAt key={state} path={[...LAW_PATH, "gain", input, state]} />
          ))}
        </div>
      ))}
      <Integral first={(signal) => ({ signal, gain: inputs.map(() => 0) })}>
        {(path) =>
          indices(getAt(json, [...path, "gain"])).map((input) => (
            <NumberAt key={input} path={[...path, "gain", input]} label={inputs.length === 1 ? "Gain" : plant?.inputs[input]?.label} />
          ))
        }
      </Integral>
    </>
  );
}

function Integral({ first, children }: { first: (signal: string) => unknown; children: (path: Path) => ReactNode }) {
  const { json } = useForm().draft;
  const path = [...LAW_PATH, "integral"];
  const outputs = plantOf(json)?.outputs ?? [];
  const used = indices(getAt(json, path)).map((i) => getAt(json, [...path, i, "signal"]));
  const free = outputs.find(({ name }) => !used.includes(name)) ?? outputs[0];
  const say = (i: number) => {
    const { label } = fieldSpec(json, [...path, i, "weight"]);
    const value = getAt(json, [...path, i, "weight"]);
    return value === undefined ? label : `${label}, weight ${shown(json, [...path, i, "weight"])}`;
  };
  return (
    <>
      <p className="sub3">Integral action</p>
      <EntryList
        path={path}
        noun="signal"
        none="None: a constant force on the machine leaves an offset."
        addWord="Integrate a signal"
        say={say}
        first={() => first(free?.name ?? "x1")}
        most={6}
      >
        {(_, entry) => (
          <>
            <SignalAt path={[...entry, "signal"]} label="Of" />
            {children(entry)}
          </>
        )}
      </EntryList>
    </>
  );
}

/** Chooses one of the machine's signals. */
export function SignalAt({ path, label, inputs = false }: { path: Path; label?: string; inputs?: boolean }) {
  const { json } = useForm().draft;
  const plant = plantOf(json);
  const signals = [...(plant?.outputs ?? []), ...(inputs ? (plant?.inputs ?? []) : [])];
  return <PickAt path={path} label={label} options={signals.map((signal) => ({ value: signal.name, word: signal.label }))} />;
}

function Pid() {
  const { json } = useForm().draft;
  const measured = indices(getAt(json, ["loops", 0, "sensor", "signals"])).map((i) =>
    String(getAt(json, ["loops", 0, "sensor", "signals", i, "signal"])),
  );
  return (
    <>
      <PickAt path={[...LAW_PATH, "signal"]} options={measured.map((value) => ({ value, word: signalNamed(json, value)?.label ?? value }))} />
      <NumberAt path={[...LAW_PATH, "proportional"]} />
      <NumberAt path={[...LAW_PATH, "integral"]} />
      <NumberAt path={[...LAW_PATH, "derivative"]} />
      <NumberAt path={[...LAW_PATH, "filterS"]} />
    </>
  );
}

function Estimator() {
  const { json } = useForm().draft;
  return (
    <>
      <p className="sub3">Estimator</p>
      <PickAt path={ESTIMATOR_PATH} options={ESTIMATOR} form label="Estimate" />
      {getAt(json, [...ESTIMATOR_PATH, "type"]) === "kalman" && (
        <>
          <ChoiceAt path={[...ESTIMATOR_PATH, "update"]} options={KALMAN_UPDATE} />
          <p className="sub3">Process noise</p>
          {indices(getAt(json, [...ESTIMATOR_PATH, "processNoise"])).map((i) => (
            <NumberAt key={i} path={[...ESTIMATOR_PATH, "processNoise", i]} />
          ))}
          <p className="sub3">Assumed sensor noise, RMS</p>
          {indices(getAt(json, [...ESTIMATOR_PATH, "measurementNoise"])).map((i) => (
            <NumberAt key={i} path={[...ESTIMATOR_PATH, "measurementNoise", i]} />
          ))}
        </>
      )}
    </>
  );
}

/** Limits that the controller keeps itself, tighter than the drive's. */
function OwnLimits() {
  const { json } = useForm().draft;
  const path = [...CONTROLLER, "limits"];
  const limits = getAt(json, path);
  const drive = getAt(json, ["loops", 0, "actuator", "inputs"]);
  const first = () => (Array.isArray(drive) ? drive.map(({ lo, hi, ratePerS }) => ({ lo, hi, ratePerS })) : []);
  return (
    <>
      <SwitchAt path={path} label="Limits its command" off="as the drive" on="own" first={first} />
      {indices(limits).map((i) => (
        <div key={i}>
          <NumberAt path={[...path, i, "lo"]} />
          <NumberAt path={[...path, i, "hi"]} />
          <NumberAt path={[...path, i, "ratePerS"]} empty="no limit" />
        </div>
      ))}
    </>
  );
}
