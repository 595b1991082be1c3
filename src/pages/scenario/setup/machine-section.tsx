import type { StateSpaceSpec } from "#shared/plants/schema.ts";
import { REST } from "../model/choices.ts";
import { describeMachine } from "../model/describe.ts";
import { getAt } from "../model/json-path.ts";
import { numberText } from "../model/screen-unit.ts";
import { ChoiceAt, NumberAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { SetupSection } from "./setup-section.tsx";

const PLANT = ["loops", 0, "plant"] as const;
const at = (key: string) => [...PLANT, key];

export function MachineSection() {
  const { draft } = useForm();
  const stateSpace = getAt(draft.json, at("type")) === "state-space";
  return (
    <SetupSection id="machine" title="Machine" sum={describeMachine(draft.json)}>
      {stateSpace ? <StateSpace spec={getAt(draft.json, PLANT) as StateSpaceSpec} /> : <Pendulum />}
    </SetupSection>
  );
}

function Pendulum() {
  return (
    <>
      <ChoiceAt path={at("rest")} options={REST} />
      <NumberAt path={at("cartMassKg")} />
      <NumberAt path={at("rodMassKg")} />
      <NumberAt path={at("rodLengthM")} />
      <NumberAt path={at("rodInertiaKgM2")} />
      <NumberAt path={at("cartFrictionNsPerM")} />
      <NumberAt path={at("pivotFrictionNmsPerRad")} />
      <NumberAt path={at("coulombFrictionN")} />
      <NumberAt path={at("coulombSpeedMps")} />
      <NumberAt path={at("halfTrackM")} empty="endless" />
      <NumberAt path={at("gravityMps2")} />
    </>
  );
}

interface MatrixProps {
  name: string;
  rows: readonly (readonly number[])[];
  rowNames: readonly string[];
  columnNames: readonly string[];
}

function Matrix({ name, rows, rowNames, columnNames }: MatrixProps) {
  return (
    <div className="su-matrix">
      <table aria-label={`Matrix ${name}`}>
        <thead>
          <tr>
            <th scope="col">
              <i className="sym">{name}</i>
            </th>
            {columnNames.map((column) => (
              <th scope="col" key={column}>
                {column}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row, i) => (
            <tr key={rowNames[i]}>
              <th scope="row">{rowNames[i]}</th>
              {row.map((value, j) => (
                <td key={columnNames[j]}>{numberText(Number(value.toPrecision(6)))}</td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

const named = (given: { name: string; unit: string }[] | null, letter: string, count: number) =>
  Array.from({ length: count }, (_, i) => given?.[i]?.name ?? `${letter}${i + 1}`);

function StateSpace({ spec }: { spec: StateSpaceSpec }) {
  const states = named(spec.states, "x", spec.a.length);
  const inputs = named(spec.inputs, "u", spec.b[0]?.length ?? 0);
  const outputs = named(spec.outputs, "y", spec.c?.length ?? 0);
  return (
    <>
      <p className="note second pb-2">The matrices are read here; importing a scenario as JSON sets them. Their editor comes in a later version.</p>
      <Matrix name="A" rows={spec.a} rowNames={states} columnNames={states} />
      <Matrix name="B" rows={spec.b} rowNames={states} columnNames={inputs} />
      {spec.c && <Matrix name="C" rows={spec.c} rowNames={outputs} columnNames={states} />}
      {spec.d && <Matrix name="D" rows={spec.d} rowNames={outputs} columnNames={inputs} />}
    </>
  );
}
