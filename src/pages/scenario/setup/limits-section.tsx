import { LIMIT, LIMIT_OF } from "../model/choices.ts";
import { describeLimit, describeLimits } from "../model/describe.ts";
import { getAt, type Path } from "../model/json-path.ts";
import { plantOf } from "../model/machine.ts";
import { SignalAt } from "./controller-part.tsx";
import { EntryList } from "./entry-list.tsx";
import { ChoiceAt, NumberAt, PickAt } from "./fields.tsx";
import { useForm } from "./form.tsx";
import { SetupSection } from "./setup-section.tsx";

export function LimitsSection() {
  const { json } = useForm().draft;
  return (
    <SetupSection id="limits" title="Limits" sum={describeLimits(json)}>
      <EntryList
        path={["limits"]}
        noun="limit"
        none="None: the run is shown, and nothing is judged."
        say={(i) => describeLimit(json, i)}
        first={() => ({ type: "within", signal: plantOf(json)?.states[0]?.name ?? "x1", of: "signal", lo: -0.1, hi: 0.1, fromS: 0, untilS: null })}
        ordered
        copies
        most={40}
      >
        {(_, path) => <LimitFields path={path} />}
      </EntryList>
    </SetupSection>
  );
}

function LimitFields({ path }: { path: Path }) {
  const { json } = useForm().draft;
  const type = getAt(json, [...path, "type"]);
  const windowed = type === "within" || type === "rms";
  return (
    <>
      <PickAt path={path} options={LIMIT} form />
      {type !== "saturation" && <SignalAt path={[...path, "signal"]} inputs={windowed} />}
      {windowed && <ChoiceAt path={[...path, "of"]} options={LIMIT_OF} />}
      {type === "within" && (
        <>
          <NumberAt path={[...path, "lo"]} empty="none" />
          <NumberAt path={[...path, "hi"]} empty="none" />
        </>
      )}
      {type === "settle" && (
        <>
          <NumberAt path={[...path, "band"]} />
          <NumberAt path={[...path, "withinS"]} />
          <NumberAt path={[...path, "afterS"]} />
        </>
      )}
      {(type === "rms" || type === "saturation") && <NumberAt path={[...path, "below"]} />}
      {windowed && (
        <>
          <NumberAt path={[...path, "fromS"]} />
          <NumberAt path={[...path, "untilS"]} empty="the end" />
        </>
      )}
    </>
  );
}
