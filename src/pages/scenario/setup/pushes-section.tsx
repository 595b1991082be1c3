import { PUSH } from "../model/choices.ts";
import { describeChange, describePush, describePushes } from "../model/describe.ts";
import { changeable } from "../model/field-spec.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { plantOf } from "../model/machine.ts";
import { firstChannel } from "../model/variants.ts";
import { EntryList } from "./entry-list.tsx";
import { NumberAt, PickAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { SequenceAt } from "./sequence-field.tsx";
import { SetupSection } from "./setup-section.tsx";

export function PushesSection() {
  const { json } = useForm().draft;
  const parameters = changeable(json);
  const firstParameter = parameters[1] ?? parameters[0];
  return (
    <SetupSection id="pushes" title="Pushes" sum={describePushes(json)}>
      <EntryList
        path={["pushes"]}
        noun="push"
        none="None: nothing pushes the machine."
        say={(i) => describePush(json, i)}
        first={() => ({ type: "impulse", channel: firstChannel(json), atS: 2, size: 0.5 })}
        ordered
        copies
        most={200}
      >
        {(_, path) => <PushFields path={path} />}
      </EntryList>
      {parameters.length > 0 && (
        <>
          <p className="sub3">Changes of the machine in mid-run</p>
          <EntryList
            path={["changes"]}
            noun="change"
            none="None. A change is one that the controller does not know of, such as a load taken on."
            say={(i) => describeChange(json, i)}
            first={() => ({ atS: 2, parameter: firstParameter.value, value: getAt(json, ["loops", 0, "plant", firstParameter.value]) })}
            copies
            most={200}
          >
            {(_, path) => (
              <>
                <PickAt path={[...path, "parameter"]} options={parameters} />
                <NumberAt path={[...path, "value"]} />
                <NumberAt path={[...path, "atS"]} />
              </>
            )}
          </EntryList>
        </>
      )}
    </SetupSection>
  );
}

const FIELDS: Record<string, readonly { key: string; empty?: string }[]> = {
  impulse: [{ key: "size" }, { key: "atS" }],
  step: [{ key: "size" }, { key: "fromS" }, { key: "untilS", empty: "the end" }],
  ramp: [{ key: "size" }, { key: "fromS" }, { key: "untilS" }],
  sine: [{ key: "amplitude" }, { key: "frequencyHz" }, { key: "phaseRad" }, { key: "fromS" }, { key: "untilS", empty: "the end" }],
  noise: [{ key: "std" }, { key: "intervalS" }, { key: "fromS" }, { key: "untilS", empty: "the end" }],
  given: [{ key: "fromS" }, { key: "intervalS" }],
};

function PushFields({ path }: { path: Path }) {
  const { json } = useForm().draft;
  const type = String(getAt(json, [...path, "type"]));
  const channels = (plantOf(json)?.channels ?? []).map(({ name, label }) => ({ value: name, word: label }));
  return (
    <>
      <PickAt path={path} options={PUSH} form />
      <PickAt path={[...path, "channel"]} options={channels} />
      {(FIELDS[type] ?? []).map(({ key, empty }) => (
        <NumberAt key={key} path={[...path, key]} empty={empty} />
      ))}
      {type === "given" && <SequenceAt path={[...path, "values"]} kind="numbers" />}
    </>
  );
}
