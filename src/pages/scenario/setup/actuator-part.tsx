import { ON_LOSS, PLAN_END, SILENCE } from "../model/choices.ts";
import { getAt } from "../model/json-path.ts";
import { plantOf } from "../model/machine.ts";
import { EncodingFields } from "./encoding-fields.tsx";
import { ChoiceAt, NumberAt, SwitchAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { CopiesAt } from "./node-fields.tsx";

const ACTUATOR = ["loops", 0, "actuator"] as const;
const at = (...keys: (string | number)[]) => [...ACTUATOR, ...keys];

/** What acts when a command does not arrive. */
export function OnLossFields() {
  const { json } = useForm().draft;
  const plan = getAt(json, at("onLoss", "policy")) === "plan";
  if (getAt(json, ["loops", 0, "controller", "placement"]) === "actuator" && !plan) return null;
  return (
    <>
      <ChoiceAt path={at("onLoss")} options={ON_LOSS} form />
      {plan && (
        <>
          <NumberAt path={at("onLoss", "length")} />
          <ChoiceAt path={at("onLoss", "end")} options={PLAN_END} />
        </>
      )}
    </>
  );
}

export function ActuatorPart() {
  const { json } = useForm().draft;
  const inputs = (getAt(json, at("inputs")) as { lo: number; hi: number }[] | undefined) ?? [];
  return (
    <>
      {inputs.map((input, i) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: one per input of the machine, in its order
        <div key={i}>
          {inputs.length > 1 && <p className="sub3">{plantOf(json)?.inputs[i]?.label ?? `Input ${i + 1}`}</p>}
          <NumberAt path={at("inputs", i, "lo")} />
          <NumberAt path={at("inputs", i, "hi")} />
          <NumberAt path={at("inputs", i, "ratePerS")} empty="no limit" />
          <EncodingFields path={at("inputs", i, "encoding")} first={{ lo: input.lo, hi: input.hi }} />
        </div>
      ))}
      <CopiesAt path={at("copies")} />
      <p className="sub3">Drive</p>
      <NumberAt path={at("lagS")} />
      <NumberAt path={at("deadTimeS")} />
      <NumberAt path={at("busTransferS")} />
    </>
  );
}

export function SilenceFields() {
  const { json } = useForm().draft;
  const reaction = getAt(json, at("silence", "reaction"));
  const brakes = plantOf(json)?.brake !== undefined;
  const first = () => ({ afterLost: 10, reaction: "ramp", rampS: 0.2, brakeN: 0, resumeAfter: null });
  return (
    <>
      <SwitchAt path={at("silence")} label="Commands missing" off="ignored" on="reacts" first={first} />
      {getAt(json, at("silence")) !== null && (
        <>
          <NumberAt path={at("silence", "afterLost")} hint="So many commands lost in a row." />
          <ChoiceAt
            path={at("silence", "reaction")}
            options={brakes ? SILENCE : SILENCE.filter(({ value }) => value !== "brake" || value === reaction)}
          />
          {reaction === "ramp" && <NumberAt path={at("silence", "rampS")} />}
          {reaction === "brake" && <NumberAt path={at("silence", "brakeN")} />}
          <NumberAt path={at("silence", "resumeAfter")} empty="never" hint="So many commands delivered in a row." />
        </>
      )}
    </>
  );
}
