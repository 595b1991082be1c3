import { describeRun } from "../model/describe.ts";
import { NumberAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { SetupSection } from "./setup-section.tsx";

export function RunSection() {
  const { json } = useForm().draft;
  return (
    <SetupSection id="run" title="Run" sum={describeRun(json)}>
      <NumberAt path={["run", "durationS"]} />
      <NumberAt path={["run", "seed"]} hint="Same revision and seed: the same run, bit for bit." />
      <NumberAt path={["run", "absoluteTolerance"]} />
      <NumberAt path={["run", "relativeTolerance"]} />
    </SetupSection>
  );
}
