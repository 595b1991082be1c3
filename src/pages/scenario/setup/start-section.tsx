import { describeStart } from "../model/describe.ts";
import { getAt } from "../model/json-path.ts";
import { plantOf } from "../model/machine.ts";
import { NumberAt, SwitchAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { SetupSection } from "./setup-section.tsx";

const START = ["loops", 0, "start"] as const;

export function StartSection() {
  const { json } = useForm().draft;
  const states = plantOf(json)?.states ?? [];
  const state = getAt(json, [...START, "state"]);
  const zeros = () => states.map(() => 0);
  const fields = (key: "state" | "estimate") => states.map(({ name }, i) => <NumberAt key={name} path={[...START, key, i]} />);
  return (
    <SetupSection id="start" title="Start" sum={describeStart(json)}>
      <SwitchAt path={[...START, "state"]} label="Machine" off="at rest" on="away from it" first={zeros} />
      {Array.isArray(state) && fields("state")}
      <SwitchAt
        path={[...START, "estimate"]}
        label="Controller believes"
        off="the truth"
        on="another state"
        first={() => (Array.isArray(state) ? state : zeros())}
      />
      {getAt(json, [...START, "estimate"]) !== null && fields("estimate")}
      <NumberAt path={[...START, "networkJoinsAtS"]} hint="Every message before that is lost." />
    </SetupSection>
  );
}
