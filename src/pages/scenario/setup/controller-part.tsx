import { ACKNOWLEDGEMENT, ESTIMATOR, KALMAN_UPDATE, LAW, PLACEMENT } from "../model/choices.ts";
import { shown } from "../model/describe.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { plantOf, signalNamed } from "../model/machine.ts";
import { EntryList } from "./entry-list.tsx";
import { ChoiceAt, NumberAt, PickAt, SwitchAt } from "./fields.tsx";
import { useForm } from "./form.tsx";

const CONTROLLER = ["loops", 0, "controller"] as const;
const LAW_PATH = [...CONTROLLER, "law"];
const ESTIMATOR_PATH = [...CONTROLLER, "estimator"];

const indices = (value: unknown): number[] => (Array.isArray(value) ? value.map((_, i) => i) : []);

/** Kind of controller with its weights, gains or PID figures. */
export function LawFields() {
  const { json } = useForm().draft;
  const law = getAt(json, [...LAW_PATH, "type"]);
  return (
    <>
      <PickAt path={LAW_PATH} options={LAW} form />
      {law === "lqr" && <Weights />}
      {law === "gain" && <Gains />}
      {law === "pid" && <Pid />}
    </>
  );
}

/** Where the controller runs, for how long, and what it learns of its commands. */
export function PlacementFields() {
  const { json } = useForm().draft;
  const apart = getAt(json, [...CONTROLLER, "placement"]) !== "actuator";
  const acknowledgement = getAt(json, [...CONTROLLER, "acknowledgement"]);
  return (
    <>
      <PickAt path={[...CONTROLLER, "placement"]} options={PLACEMENT} />
      <NumberAt path={[...CONTROLLER, "computeS"]} />
      {(apart || acknowledgement !== "none") && <PickAt path={[...CONTROLLER, "acknowledgement"]} options={ACKNOWLEDGEMENT} />}
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
    </>
  );
}

/** Integrals of signals, weighted or with typed gains, as the law has it. */
export function IntegralFields() {
  const { json } = useForm().draft;
  const path = [...LAW_PATH, "integral"];
  const weighted = getAt(json, [...LAW_PATH, "type"]) === "lqr";
  const plant = plantOf(json);
  const used = indices(getAt(json, path)).map((i) => getAt(json, [...path, i, "signal"]));
  const free = plant?.states.find(({ name }) => !used.includes(name))?.name ?? plant?.states[0]?.name ?? "x1";
  const inputs = plant?.inputs ?? [];
  const say = (i: number) => {
    const label = signalNamed(json, used[i])?.label ?? String(used[i]);
    const figure = weighted ? [...path, i, "weight"] : [...path, i, "gain", 0];
    return `${label}, ${weighted ? "weight" : "gain"} ${shown(json, figure)}`;
  };
  return (
    <EntryList
      path={path}
      noun="signal"
      none="None: a constant force on the machine leaves an offset."
      addWord="Integrate a signal"
      say={say}
      first={() => (weighted ? { signal: free, weight: 1 } : { signal: free, gain: inputs.map(() => 0) })}
      most={6}
    >
      {(_, entry) => (
        <>
          <PickAt path={[...entry, "signal"]} label="Of" options={(plant?.states ?? []).map(({ name, label }) => ({ value: name, word: label }))} />
          {weighted ? (
            <NumberAt path={[...entry, "weight"]} label="Weight" />
          ) : (
            indices(getAt(json, [...entry, "gain"])).map((input) => (
              <NumberAt key={input} path={[...entry, "gain", input]} label={inputs.length === 1 ? "Gain" : inputs[input]?.label} />
            ))
          )}
        </>
      )}
    </EntryList>
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

export function EstimatorFields() {
  const { json } = useForm().draft;
  return (
    <>
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
